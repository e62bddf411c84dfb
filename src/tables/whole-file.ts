import { mkdirSync, statSync } from "node:fs";
import { dirname } from "node:path";
import writeFileAtomic from "write-file-atomic";
import { InputError } from "../errors.js";

/**
 * Writes a file whole or not at all: beside its place, synced, then renamed. An old file stays until then, and stays
 * intact if anything fails. Makes the folder if it is missing.
 *
 * @throws InputError if the place cannot be written, with the reason of the operating system
 */
export function writeWhole(path: string, bytes: Uint8Array | string): void {
  try {
    mkdirSync(dirname(path), { recursive: true });
    if (statSync(path, { throwIfNoEntry: false })?.isDirectory()) {
      throw new InputError(`${path}: expected a place for a file, got a folder. Name a file in it.`);
    }
    writeFileAtomic.sync(path, Buffer.from(bytes as Uint8Array), { fsync: true });
  } catch (cause) {
    if (cause instanceof InputError) throw cause;
    const reason = (cause as Error).message;
    throw new InputError(
      `${path}: could not be written: ${reason}. Nothing was changed; choose another folder or free space.`,
      { cause },
    );
  }
}
