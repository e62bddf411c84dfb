import { TableError } from "../errors.js";
import { couplet } from "../gen/couplet.js";
import { MULTIPLICITY_RULE } from "../su3/isoscalar-factors.js";
import { requireKnownHeader, requireKnownVersion } from "./check-header.js";
import { FACTORS_SCHEMA_MINOR } from "./encode-factors.js";
import { openSealed } from "./sealed-bytes.js";

/**
 * The factor table in a file, after every check a reader owes its user: digest, version, convention, multiplicity rule.
 *
 * @param file - the file's name, for messages
 * @throws InputError if the file is not a table of ours; TableError if it is another one, damaged or too new
 */
export function decodeFactors(bytes: Uint8Array, file: string): couplet.v1.FactorTable {
  const table = factorsOfAnyRule(bytes, file);
  requireKnownHeader(table, FACTORS_SCHEMA_MINOR, file);
  if (table.multiplicityRule === MULTIPLICITY_RULE) return table;
  throw new TableError(
    `${file}: expected copies by ${MULTIPLICITY_RULE}, got ${JSON.stringify(table.multiplicityRule)}. Read it with a newer Couplet.`,
  );
}

/**
 * The same whatever its phase convention and multiplicity rule, for those who look at these themselves.
 *
 * @throws InputError and TableError as `decodeFactors`
 */
export function factorsOfAnyRule(bytes: Uint8Array, file: string): couplet.v1.FactorTable {
  const table = openSealed(bytes, file, "couplet.v1.FactorTable", (all) =>
    couplet.v1.FactorTable.decode(all),
  );
  requireKnownVersion(table, FACTORS_SCHEMA_MINOR, file);
  return table;
}
