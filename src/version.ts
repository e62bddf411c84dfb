/** The version of this package, e.g. `0.1.0`; it stands in every file Couplet writes. */
export function packageVersion(): string {
  return (require("../package.json") as { version: string }).version;
}

/** What stands as the producer in every file Couplet writes, e.g. `couplet 0.1.0`. */
export function producerName(): string {
  return `couplet ${packageVersion()}`;
}
