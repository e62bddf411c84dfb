/**
 * What changes a terminal or the order of its letters: control characters other than the end of a line and the tab, and
 * marks of the direction of writing.
 */
// biome-ignore lint/suspicious/noControlCharactersInRegex: they are what is looked for
const UNSAFE = /[\u0000-\u0008\u000b-\u001f\u007f-\u009f\u061c\u200e\u200f\u202a-\u202e\u2066-\u2069]/g;

/** A text for people with such characters written out, `\u001b`: titles, names and notes come from others' files. */
export function printable(text: string): string {
  return text.replace(UNSAFE, (found) => `\\u${found.charCodeAt(0).toString(16).padStart(4, "0")}`);
}

/** Prints a text for people; false where standard output cannot take more before it drains. */
export function print(text: string): boolean {
  return process.stdout.write(printable(text));
}

/** Prints a value as JSON, for programs. */
export function printJson(value: unknown): void {
  process.stdout.write(`${JSON.stringify(value, null, 2)}\n`);
}

/** Prints an error for people. */
export function printError(text: string): void {
  process.stderr.write(printable(text));
}
