import { extname } from "node:path";
import { minimaToTabulate } from "../completion/mirrors.js";
import { couplingTable } from "../completion/tabulate-couplings.js";
import { canonicalJson } from "../tables/canonical-json.js";
import { couplingsMessage, encodeCouplings } from "../tables/encode-couplings.js";
import { writeAllWhole } from "../tables/whole-file.js";
import { describeCouplings } from "./describe-couplings.js";
import { requireOutputPlaces } from "./output-place.js";
import { announceUnfinished } from "./own-thread.js";
import { print, printJson } from "./print.js";
import { fitStudyFile } from "./run-study.js";

/** `couplet couplings`: the coupling of every vertex of a study, for people, as JSON or into a file. */
export function runCouplings(path: string, options: { json?: true; out?: string }): void {
  const { out } = options;
  // Before the fit, which may take long; the names of several minima are known only after it.
  if (out !== undefined) requireOutputPlaces([out], [path]);
  const fit = fitStudyFile(path);
  const tables = minimaToTabulate(fit).map((minimum) => couplingTable(fit, minimum));
  if (out !== undefined) {
    const files = tables.map((table) => ({
      path: tables.length === 1 ? out : minimumFile(out, table.minimum),
      bytes: encodeCouplings(table),
    }));
    requireOutputPlaces(
      files.map((file) => file.path),
      [path],
    );
    writeAllWhole(files, announceUnfinished);
    if (!options.json) {
      for (const { path: file, bytes } of files) print(`wrote ${file} (${bytes.length} bytes)\n`);
    }
  }
  const messages = tables.map((table) => couplingsMessage(table));
  if (options.json) {
    const shown = messages.map((message) => canonicalJson("couplet.v1.CouplingTables", message));
    printJson(shown.length === 1 ? shown[0] : shown);
  } else if (out === undefined) {
    print(messages.map((message) => describeCouplings(message, path)).join("\n"));
  }
}

/** `couplings.pb` as `couplings.minimum-2.pb`, for the second minimum. */
function minimumFile(out: string, minimum: number): string {
  const extension = extname(out);
  return `${out.slice(0, out.length - extension.length)}.minimum-${minimum + 1}${extension}`;
}
