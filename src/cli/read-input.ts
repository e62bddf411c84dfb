import { readFileSync } from "node:fs";
import { InputError } from "../errors.js";

/** A file's bytes; an unreadable file is the user's to mend. */
export function readInput(path: string): Uint8Array {
  try {
    return readFileSync(path);
  } catch (cause) {
    throw new InputError(`${path}: could not be read: ${(cause as Error).message}. Check the path.`, {
      cause,
    });
  }
}
