import { readdirSync } from "node:fs";
import { join } from "node:path";
import { expect, test } from "vitest";
import { levenbergMarquardt } from "../../src/fit/levenberg-marquardt.js";
import { readNistProblem } from "./nist-problem.js";

const names = readdirSync(join(__dirname, "nist-strd"))
  .filter((f) => f.endsWith(".dat"))
  .map((f) => f.slice(0, -4));
const lre = (a: number[], b: number[]) =>
  Math.min(...a.map((v, i) => (v === b[i] ? 11 : -Math.log10(Math.abs(v / b[i]! - 1))))).toFixed(1);
test("x", () => {
  const out: string[] = [];
  for (const name of names) {
    const p = readNistProblem(name);
    for (const [k, analytic] of [
      [0, true],
      [1, true],
      [0, false],
      [1, false],
    ] as const) {
      const t = performance.now();
      const r = levenbergMarquardt(analytic ? p : { residuals: p.residuals }, p.starts[k]!);
      const err = r.covariance.map((row, i) => Math.sqrt(row[i]!) * p.certifiedResidualDeviation);
      out.push(
        `${name} ${k + 1} ${analytic ? "a" : "n"} par ${lre(r.parameters, p.certified)} rss ${lre([r.chi2], [p.certifiedSquares])} err ${lre(err, p.certifiedErrors)} ${r.verdicts.stoppedBy} it ${r.verdicts.iterations} off ${r.verdicts.relativeOffset.toExponential(1)} ev ${r.verdicts.evaluations} pd ${r.verdicts.covariancePositiveDefinite} ${(performance.now() - t).toFixed(0)}ms`,
      );
    }
  }
  console.log(out.join("\n"));
  expect(1).toBe(1);
});
