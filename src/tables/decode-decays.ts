import { WHOLE } from "../completion/parts-per-billion.js";
import { TableError } from "../errors.js";
import { couplet } from "../gen/couplet.js";
import { requireKnownHeader } from "./check-header.js";
import { DECAYS_SCHEMA_MINOR } from "./encode-decays.js";
import { openSealed } from "./sealed-bytes.js";

/**
 * The decay tables in a file, after every check a reader owes its user: digest, version, convention, sums.
 *
 * @param file - the file's name, for messages
 * @throws InputError if the file is not a decay table of ours; TableError if it is damaged or too new
 */
export function decodeDecays(bytes: Uint8Array, file: string): couplet.v1.DecayTables {
  const tables = openSealed(bytes, file, "couplet.v1.DecayTables", (all) =>
    couplet.v1.DecayTables.decode(all),
  );
  requireKnownHeader(tables.header, DECAYS_SCHEMA_MINOR, file);
  for (const parent of tables.parents) requireWhole(parent, file);
  return tables;
}

/** @throws TableError for a parent whose rows do not add up to 10^9 parts */
export function requireWhole(parent: couplet.v1.Parent, file: string): void {
  const sum = parent.rows.reduce((total, row) => total + (row.partsPerBillion ?? 0), 0);
  if (sum === WHOLE) return;
  throw new TableError(
    `${file}: ${parent.hadron?.name}: expected rows that add up to ${WHOLE} parts, got ${sum}. The file was written by something else; write it again.`,
  );
}
