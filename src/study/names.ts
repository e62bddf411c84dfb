/** Names that a hadron or multiplet may have, for editors: printable ASCII without blanks, commas, `=` and `->`. */
export const NAME_PATTERN = "^(?!.*->)(?=.*[A-Za-z0-9])[!-+.-<>-~\\-]+$";

/**
 * What is wrong with the name of a hadron or a multiplet, in words, or undefined.
 *
 * Channels, lists and tables take names apart at blanks, commas, `->` and `=`, and letters of other scripts look like Latin
 * ones but are not found by them. Names that every object of the language has are kept for itself.
 * @example nameProblem("Xi (1874)") // 'expected a name without blanks, got "Xi (1874)". Write `Xi(1874)`'
 */
export function nameProblem(name: string): string | undefined {
  const got = `got ${JSON.stringify(name)}`;
  if (name === "") return `expected a name, ${got}`;
  const foreign = [...name].find((letter) => letter > "~" && !/[\p{C}\p{Z}]/u.test(letter));
  if (foreign !== undefined) {
    const kind = /\p{L}/u.test(foreign) ? "not Latin" : "not of ASCII";
    return `expected a name of Latin letters, digits and signs, ${got}: ${JSON.stringify(foreign)} (U+${codePoint(foreign)}) is ${kind}. Write it out, such as \`Xi\` or \`N\``;
  }
  const plain = name.replace(/[\s\p{C}\p{Z}]+/gu, "");
  if (plain !== name) {
    const mend = plain === "" ? "Give it one" : `Write \`${plain}\``;
    return `expected a name without ${/[^\P{C}\t\n\r]/u.test(name) ? "control characters" : "blanks"}, ${got}. ${mend}`;
  }
  const sign = ["->", ",", "="].find((part) => name.includes(part));
  if (sign !== undefined)
    return `expected a name without \`${sign}\`, ${got}. Leave it out: channels and lists have it between names`;
  if (!/[A-Za-z0-9]/.test(name))
    return `expected a name with a letter or a digit, ${got}. Write one such as \`Xi(1874)\``;
  if (name in {}) return `expected a name that JavaScript has not taken, ${got}. Choose another`;
  return undefined;
}

function codePoint(letter: string): string {
  return letter.codePointAt(0)!.toString(16).toUpperCase().padStart(4, "0");
}
