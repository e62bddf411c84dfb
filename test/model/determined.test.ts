import { expect, test } from "vitest";
import { describeFit, fitJson } from "../../src/cli/fit.js";
import { fitModel } from "../../src/model/fit-model.js";
import { leaveOneOut } from "../../src/uncertainty/leave-one-out.js";
import { resolved } from "./mixing-cases.js";

/** An invented 3/2- octet with some measurements. */
const fitOf = (measurements: string) =>
  fitModel(
    resolved(`couplet: 1
title: What data determine, invented
multiplets:
  o: { irrep: 8, spinParity: 3/2-, members: [{ name: N(1705), place: N, mass: 1700 MeV, width: 100 MeV }, { name: Sigma(1800), place: Sigma, mass: 1800 MeV, width: 100 MeV }] }
decays: [{ from: o, to: [baryon-octet, pseudoscalar-octet], L: 2, model: a }]
measurements:
${measurements}`),
  );
const width = "  - { width: N(1705) -> N pi, value: 30 +- 3 MeV, source: invented }\n";
const ratios = `  - { ratio: [Sigma(1800) -> Lambda pi, Sigma(1800) -> N Kbar], value: 0.5 +- 0.1, source: invented }
  - { ratio: [Sigma(1800) -> Sigma pi, Sigma(1800) -> N Kbar], value: 0.8 +- 0.1, source: invented }
`;
const determined = (fit: ReturnType<typeof fitOf>) =>
  fit.minima[0]!.parameters.filter((parameter) => parameter.determined).map(({ name }) => name);

test("one width determines no coupling of two, and nothing made of them", () => {
  const fit = fitOf(width);
  expect(determined(fit)).toEqual([]);
  const text = describeFit(fit);
  expect(text).toMatch(/ {2}alpha_F +not determined\n/);
  expect(text).not.toContain("alpha_F  0.");
  expect(fitJson(fit).minima[0]!.parameters.every((parameter) => parameter.determined)).toBe(false);
});

test("ratios alone determine F/D and not F and D", () => {
  expect(determined(fitOf(ratios))).toEqual(["F/D", "alpha_F", "alpha_D"]);
});

test("a width and ratios determine all", () => {
  const fit = fitOf(width + ratios);
  expect(determined(fit)).toHaveLength(fit.minima[0]!.parameters.length);
});

test("what the other measurements leave free is said when one is left out, not predicted", () => {
  const [withoutWidth, withoutRatio] = leaveOneOut(fitOf(width + ratios));
  expect(withoutWidth!.determined).toBe(false);
  const fixed = withoutWidth!.parameters.filter((parameter) => parameter.determined).map(({ name }) => name);
  expect(fixed).toEqual(["F/D", "alpha_F", "alpha_D"]);
  expect(withoutRatio!.determined).toBe(true);
});

test("one coupling that ratios alone leave free is not determined either, for all that rounding says", () => {
  const text = `couplet: 1
title: One coupling, invented
multiplets:
  d: { irrep: 10, spinParity: 3/2+, members: [{ name: Sigma(1700), place: Sigma, mass: 1700 MeV, width: sum }] }
decays: [{ from: d, to: [baryon-octet, pseudoscalar-octet], L: 1, model: a }]
measurements:
  - { ratio: [Sigma(1700) -> Sigma pi, Sigma(1700) -> Lambda pi], value: 0.5 +- 0.1, source: invented }
`;
  expect(determined(fitModel(resolved(text)))).toEqual([]);
});
