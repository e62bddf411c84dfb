import { join } from "node:path";
import { LISTED_DELTA_CHI2, type StudyMinimum } from "../model/fit-model.js";
import { CAUTIONS } from "../tables/cautions.js";
import { decodeDecays } from "../tables/decode-decays.js";
import { withError } from "../tables/rounding.js";
import { writeWhole } from "../tables/whole-file.js";
import { DEMO_STUDY } from "./demo-study.js";
import { describePulls } from "./fit.js";
import { degreesText } from "./labels.js";
import { readInput } from "./read-input.js";
import { fitStudyFile } from "./run-study.js";
import { describeParent, ERROR_WORDS } from "./show.js";
import { writeTables } from "./tables.js";

/** Charge state whose table the demo prints. */
const SHOWN = "Sigma(1731)0";

/** `couplet demo`: writes an invented study, runs it to a decay table, and says what to look at. */
export function runDemo({ out }: { out: string }): void {
  const study = join(out, "larkfield.yaml");
  writeWhole(study, DEMO_STUDY);
  const fit = fitStudyFile(study);
  const [written] = writeTables(fit, study, out);
  const { file, parents, rows, bytes, couplings } = written!;
  const tables = decodeDecays(readInput(file), file);
  const shown = tables.parents.find(({ hadron }) => hadron?.name === SHOWN)!;
  const [best, ...others] = fit.minima as [StudyMinimum, ...StudyMinimum[]];
  process.stdout.write(
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

function otherMinimum(best: StudyMinimum, minimum: StudyMinimum): string {
  const distance = (minimum.chi2 - best.chi2).toFixed(1);
  return `A second minimum has F/D = ${parameter(minimum, "F/D")} (alpha_F = ${parameter(minimum, "alpha_F")}), chi2 higher by ${distance}: the table says so.\n`;
}

function parameter({ parameters }: StudyMinimum, wanted: string): string {
  const { value, error } = parameters.find(({ name }) => name === wanted)!;
  return withError(value, error);
}
