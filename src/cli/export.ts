import { InputError } from "../errors.js";
import { canonicalJson } from "../tables/canonical-json.js";
import { decodeCouplings } from "../tables/decode-couplings.js";
import { decodeDecays } from "../tables/decode-decays.js";
import { decodeFactors } from "../tables/decode-factors.js";
import { exportAccord } from "../tables/export-accord.js";
import { exportCouplingsLatex } from "../tables/export-couplings-latex.js";
import { exportCouplingsCsv, exportDecaysCsv } from "../tables/export-csv.js";
import { exportDecaysLatex } from "../tables/export-latex.js";
import { parseOwnNumbers } from "../tables/export-numbers.js";
import { readInput } from "../tables/read-input.js";
import { checkSeal, type TableKind } from "../tables/sealed-bytes.js";
import { writeWhole } from "../tables/whole-file.js";
import { requireOutputPlaces } from "./output-place.js";
import { announceUnfinished } from "./own-thread.js";
import { print } from "./print.js";

/** Formats `couplet export` writes. */
export const FORMATS = ["csv", "latex", "accord", "json"] as const;
type Format = (typeof FORMATS)[number];

/** Options of `couplet export` as the command line gives them. */
export interface ExportOptions {
  readonly to: string;
  readonly out?: string;
  readonly number?: readonly string[];
  readonly rescale?: true;
}

/** `couplet export`: a table file in another format, into a file or printed. */
export function runExport(path: string, options: ExportOptions): void {
  const format = formatNamed(options.to);
  if (format !== "accord" && (options.number !== undefined || options.rescale)) {
    throw new InputError("--number and --rescale: expected with --to accord only. Leave them out.");
  }
  if (options.out !== undefined) requireOutputPlaces([options.out], [path]);
  const bytes = readInput(path);
  const text = exported(format, checkSeal(bytes, path), bytes, path, options);
  if (options.out === undefined) process.stdout.write(text);
  else {
    writeWhole(options.out, text, announceUnfinished);
    print(`wrote ${options.out} (${Buffer.byteLength(text)} bytes)\n`);
  }
}

function formatNamed(name: string): Format {
  const format = FORMATS.find((known) => known === name);
  if (format !== undefined) return format;
  throw new InputError(`--to: expected one of ${FORMATS.join(", ")}, got ${JSON.stringify(name)}.`);
}

function exported(
  format: Format,
  kind: TableKind,
  bytes: Uint8Array,
  path: string,
  options: ExportOptions,
): string {
  if (kind === "couplet.v1.DecayTables") {
    const tables = decodeDecays(bytes, path);
    if (format === "csv") return exportDecaysCsv(tables);
    if (format === "latex") return exportDecaysLatex(tables);
    if (format === "json") return jsonText(kind, tables);
    const numbers = parseOwnNumbers(options.number ?? []);
    return exportAccord(tables, path, { numbers, rescale: options.rescale === true });
  }
  if (kind === "couplet.v1.CouplingTables") {
    const tables = decodeCouplings(bytes, path);
    if (format === "csv") return exportCouplingsCsv(tables);
    if (format === "latex") return exportCouplingsLatex(tables);
    if (format === "json") return jsonText(kind, tables);
  } else if (format === "json") return jsonText(kind, decodeFactors(bytes, path));
  const what =
    kind === "couplet.v1.CouplingTables" ? "coupling tables go to csv, latex or json" : "factors go to json";
  throw new InputError(`${path}: expected decay tables for --to ${format}, got ${kind}; ${what}.`);
}

/** The text `couplet show --json` prints. */
function jsonText(kind: TableKind, message: object): string {
  return `${JSON.stringify(canonicalJson(kind, message), null, 2)}\n`;
}
