import { InputError, InternalError } from "./errors.js";

/** Longest value a message shows, in characters. */
const MAX_SHOWN = 60;

/** A value for an error message: as JSON, quoted where it is text, cut behind 60 characters; `nothing` for undefined. */
export function shown(value: unknown): string {
  if (value === undefined) return "nothing";
  let text = "";
  for (const piece of piecesOf(value)) {
    text += piece;
    if (text.length > MAX_SHOWN) return `${text.slice(0, MAX_SHOWN)}...`;
  }
  return text;
}

/** A value as JSON piece by piece: what contains itself, or repeats itself without end, is to be cut like the rest. */
function* piecesOf(value: unknown): Generator<string> {
  if (typeof value === "string") yield JSON.stringify(value);
  else if (typeof value !== "object" || value === null) yield String(value);
  else {
    const isList = Array.isArray(value);
    yield isList ? "[" : "{";
    for (const [k, key] of Object.keys(value).entries()) {
      yield `${k === 0 ? "" : ","}${isList ? "" : `${JSON.stringify(key)}:`}`;
      yield* piecesOf((value as Readonly<Record<string, unknown>>)[key]);
    }
    yield isList ? "]" : "}";
  }
}

/**
 * Throws an InputError in the one wording all argument checks share: where, expected, got, how to mend it.
 *
 * @param where - the function or the field, e.g. `isoscalarFactor: q`
 * @param expected - what would have been right, e.g. `an integer >= 0`
 * @param mend - a sentence that says what to do; may be empty
 */
export function refuse(where: string, expected: string, got: unknown, mend = ""): never {
  throw new InputError(`${where}: expected ${expected}, got ${shown(got)}.${mend === "" ? "" : ` ${mend}`}`);
}

/** Checks for an integer in [minimum, maximum]; throws InputError otherwise. */
export function requireInteger(
  where: string,
  value: number,
  minimum: number,
  mend = "",
  maximum = Number.MAX_SAFE_INTEGER,
): void {
  if (Number.isInteger(value) && value >= minimum && value <= maximum) return;
  const range =
    maximum === Number.MAX_SAFE_INTEGER
      ? `an integer >= ${minimum}`
      : `an integer from ${minimum} to ${maximum}`;
  refuse(where, range, value, mend);
}

/** Checks for a finite number > 0; throws InputError otherwise. */
export function requirePositive(where: string, value: number, mend = ""): void {
  if (Number.isFinite(value) && value > 0) return;
  refuse(where, "a finite number > 0", value, mend);
}

/** Checks an identity that must hold whatever the input; a failure is our bug and throws InternalError. */
export function requireIdentity(where: string, holds: boolean, detail: () => string): void {
  if (holds) return;
  throw new InternalError(
    `${where}: ${detail()}. This is a bug in Couplet; please report it with the command you ran.`,
  );
}
