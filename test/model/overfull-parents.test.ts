import { expect, test } from "vitest";
import { describeFit } from "../../src/cli/fit.js";
import { Evaluation, evaluator } from "../../src/model/evaluate.js";
import { fitModel } from "../../src/model/fit-model.js";
import { overfullParents } from "../../src/model/overfull-parents.js";
import { studyWarnings, validityWarnings } from "../../src/model/validity.js";
import { resolved } from "./mixing-cases.js";

/** An invented decuplet whose Delta fixes the coupling, with a Sigma of some total width. */
const fitOf = (width: string) =>
  fitModel(
    resolved(`couplet: 1
title: More than there is, invented
multiplets:
  d: { irrep: 10, spinParity: 3/2+, members: [{ name: Delta(1705), place: Delta, mass: 1700 MeV, width: 300 MeV }, { name: Sigma(1850), place: Sigma, mass: 1850 MeV, width: ${width} }] }
decays: [{ from: d, to: [baryon-octet, pseudoscalar-octet], L: 1, model: a }]
measurements: [{ width: Delta(1705) -> N pi, value: 150 +- 10 MeV, source: invented }]
`),
  );

test("a parent whose predicted widths exceed its total is named, once for its charge states", () => {
  const fit = fitOf("20 MeV");
  const [found, ...others] = overfullParents(fit.model, fit.minima[0]!);
  expect(others).toEqual([]);
  expect(found).toMatchObject({ name: "Sigma(1850)", totalMeV: 20 });
  expect(found!.hadrons).toEqual(["Sigma(1850)+", "Sigma(1850)0", "Sigma(1850)-"]);
  const evaluation = new Evaluation(evaluator(fit.model), fit.minima[0]!.vector);
  const sums = fit.model.parents
    .filter(({ hadron }) => found!.hadrons.includes(hadron.name))
    .map(({ channels }) => channels.reduce((sum, k) => sum + evaluation.width(k).value, 0));
  expect(found!.predictedMeV).toBeCloseTo(Math.max(...sums), 10);
  expect(found!.predictedMeV).toBeGreaterThan(found!.widest.widthMeV);
  const text = `predicted partial widths add up to ${found!.predictedMeV.toFixed(0)} MeV`;
  expect(describeFit(fit)).toContain(`Warning: Sigma(1850): ${text}`);
  expect(studyWarnings(fit, 0).join()).not.toContain(text);
  expect(validityWarnings(fit, 0).find((warning) => warning.text.includes(text))!.parents).toEqual(
    found!.hadrons,
  );
});

test("nothing is said where the total leaves room, or is the sum itself", () => {
  for (const width of ["900 MeV", "sum"]) {
    const fit = fitOf(width);
    expect(overfullParents(fit.model, fit.minima[0]!)).toEqual([]);
  }
});
