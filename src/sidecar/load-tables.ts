import { InputError } from "../errors.js";
import { decodeCouplings } from "../tables/decode-couplings.js";
import { decodeDecays } from "../tables/decode-decays.js";
import { readInput } from "../tables/read-input.js";
import { checkSeal } from "../tables/sealed-bytes.js";
import { groundStateTables } from "./ground-state-tables.js";
import { Served, type ServedCouplings, type ServedDecays } from "./served.js";

/** Where a table that no file holds comes from. */
const BUILT_IN = "built in";

/**
 * The tables in files, each checked whole; without files, the ground-state tables made now from the study in the code.
 *
 * @throws InputError for a file that cannot be read or is no decay or coupling table, or one given twice; TableError
 * for a damaged one
 */
export function loadTables(files: readonly string[]): Served {
  const sources =
    files.length === 0
      ? groundStateTables().map((bytes) => ({ file: BUILT_IN, bytes }))
      : files.map((file) => ({ file, bytes: readInput(file) }));
  const decays: ServedDecays[] = [];
  const couplings: ServedCouplings[] = [];
  const seen = new Map<string, string>();
  for (const { file, bytes } of sources) {
    const kind = checkSeal(bytes, file);
    if (kind === "couplet.v1.DecayTables") decays.push(opened(file, decodeDecays(bytes, file)));
    else if (kind === "couplet.v1.CouplingTables") couplings.push(opened(file, decodeCouplings(bytes, file)));
    else {
      throw new InputError(
        `${file}: expected a decay or coupling table, got ${kind}. Factors need no file: the sidecar computes them.`,
      );
    }
    const digest = Buffer.from(bytes.subarray(-32)).toString("hex");
    const twin = seen.get(digest);
    if (twin !== undefined)
      throw new InputError(
        `${file}: expected tables that differ, got the same content as ${twin}. Give it once.`,
      );
    seen.set(digest, file);
  }
  return new Served(decays, couplings);
}

function opened<Message extends { sha256: Uint8Array | null }>(file: string, message: Message) {
  return { file, sha256: message.sha256!, message };
}
