import { closeSync, openSync, readSync } from "node:fs";
import { InputError, systemReason } from "../errors.js";

/** Largest file read, in bytes; far above any table. */
const MAX_FILE_BYTES = 2 ** 30;

const CHUNK_BYTES = 2 ** 16;

/**
 * A file's bytes; an unreadable file is the user's to mend.
 *
 * @param path - a file or a pipe
 * @param maxBytes - reading stops one byte beyond, so that a huge or endless file costs nothing
 * @throws InputError if the file cannot be read, or is larger than any file of ours
 */
export function readInput(path: string, maxBytes = MAX_FILE_BYTES): Uint8Array {
  const bytes = readAtMost(path, maxBytes + 1);
  if (bytes.length > MAX_FILE_BYTES) {
    throw new InputError(
      `${path}: expected a file of at most ${MAX_FILE_BYTES} bytes, got more. Is this the right file?`,
    );
  }
  return bytes;
}

function readAtMost(path: string, limit: number): Uint8Array {
  const chunks: Buffer[] = [];
  let length = 0;
  try {
    const file = openSync(path, "r");
    try {
      while (length < limit) {
        const chunk = Buffer.alloc(Math.min(CHUNK_BYTES, limit - length));
        const count = readSync(file, chunk);
        if (count === 0) break;
        chunks.push(chunk.subarray(0, count));
        length += count;
      }
    } finally {
      closeSync(file);
    }
  } catch (cause) {
    throw new InputError(`${path}: could not be read: ${systemReason(cause)}. Check the path.`, { cause });
  }
  return Buffer.concat(chunks);
}
