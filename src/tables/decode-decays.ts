import { WHOLE } from "../completion/parts-per-billion.js";
import { TableError } from "../errors.js";
import { couplet } from "../gen/couplet.js";
import { CONVENTION } from "../su3/isoscalar-factors.js";
import { DECAYS_SCHEMA_MINOR } from "./encode-decays.js";
import { checkSeal } from "./sealed-bytes.js";

/**
 * The decay tables in a file, after every check a reader owes its user: digest, version, convention, sums.
 *
 * @param file - the file's name, for messages
 * @throws InputError if the file is not a decay table of ours; TableError if it is damaged or too new
 */
export function decodeDecays(bytes: Uint8Array, file: string): couplet.v1.DecayTables {
  const kind = checkSeal(bytes, file);
  if (kind !== "couplet.v1.DecayTables")
    throw new TableError(`${file}: expected decay tables, got ${kind}. Use \`couplet show\` on it.`);
  const tables = couplet.v1.DecayTables.decode(bytes);
  const minor = tables.header?.schemaMinor ?? Number.NaN;
  if (!(minor <= DECAYS_SCHEMA_MINOR)) {
    throw new TableError(
      `${file}: expected schema version 1.${DECAYS_SCHEMA_MINOR} or older, got 1.${minor}. Read it with a newer Couplet.`,
    );
  }
  const convention = tables.header.convention;
  if (convention !== CONVENTION) {
    throw new TableError(
      `${file}: expected phase convention ${CONVENTION}, got ${JSON.stringify(convention)}. Read it with a newer Couplet.`,
    );
  }
  for (const parent of tables.parents) {
    const sum = parent.rows.reduce((total, row) => total + (row.partsPerBillion ?? 0), 0);
    if (sum !== WHOLE) {
      throw new TableError(
        `${file}: ${parent.hadron?.name}: expected rows that add up to ${WHOLE} parts, got ${sum}. The file was written by something else; write it again.`,
      );
    }
  }
  return tables;
}
