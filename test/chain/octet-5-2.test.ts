import { describe, expect, test } from "vitest";
import { plantedStudy, rootWidth } from "./planted-octet.js";
import { fitOf, parameterValue, rowWidthMeV, studyText, tablesOf, withMeasurements } from "./run.js";

const STUDY = studyText("octet-5-2");

describe("the 5/2- octet with two couplings", () => {
  // Scan over alpha_F of the same six widths by an independent program; inputs rounded from the PDG, from memory.
  test("model a gives alpha_F = -0.240 and chi2 = 5.32 with 4 degrees of freedom", () => {
    const [best] = fitOf(STUDY).minima;
    expect(Math.abs(parameterValue(best!, "alpha_F") + 0.24)).toBeLessThan(0.002);
    expect(Math.abs(best!.chi2 - 5.32)).toBeLessThan(0.02);
    expect(best!.ndf).toBe(4);
    expect(parameterValue(best!, "alpha_D")).toBeCloseTo(1 - parameterValue(best!, "alpha_F"), 12);
  });

  // The radius is 1/GeV.
  test.each([
    { model: "b", alpha: -0.146 },
    { model: "{ id: c, radiusFm: 0.1973269804 }", alpha: -0.216 },
  ])("model $model moves alpha_F to $alpha", ({ model, alpha }) => {
    const [best] = fitOf(STUDY.replace("model: a", `model: ${model}`)).minima;
    expect(Math.abs(parameterValue(best!, "alpha_F") - alpha)).toBeLessThan(0.002);
  });

  // One ratio of widths allows two values of alpha_F; pairs from the closed formula a = (r u2 - u1)/(v1 - r v2).
  test.each([
    { channel: "Sigma(1775) -> N Kbar", pair: [-0.272, 1.272] },
    { channel: "Sigma(1775) -> Lambda pi", pair: [-0.128, 2.128] },
    { channel: "Sigma(1775) -> Sigma pi", pair: [-0.272, 0.272] },
    { channel: "Lambda(1830) -> N Kbar", pair: [-0.879, -0.121] },
    { channel: "Lambda(1830) -> Sigma pi", pair: [-0.172, 2.172] },
  ])("N -> N pi with $channel alone has the mirror solutions $pair", ({ channel, pair }) => {
    const { minima } = fitOf(withMeasurements(STUDY, ["N(1675)", channel]));
    const found = minima.map((minimum) => parameterValue(minimum, "alpha_F")).sort((a, b) => a - b);
    expect(found).toHaveLength(2);
    for (const [k, alpha] of pair.entries()) expect(Math.abs(found[k]! - alpha)).toBeLessThan(0.0016);
    for (const { chi2 } of minima) expect(chi2).toBeLessThan(1e-12);
  });

  // Signs of the listings, from memory: -(1 - 2a)(1 - a), -(1 - 2a)a and -(1 + 2a)(1 - a) at a = -0.24.
  test("the measured signs of Lambda pi -, Sigma pi + (I = 1) and Sigma pi - (I = 0) agree with the widths", () => {
    const { pulls, ndf } = fitOf(studyText("octet-5-2-whole")).minima[0]!;
    const signs = pulls.filter(({ observable }) => observable.signOnly);
    expect(signs.map(({ fitted, pull }) => [Math.sign(fitted), pull])).toEqual([
      [-1, 0],
      [1, 0],
      [-1, 0],
    ]);
    expect(ndf).toBe(4);
  });

  test("the table keeps measured widths and leaves an explicit remainder", () => {
    const tables = tablesOf(STUDY);
    const lambda = tables.parents.find(({ parent }) => parent.hadron.name === "Lambda(1830)")!;
    expect(rowWidthMeV(tables, "Lambda(1830)", ["p K-", "n K0bar"])).toBeCloseTo(5.4, 10);
    expect(lambda.rows.map(({ origin }) => origin)).toContain("predicted");
    const remainder = lambda.rows.at(-1)!;
    expect(remainder.origin).toBe("remainder");
    expect(remainder.fraction.value).toBeCloseTo(
      1 - lambda.rows.slice(0, -1).reduce((s, r) => s + r.fraction.value, 0),
      12,
    );
  });
});

// |1 - 2a| = 0.2 leaves a = 0.4 or 0.6; w = 4(1 - a)^2/9 = 0.16 leaves 0.4 or 1.6 (exact algebra). w and the square of the
// former over 3/2 are widths without phase space over that of N -> N pi.
describe("one ratio of reduced widths leaves two values of alpha_F", () => {
  test.each([
    { channel: "N Kbar", alphas: [0.4, 0.6] },
    { channel: "Lambda pi", alphas: [0.4, 1.6] },
  ])("of $channel: $alphas", ({ channel, alphas }) => {
    const planted = { alpha: 0.4, g: 1 };
    const line = (name: string, parent: string, to: string) =>
      `  - { width: ${name} -> ${to}, value: ${rootWidth(parent, to, planted) ** 2} +- 0.1 MeV, source: invented }`;
    const study = plantedStudy([line("N(1705)", "N", "N pi"), line("Sigma(1800)", "Sigma", channel)]);
    const found = fitOf(study).minima.map((minimum) => parameterValue(minimum, "alpha_F"));
    expect(found).toHaveLength(2);
    for (const [k, alpha] of [...found].sort((a, b) => a - b).entries())
      expect(alpha).toBeCloseTo(alphas[k]!, 8);
  });
});
