import { basename, extname, join } from "node:path";
import { complete } from "../completion/complete.js";
import { minimaToTabulate } from "../completion/mirrors.js";
import type { Tables } from "../completion/tables.js";
import type { Fit } from "../model/fit-model.js";
import { encodeDecays } from "../tables/encode-decays.js";
import { digestOf } from "../tables/sealed-bytes.js";
import { writeWhole } from "../tables/whole-file.js";
import { describeMinimum, describePulls } from "./fit.js";
import { fitStudyFile } from "./run-study.js";

/** A table file that was written. */
export interface Written {
  readonly file: string;
  /** Index of the minimum it is made from, best first. */
  readonly minimum: number;
  readonly parents: number;
  readonly rows: number;
  readonly bytes: number;
  readonly sha256: string;
}

/** `couplet tables`: fits a study, completes it, writes its decay table. */
export function runTables(path: string, options: { out: string; json?: true }): void {
  const fit = fitStudyFile(path);
  const written = writeTables(fit, path, options.out);
  if (options.json) process.stdout.write(`${JSON.stringify({ written }, null, 2)}\n`);
  else process.stdout.write(describeWritten(fit, written));
}

/** Writes the decay tables of a fit: one file, or one for each minimum where the study asks for that. */
export function writeTables(fit: Fit, studyPath: string, folder: string): Written[] {
  const minima = minimaToTabulate(fit);
  // All tables are made before the first is written, so that a conflict leaves nothing behind.
  const tables = minima.map((minimum) => complete(fit, minimum));
  const stem = basename(studyPath, extname(studyPath));
  return tables.map((table) => {
    const suffix = minima.length === 1 ? "" : `.minimum-${table.minimum + 1}`;
    const file = join(folder, `${stem}${suffix}.decays.pb`);
    const bytes = encodeDecays(table);
    writeWhole(file, bytes);
    return {
      file,
      minimum: table.minimum,
      parents: table.parents.length,
      rows: rowCount(table),
      bytes: bytes.length,
      sha256: digestOf(bytes),
    };
  });
}

function rowCount({ parents }: Tables): number {
  return parents.reduce((sum, { rows }) => sum + rows.length, 0);
}

function describeWritten(fit: Fit, written: readonly Written[]): string {
  const parts = written.map(({ file, minimum, parents, rows, sha256 }) => {
    const title = minimum === 0 ? "Best minimum" : `Minimum ${minimum + 1}`;
    return (
      describeMinimum(fit.minima[minimum]!, title) +
      describePulls(fit.minima[minimum]!) +
      `\nwrote ${file}: ${parents} parents, ${rows} rows, sha256 ${sha256.slice(0, 16)}...\n`
    );
  });
  return `${fit.model.study.title}\n${parts.join("")}\nLook into it with: couplet show ${written[0]!.file}\n`;
}
