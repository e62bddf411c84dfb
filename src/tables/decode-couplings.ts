import { couplet } from "../gen/couplet.js";
import { requireKnownHeader } from "./check-header.js";
import { COUPLINGS_SCHEMA_MINOR } from "./encode-couplings.js";
import { openSealed } from "./sealed-bytes.js";

/**
 * The coupling table in a file, after every check a reader owes its user: digest, version, convention.
 *
 * @param file - the file's name, for messages
 * @throws InputError if the file is not a table of ours; TableError if it is another one, damaged or too new
 */
export function decodeCouplings(bytes: Uint8Array, file: string): couplet.v1.CouplingTables {
  const tables = openSealed(bytes, file, "couplet.v1.CouplingTables", (all) =>
    couplet.v1.CouplingTables.decode(all),
  );
  requireKnownHeader(tables.header, COUPLINGS_SCHEMA_MINOR, file);
  return tables;
}
