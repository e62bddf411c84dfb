import {
  closeSync,
  fsyncSync,
  mkdirSync,
  openSync,
  renameSync,
  rmdirSync,
  rmSync,
  statSync,
  writeSync,
} from "node:fs";
import { basename, dirname, join } from "node:path";
import writeFileAtomic from "write-file-atomic";
import { CoupletError, InputError } from "../errors.js";

/** What to do about the operating system's reasons, by their codes. */
const MENDS: Readonly<Record<string, string>> = {
  EACCES: "Choose a folder you may write to",
  EPERM: "Choose a folder you may write to",
  EROFS: "Choose a folder you may write to",
  ENOSPC: "Free space, or choose a folder on another disk",
  EDQUOT: "Free space, or choose a folder on another disk",
  ENOTDIR: "A part of the path is a file; choose another folder",
  ENAMETOOLONG: "Choose a shorter name",
};

/**
 * Writes a file whole or not at all: beside its place, synced, then renamed. An old file stays until then, and stays
 * intact if anything fails; a killed run may leave the file beside it, whose name ends in a number. Makes the folder if
 * it is missing.
 *
 * @throws InputError if the place cannot be written, with the reason of the operating system
 */
export function writeWhole(path: string, bytes: Uint8Array | string): void {
  inItsPlace(path, () => writeFileAtomic.sync(path, Buffer.from(bytes as Uint8Array), { fsync: true }));
}

/**
 * The same for a file too large to hold, from its pieces; returns its length. Whatever ends the pieces early, an error of
 * theirs included, leaves nothing.
 *
 * @param temporary - told the name of the file beside before it is made, and `undefined` once it is gone: a process that
 * is about to be stopped can remove it
 * @throws InputError as `writeWhole`
 */
export function writeWholePieces(
  path: string,
  pieces: Iterable<Uint8Array>,
  temporary: (name: string | undefined) => void = () => {},
): number {
  return inItsPlace(path, () => {
    const beside = join(dirname(path), `.${basename(path)}.${process.pid}`);
    temporary(beside);
    try {
      const length = writePieces(beside, pieces);
      renameSync(beside, path);
      return length;
    } catch (error) {
      attempt(() => rmSync(beside, { force: true }));
      throw error;
    } finally {
      temporary(undefined);
    }
  });
}

function writePieces(path: string, pieces: Iterable<Uint8Array>): number {
  const file = openSync(path, "w", 0o666);
  let length = 0;
  try {
    for (const piece of pieces) {
      for (let done = 0; done < piece.length; ) done += writeSync(file, piece, done);
      length += piece.length;
    }
    fsyncSync(file);
  } finally {
    closeSync(file);
  }
  return length;
}

/** Runs a write that puts a file at `path`, makes its folder before, and says in our words what went wrong. */
function inItsPlace<T>(path: string, write: () => T): T {
  if (path === "") throw new InputError("expected the name of a file to write, got an empty name.");
  const made: string[] = [];
  try {
    makeFolder(dirname(path), made);
    requireFilePlace(path);
    return write();
  } catch (cause) {
    // Deepest first; a folder that someone else has filled meanwhile stays.
    for (const folder of made.reverse()) attempt(() => rmdirSync(folder));
    const { code, message } = cause as NodeJS.ErrnoException;
    // Only the operating system's errors carry such a code; ours, and bugs, pass as they are.
    if (cause instanceof CoupletError || code === undefined) throw cause;
    const mend = MENDS[code] ?? "Choose another folder";
    throw new InputError(
      `${path}: could not be written: ${reasonOf(message)}. ${mend}. Nothing was changed.`,
      {
        cause,
      },
    );
  }
}

/** Renaming would replace a device such as /dev/null, or a pipe, by an ordinary file. */
function requireFilePlace(path: string): void {
  const there = statSync(path, { throwIfNoEntry: false });
  if (there === undefined || there.isFile()) return;
  const what = there.isDirectory() ? "a folder. Name a file in it." : "a device or a pipe. Name a file.";
  throw new InputError(`${path}: expected a place for a file, got ${what}`);
}

/** Makes a folder and those above it, noting each; Node's own recursive call never returns under /proc. */
function makeFolder(folder: string, made: string[]): void {
  if (statSync(folder, { throwIfNoEntry: false })?.isDirectory()) return;
  const above = dirname(folder);
  if (above !== folder) makeFolder(above, made);
  try {
    mkdirSync(folder);
    made.push(folder);
  } catch (error) {
    // Two runs may make the same folder at the same time; a file in its place fails at the next step.
    if ((error as NodeJS.ErrnoException).code !== "EEXIST") throw error;
  }
}

function attempt(action: () => void): void {
  try {
    action();
  } catch {
    // Clearing up is a courtesy; the error that led here is the one to report.
  }
}

/** `ENOSPC: no space left on device, write` without the name of a file beside the one that was asked for. */
function reasonOf(message: string): string {
  return message.replace(/, \w+( '.*)?$/, "");
}
