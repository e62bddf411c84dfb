import { basename, extname, join } from "node:path";
import { complete } from "../completion/complete.js";
import { minimaToTabulate } from "../completion/mirrors.js";
import type { Tables } from "../completion/tables.js";
import { couplingTable } from "../completion/tabulate-couplings.js";
import type { Fit } from "../model/fit-model.js";
import { encodeCouplings } from "../tables/encode-couplings.js";
import { encodeDecays } from "../tables/encode-decays.js";
import { digestOf } from "../tables/sealed-bytes.js";
import { writeAllWhole } from "../tables/whole-file.js";
import { describeMinimum, describePulls, describeWarnings } from "./fit.js";
import { counted } from "./labels.js";
import { requireOutputPlaces } from "./output-place.js";
import { announceUnfinished } from "./own-thread.js";
import { print, printJson } from "./print.js";
import { fitStudyFile } from "./run-study.js";

/** A decay table file that was written. */
export interface Written {
  readonly file: string;
  /** Index of the minimum it is made from, best first. */
  readonly minimum: number;
  readonly parents: number;
  readonly rows: number;
  readonly bytes: number;
  readonly sha256: string;
  /** The coupling table beside it. */
  readonly couplings: {
    readonly file: string;
    /** How many vertices of charge states it has. */
    readonly vertices: number;
    readonly bytes: number;
    readonly sha256: string;
  };
}

/** `couplet tables`: fits a study, completes it, writes its decay and coupling tables. */
export function runTables(path: string, options: { out: string; json?: true }): void {
  const fit = fitStudyFile(path);
  const written = writeTables(fit, path, options.out);
  if (options.json) printJson({ written });
  else print(describeWritten(fit, written));
}

/**
 * Writes the decay table of a fit and the coupling table beside it: one pair, or one for each minimum where the study
 * asks for that. A conflict, or a place that cannot be written, leaves all files as they were.
 */
export function writeTables(fit: Fit, studyPath: string, folder: string): Written[] {
  const minima = minimaToTabulate(fit);
  const stem = join(folder, basename(studyPath, extname(studyPath)));
  const tables = minima.map((minimum) => {
    const suffix = minima.length === 1 ? "" : `.minimum-${minimum + 1}`;
    const [decays, couplings] = [complete(fit, minimum), couplingTable(fit, minimum)];
    const decayFile = { path: `${stem}${suffix}.decays.pb`, bytes: encodeDecays(decays) };
    const couplingFile = { path: `${stem}${suffix}.couplings.pb`, bytes: encodeCouplings(couplings) };
    return { decays, couplings, decayFile, couplingFile };
  });
  const files = tables.flatMap(({ decayFile, couplingFile }) => [decayFile, couplingFile]);
  requireOutputPlaces(
    files.map((file) => file.path),
    [studyPath],
  );
  writeAllWhole(files, announceUnfinished);
  return tables.map(({ decays, couplings, decayFile, couplingFile }) => ({
    ...described(decayFile),
    minimum: decays.minimum,
    parents: decays.parents.length,
    rows: rowCount(decays),
    couplings: { ...described(couplingFile), vertices: couplings.charged.length },
  }));
}

function described({ path, bytes }: { path: string; bytes: Uint8Array }): {
  file: string;
  bytes: number;
  sha256: string;
} {
  return { file: path, bytes: bytes.length, sha256: digestOf(bytes) };
}

function rowCount({ parents }: Tables): number {
  return parents.reduce((sum, { rows }) => sum + rows.length, 0);
}

function describeWritten(fit: Fit, written: readonly Written[]): string {
  const parts = written.map(({ file, minimum, parents, rows, sha256, couplings }) => {
    const title = minimum === 0 ? "Best minimum" : `Minimum ${minimum + 1}`;
    return (
      describeMinimum(fit.minima[minimum]!, title) +
      describePulls(fit.minima[minimum]!) +
      describeWarnings(fit, minimum) +
      `\nwrote ${file}: ${counted(parents, "parent")}, ${counted(rows, "row")}, sha256 ${sha256.slice(0, 16)}...\n` +
      `wrote ${couplings.file}: ${counted(couplings.vertices, "vertex", "vertices")}, sha256 ${couplings.sha256.slice(0, 16)}...\n`
    );
  });
  return `${fit.model.study.title}\n${parts.join("")}\nLook into it with: couplet show ${written[0]!.file}\n`;
}
