/** Functions of the library that check what a person typed or wrote; their own messages begin with their names. */
const FUNCTIONS = [
  "couplingPaths",
  "findMinima",
  "isoscalarTable",
  "parseIrrep",
  "placeOf: name",
  "productContent: factor",
  "productContent",
  "pseudoExperiments",
  "stateCoefficients",
  "widthModel: id",
];
const FUNCTION_NAME = new RegExp(`(^|: )(?:${FUNCTIONS.join("|")}): `, "gm");

/**
 * The message of an error for somebody at the command line: who wrote it first, once, and no names of functions, which
 * are for callers of the library.
 */
export function errorText(message: string): string {
  const text = message.replace(FUNCTION_NAME, "$1");
  return text.startsWith("couplet ") ? text : `couplet: ${text}`;
}
