import { mkdirSync, rmdirSync, statSync } from "node:fs";
import { dirname } from "node:path";
import writeFileAtomic from "write-file-atomic";
import { InputError } from "../errors.js";

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
  if (path === "") throw new InputError("expected the name of a file to write, got an empty name.");
  const made: string[] = [];
  try {
    makeFolder(dirname(path), made);
    requireFilePlace(path);
    writeFileAtomic.sync(path, Buffer.from(bytes as Uint8Array), { fsync: true });
  } catch (cause) {
    // Deepest first; a folder that someone else has filled meanwhile stays.
    for (const folder of made.reverse()) attempt(() => rmdirSync(folder));
    if (cause instanceof InputError) throw cause;
    const { code = "", message } = cause as NodeJS.ErrnoException;
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
