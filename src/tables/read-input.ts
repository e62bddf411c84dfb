import { closeSync, fstatSync, openSync, readSync } from "node:fs";
import { InputError, systemReason } from "../errors.js";

/** Largest file read, in bytes; far above any table. */
const MAX_FILE_BYTES = 2 ** 30;

const CHUNK_BYTES = 2 ** 16;

/** How a file is read; all may be left out. */
export interface InputLimits {
  /** A huge or endless file is read this far at most; 2^30 where it is left out. */
  readonly maxBytes?: number;
  /** The file's name in messages, such as the option that gave it and its path. */
  readonly where?: string;
  /** What is expected there, for messages: a `file`, a `study`. */
  readonly what?: string;
}

/**
 * A file's bytes; an unreadable file is the user's to mend.
 *
 * @param path - a file or a pipe
 * @throws InputError if the file cannot be read, or has more bytes than it may have
 */
export function readInput(path: string, limits: InputLimits = {}): Buffer {
  const { maxBytes = MAX_FILE_BYTES, where = path, what = "file" } = limits;
  let chunks: Buffer[] | undefined;
  try {
    chunks = readChunks(path, maxBytes);
  } catch (cause) {
    throw unreadable(where, cause);
  }
  if (chunks !== undefined) return Buffer.concat(chunks);
  throw new InputError(
    `${where}: expected a ${what} of at most ${maxBytes} bytes, got more. Is this the right file?`,
  );
}

/** The one wording for a file that the system does not let us read. */
export function unreadable(where: string, cause: unknown): InputError {
  return new InputError(`${where}: could not be read: ${systemReason(cause)}. Check the path.`, { cause });
}

/** All of a file in chunks; undefined if it has more than `maxBytes` bytes. */
function readChunks(path: string, maxBytes: number): Buffer[] | undefined {
  const file = openSync(path, "r");
  try {
    const stat = fstatSync(file);
    if (stat.isFile() && stat.size > maxBytes) return undefined;
    const chunks: Buffer[] = [];
    for (let length = 0; length <= maxBytes; ) {
      const chunk = Buffer.alloc(Math.min(CHUNK_BYTES, maxBytes + 1 - length));
      const count = readSync(file, chunk);
      if (count === 0) return chunks;
      chunks.push(chunk.subarray(0, count));
      length += count;
    }
    return undefined;
  } finally {
    closeSync(file);
  }
}
