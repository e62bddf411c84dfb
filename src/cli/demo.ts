import { existsSync } from "node:fs";
import { join } from "node:path";
import { InputError } from "../errors.js";
import { LISTED_DELTA_CHI2, type StudyMinimum } from "../model/fit-model.js";
import { CAUTIONS } from "../tables/cautions.js";
import { decodeDecays } from "../tables/decode-decays.js";
import { readInput } from "../tables/read-input.js";
import { withError } from "../tables/rounding.js";
import { writeWhole } from "../tables/whole-file.js";
import { DEMO_STUDY } from "./demo-study.js";
import { describePulls } from "./fit.js";
import { degreesText } from "./labels.js";
import { announceUnfinished } from "./own-thread.js";
import { print } from "./print.js";
import { fitStudyFile } from "./run-study.js";
import { describeParent, ERROR_WORDS } from "./show.js";
import { writeTables } from "./tables.js";

/** Charge state whose table the demo prints. */
const SHOWN = "Sigma(1731)0";

/** `couplet demo`: writes an invented study, runs it to a decay table, and says what to look at. */
export function runDemo({ out }: { out: string }): void {
  const study = join(out, "larkfield.yaml");
  writeStudy(study, out);
  const fit = fitStudyFile(study);
  const [written] = writeTables(fit, study, out);
  const { file, parents, rows, bytes, couplings } = written!;
  const tables = decodeDecays(readInput(file), file);
  const shown = tables.parents.find(({ hadron }) => hadron?.name === SHOWN)!;
  const [best, ...others] = fit.minima as [StudyMinimum, ...StudyMinimum[]];
  print(
    [
      `${fit.model.study.title}\nEvery number in it is invented.\n`,
      describePulls(best),
      `\nF/D = ${parameter(best, "F/D")}   (alpha_F = ${parameter(best, "alpha_F")}, chi2 ${best.chi2.toFixed(1)} with ${degreesText(best.ndf)})\n`,
      ...others
        .filter(({ chi2 }) => chi2 - best.chi2 < LISTED_DELTA_CHI2)
        .map((minimum) => otherMinimum(best, minimum)),
      describeParent(shown),
      `  ${ERROR_WORDS}\n`,
      `\nWritten:\n  ${study}  the study, to be edited\n  ${file}  ${parents} decay tables, ${rows} rows, ${bytes} bytes of Protocol Buffers\n  ${couplings.file}  the couplings of ${couplings.vertices} vertices\n`,
      ...CAUTIONS.map((caution) => `Caution: ${caution}\n`),
      `\nTry next:\n  couplet show ${file}\n  couplet fit ${study}\n  couplet couplings ${study}\n  edit the study, then: couplet tables ${study} -o ${out}\n  couplet factors 10 8 --into 8\n`,
      "(in this folder, `npx couplet` runs the command)\n",
    ].join(""),
  );
}

/** Writes the demo's study where there is none; one that is there stays, and must be the demo's for the demo to go on. */
function writeStudy(study: string, out: string): void {
  if (!existsSync(study)) writeWhole(study, DEMO_STUDY, announceUnfinished);
  else if (readInput(study).toString() !== DEMO_STUDY) {
    throw new InputError(
      `${study}: expected the study of the demo or no file yet, got one that differs. It stays as it is; run it with \`couplet tables ${study} -o ${out}\`, or choose another folder with --out.`,
    );
  }
}

function otherMinimum(best: StudyMinimum, minimum: StudyMinimum): string {
  const distance = (minimum.chi2 - best.chi2).toFixed(1);
  return `A second minimum has F/D = ${parameter(minimum, "F/D")} (alpha_F = ${parameter(minimum, "alpha_F")}), chi2 higher by ${distance}: the table says so.\n`;
}

function parameter({ parameters }: StudyMinimum, wanted: string): string {
  const { value, error } = parameters.find(({ name }) => name === wanted)!;
  return withError(value, error);
}
