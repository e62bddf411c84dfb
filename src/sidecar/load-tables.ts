import { readFileSync } from "node:fs";
import { InputError } from "../errors.js";
import { decodeDecays } from "../tables/decode-decays.js";
import { groundStateTable } from "./ground-state-table.js";
import { Served, type ServedTable } from "./served.js";

/** Where a table that no file holds comes from. */
export const BUILT_IN = "built in";

/**
 * The tables in files, each checked whole; without files, the ground-state tables made now from the study in the code.
 *
 * @throws InputError for a file that cannot be read or is not a decay table, or one given twice; TableError for a damaged one
 */
export function loadTables(files: readonly string[]): Served {
  const tables = files.length === 0 ? [tableOf(groundStateTable(), BUILT_IN)] : files.map(readTable);
  for (const [k, { sha256, file }] of tables.entries()) {
    const twin = tables.slice(0, k).find((other) => Buffer.compare(other.sha256, sha256) === 0);
    if (twin !== undefined) {
      throw new InputError(
        `${file}: expected tables that differ, got the same content as ${twin.file}. Give it once.`,
      );
    }
  }
  return new Served(tables);
}

function readTable(file: string): ServedTable {
  let bytes: Uint8Array;
  try {
    bytes = readFileSync(file);
  } catch (cause) {
    throw new InputError(`${file}: could not be read: ${(cause as Error).message}. Check the path.`, {
      cause,
    });
  }
  return tableOf(bytes, file);
}

function tableOf(bytes: Uint8Array, file: string): ServedTable {
  const message = decodeDecays(bytes, file);
  return { file, sha256: message.sha256!, message };
}
