/** A named piece of work whose time is measured; it makes its own input, seeded where that is random. */
export interface BenchCase {
  /** room/what/size, e.g. `su3/finished-table/27x27`; selected by regular expression. */
  readonly name: string;
  /** Makes the input; not measured. */
  make(): PreparedCase;
}

/** A case that is ready to run. */
export interface PreparedCase {
  readonly run: () => unknown;
  /** Throws if the result of `run` is wrong; called once, before measuring. */
  readonly check: (result: never) => void;
}

/** Throws with the case's name unless `holds`. */
export function requireResult(name: string, holds: boolean, detail: string): void {
  if (!holds) throw new Error(`${name}: wrong result: ${detail}`);
}
