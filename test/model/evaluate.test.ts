import { expect, test } from "vitest";
import { Evaluation, evaluator } from "../../src/model/evaluate.js";
import type { Model } from "../../src/model/model.js";
import { comparisons } from "../../src/model/residuals.js";
import { resolveStudy } from "../../src/model/resolve-study.js";
import { readStudy } from "../../src/study/read-study.js";
import { studyText } from "../chain/run.js";
import { seededIntegers } from "../support/seeded-integers.js";

const modelOf = (text: string): Model => resolveStudy(readStudy(Buffer.from(text), "study.yaml"));

/** A point near the start of every parameter, away from zeros. */
function pointNear(model: Model, seed: number): number[] {
  const integers = seededIntegers(seed);
  return model.parameters.map(({ kind, start, prior }) => {
    const shift = (integers.below(1001) - 500) / 1000;
    if (kind === "coupling") return 3 * shift + 0.2;
    return kind === "mixing angle" ? shift : start + shift * (prior?.plus ?? 1);
  });
}

const STUDIES: [string, string][] = [
  ["free mixing, total widths and masses", studyText("octet-3-2")],
  ["mixing of parents and daughters with the quark-line rule", studyText("tensor-nonet")],
  ["two waves and folded daughters", studyText("n1520-delta-pi")],
  ["signed amplitudes", studyText("decuplet-7-2")],
  ["semileptonic ratios", studyText("semileptonic-2003")],
  ["breaking in the fit", `${studyText("octet-5-2")}fit: { theoryError: 0.2 }\n`],
  [
    "products, totals, residues, normalisations and priors",
    studyText("octet-5-2").replace(
      "measurements:\n",
      `normalisations: { beam: 5 % }
priors:
  - { parameter: F/D, value: -0.2 +- 0.1, source: test }
  - { parameter: alpha_D, value: 1.2 +- 0.1, source: test }
measurements:
  - { product: [Sigma(1775) -> N Kbar, Sigma(1775) -> Lambda pi], value: 0.07 +- 0.01, normalisation: beam, source: test }
  - { total: Lambda(1830), value: 60 +- 10 MeV, source: test }
  - { residue: [Sigma(1775) -> N Kbar, Sigma(1775) -> Sigma pi], value: 7 +- 2 MeV, source: test }
  - { amplitude: [Sigma(1775) -> N Kbar, Sigma(1775) -> Sigma pi], value: 0.1 +- 0.02, source: test }
  - { fraction: Lambda(1830) -> Lambda eta, value: < 10 % at 90 %, source: test }
`,
    ),
  ],
];

test.each(STUDIES)("gradients of residuals equal finite differences: %s", (_, text) => {
  const model = modelOf(text);
  const ready = evaluator(model);
  const fitted = model.observables.filter(({ use }) => use !== "table");
  const point = pointNear(model, 20261201);
  const residuals = (parameters: readonly number[]) =>
    comparisons(new Evaluation(ready, parameters), fitted).map(({ residual }) => residual);
  const graded = comparisons(new Evaluation(ready, point), fitted);
  for (const k of model.parameters.keys()) {
    const h = 1e-6 * Math.max(1, Math.abs(point[k]!));
    const at = (sign: number) => residuals(point.map((value, j) => (j === k ? value + sign * h : value)));
    const [up, down] = [at(1), at(-1)];
    for (const [r, { gradient, residual }] of graded.entries()) {
      const numeric = (up[r]! - down[r]!) / (2 * h);
      expect(Math.abs(gradient[k]! - numeric)).toBeLessThan(
        1e-5 * (1 + Math.abs(numeric) + Math.abs(residual)),
      );
    }
  }
});

test("a model is plain data: a structured clone evaluates to the same residuals", () => {
  const model = modelOf(studyText("octet-3-2"));
  const copy = structuredClone(model);
  const point = pointNear(model, 7);
  const values = (of: Model) =>
    comparisons(new Evaluation(evaluator(of), point), of.observables).map(({ residual }) => residual);
  expect(values(copy)).toEqual(values(model));
});
