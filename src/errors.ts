/** Where in a text something stands: 1-based line and column, with the file's name where it has one. */
export interface SourcePosition {
  readonly file?: string;
  readonly line: number;
  readonly column: number;
}

/** Base of the four errors Couplet throws on purpose; the command line turns `exitCode` into its own. */
export abstract class CoupletError extends Error {
  abstract readonly exitCode: number;

  constructor(message: string, options?: { cause?: unknown }) {
    super(message, options);
    this.name = new.target.name;
  }
}

/** The caller can mend it: wrong labels, a study that does not add up, a file that is not ours. Exit code 2. */
export class InputError extends CoupletError {
  override readonly exitCode = 2;
}

/** One of our own table files is damaged, or newer than this reader. Exit code 3. */
export class TableError extends CoupletError {
  override readonly exitCode = 3;
}

/** A request too large to serve, refused beforehand with an estimate. Exit code 4. */
export class LimitError extends CoupletError {
  override readonly exitCode = 4;
}

/** An identity that must hold does not: a bug of ours. Exit code 70. */
export class InternalError extends CoupletError {
  override readonly exitCode = 70;
}

/** What the system says of a file, `ENOENT: no such file or directory`, without the call and the path that it adds. */
export function systemReason(cause: unknown): string {
  return (cause as Error).message.replace(/, \w+( '.*)?$/, "");
}
