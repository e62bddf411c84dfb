import { TableError } from "../errors.js";
import type { couplet } from "../gen/couplet.js";
import { CONVENTION } from "../su3/isoscalar-factors.js";

/**
 * Checks that the header of a table is one this reader knows: schema version and phase convention.
 *
 * @param newestMinor - the newest minor version of the table's schema we know
 * @param file - the file's name, for messages
 * @throws TableError if it is too new, or of another convention
 */
export function requireKnownHeader(
  header: Pick<couplet.v1.Header.$Properties, "schemaMinor" | "convention"> | null | undefined,
  newestMinor: number,
  file: string,
): void {
  requireKnownVersion(header, newestMinor, file);
  if (header?.convention === CONVENTION) return;
  throw new TableError(
    `${file}: expected phase convention ${CONVENTION}, got ${JSON.stringify(header?.convention)}. Read it with a newer Couplet.`,
  );
}

/**
 * Checks the schema version of a table alone.
 *
 * @throws TableError if it is too new, or missing
 */
export function requireKnownVersion(
  header: Pick<couplet.v1.Header.$Properties, "schemaMinor"> | null | undefined,
  newestMinor: number,
  file: string,
): void {
  if (header?.schemaMinor == null) {
    throw new TableError(
      `${file}: expected a header with the schema version, got a table without one. The file was written by something else; write it again.`,
    );
  }
  const minor = header.schemaMinor;
  if (minor <= newestMinor) return;
  throw new TableError(
    `${file}: expected schema version 1.${newestMinor} or older, got 1.${minor}. Read it with a newer Couplet.`,
  );
}
