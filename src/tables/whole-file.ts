import { randomBytes } from "node:crypto";
import {
  chmodSync,
  chownSync,
  closeSync,
  fsyncSync,
  mkdirSync,
  openSync,
  realpathSync,
  renameSync,
  rmdirSync,
  rmSync,
  statSync,
  writeSync,
} from "node:fs";
import { basename, dirname, join } from "node:path";
import { CoupletError, InputError, systemReason } from "../errors.js";

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

/** Told the name of a file beside before it is made, and again once it is gone: a process that is stopped can remove it. */
export type WatchBeside = (beside: string, exists: boolean) => void;

/**
 * Writes a file whole or not at all: beside its place, synced, then renamed. An old file stays until then, and stays
 * intact if anything fails; a killed run may leave the file beside it, `.NAME.` and 16 hexadecimal digits. Makes the
 * folder if it is missing.
 *
 * @throws InputError if the place cannot be written, with the reason of the operating system
 */
export function writeWhole(path: string, bytes: Uint8Array | string, watch?: WatchBeside): void {
  writeWholePieces(path, [Buffer.from(bytes as Uint8Array)], watch);
}

/** A file to be written: its place, and all of it. */
export interface WholeFile {
  readonly path: string;
  readonly bytes: Uint8Array | string;
}

/**
 * Writes several files, all of them or none: every one beside its place first, and only when all are synced each is
 * renamed. Between two renames a reader may see new files with old ones.
 *
 * @throws InputError as `writeWhole`, with nothing changed; or, where the system refuses a rename after others, with the
 * names of the files that are new
 */
export function writeAllWhole(files: readonly WholeFile[], watch: WatchBeside = () => {}): void {
  besideEach(files, [], watch, (besides) => {
    for (const [k, { beside, place, path }] of besides.entries()) {
      try {
        renameSync(beside, place);
      } catch (cause) {
        const names = besides.map((each) => each.path);
        const [renamed, left] = [names.slice(0, k), names.slice(k)].map((list) => list.join(", "));
        throw k === 0
          ? unwritten(path, cause)
          : unwritten(path, cause, `New are ${renamed}; as before: ${left}.`);
      }
    }
  });
}

/** A file that is written, but not in its place yet. */
interface Beside {
  readonly path: string;
  readonly beside: string;
  readonly place: string;
}

/** Writes each file beside its place, then calls `then`; whatever throws, no file beside is left, and no folder made. */
function besideEach(
  [file, ...others]: readonly WholeFile[],
  written: readonly Beside[],
  watch: WatchBeside,
  then: (besides: readonly Beside[]) => void,
): void {
  if (file === undefined) {
    then(written);
    return;
  }
  inItsPlace(file.path, () =>
    withBeside(
      file.path,
      [Buffer.from(file.bytes as Uint8Array)],
      ({ beside, place }) =>
        besideEach(others, [...written, { path: file.path, beside, place }], watch, then),
      watch,
    ),
  );
}

/**
 * As `writeWhole` for a file too large to hold, from its pieces; returns its length. Whatever ends the pieces early, an
 * error of theirs included, leaves nothing.
 *
 * @param watch - see `WatchBeside`
 * @throws InputError as `writeWhole`
 */
export function writeWholePieces(
  path: string,
  pieces: Iterable<Uint8Array>,
  watch: WatchBeside = () => {},
): number {
  return inItsPlace(path, () =>
    withBeside(
      path,
      pieces,
      ({ beside, place, length }) => {
        renameSync(beside, place);
        return length;
      },
      watch,
    ),
  );
}

/** Writes pieces beside a place, synced, with owner and mode of an old file there; removes them if `then` throws. */
function withBeside<T>(
  path: string,
  pieces: Iterable<Uint8Array>,
  then: (file: { beside: string; place: string; length: number }) => T,
  watch: WatchBeside,
): T {
  const old = statSync(path, { throwIfNoEntry: false });
  // Behind a link, the file it points to is the one to replace.
  const place = old === undefined ? path : realpathSync(path);
  // No two writers, in whatever thread or container, take the same name, and nobody can lay a link there beforehand.
  const beside = join(dirname(place), `.${basename(place)}.${randomBytes(8).toString("hex")}`);
  watch(beside, true);
  try {
    const length = writePieces(beside, pieces);
    if (old !== undefined) {
      // Only some may give a file away; the new file is then the writer's own.
      attempt(() => chownSync(beside, old.uid, old.gid));
      chmodSync(beside, old.mode);
    }
    return then({ beside, place, length });
  } catch (error) {
    attempt(() => rmSync(beside, { force: true }));
    throw error;
  } finally {
    watch(beside, false);
  }
}

function writePieces(path: string, pieces: Iterable<Uint8Array>): number {
  const file = openSync(path, "wx", 0o666);
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
    const { code } = cause as NodeJS.ErrnoException;
    // Only the operating system's errors carry such a code; ours, and bugs, pass as they are.
    if (cause instanceof CoupletError || code === undefined) throw cause;
    throw unwritten(path, cause);
  }
}

function unwritten(path: string, cause: unknown, outcome = "Nothing was changed."): InputError {
  const { code } = cause as NodeJS.ErrnoException;
  const mend = MENDS[code ?? ""] ?? "Choose another folder";
  return new InputError(`${path}: could not be written: ${systemReason(cause)}. ${mend}. ${outcome}`, {
    cause,
  });
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
