import { refuse, requireInteger } from "../require.js";

/**
 * A whole number from the command line.
 *
 * @param where - the command and the option, for messages
 * @throws InputError for a text that is no number, naming the text, and for a number outside [minimum, maximum]
 */
export function integerOption(
  where: string,
  text: string,
  minimum: number,
  maximum: number,
  mend = "",
): number {
  const value = text.trim() === "" ? Number.NaN : Number(text);
  if (Number.isNaN(value)) refuse(where, `an integer from ${minimum} to ${maximum}`, text, mend);
  requireInteger(where, value, minimum, mend, maximum);
  return value;
}
