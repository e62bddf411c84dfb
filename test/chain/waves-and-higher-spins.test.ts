import { describe, expect, test } from "vitest";
import { fitOf, parameterValue, studyText, tablesOf } from "./run.js";

describe("N(1520) -> Delta pi", () => {
  const tables = tablesOf(studyText("n1520-delta-pi"));
  const parent = tables.parents.find(({ parent: { hadron } }) => hadron.name === "N(1520)+")!;
  const rows = parent.rows.filter(({ daughters }) => daughters[0]?.name.startsWith("Delta"));

  test("is one row for each set of charges, with both waves inside", () => {
    expect(rows.map(({ id }) => id)).toEqual([
      "N(1520)+ -> Delta(1232)++ pi-",
      "N(1520)+ -> Delta(1232)+ pi0",
      "N(1520)+ -> Delta(1232)0 pi+",
    ]);
    for (const { waves, widthMeV } of rows) {
      expect(waves.map(({ L }) => L)).toEqual([0, 2]);
      expect(waves.reduce((sum, { re, im }) => sum + re * re + im * im, 0)).toBeCloseTo(widthMeV.value, 10);
    }
  });

  test("keeps the measured sum, and splits it 1/2 : 1/3 : 1/6 up to the masses of the charge states", () => {
    const sum = rows.reduce((total, { fraction }) => total + fraction.value, 0);
    expect(sum).toBeCloseTo(0.28, 12);
    for (const [k, share] of [1 / 2, 1 / 3, 1 / 6].entries()) {
      expect(Math.abs(rows[k]!.fraction.value / sum / share - 1)).toBeLessThan(0.06);
    }
    expect(rows.every(({ flags }) => flags.includes("folded"))).toBe(true);
  });
});

describe("multiplets of higher spin", () => {
  test("the 5/2+ octet has one solution, with alpha_F between 0.4 and 0.55", () => {
    const { minima } = fitOf(studyText("octet-5-2-plus"));
    expect(minima).toHaveLength(1);
    expect(parameterValue(minima[0]!, "alpha_F")).toBeGreaterThan(0.4);
    expect(parameterValue(minima[0]!, "alpha_F")).toBeLessThan(0.55);
  });

  test("the 7/2+ decuplet has Lambda pi + and Sigma pi - against N Kbar, the signs of a decuplet", () => {
    const [minimum] = fitOf(studyText("decuplet-7-2")).minima;
    const signs = minimum!.pulls.filter(({ observable }) => observable.quantum.kind === "amplitude");
    expect(signs.map(({ fitted, pull }) => [Math.sign(fitted), pull])).toEqual([
      [1, 0],
      [-1, 0],
    ]);
    // Five fractions and four priors less five parameters: signs are no degrees of freedom.
    expect(minimum!.ndf).toBe(4);
  });

  test("signs against those of a decuplet are refused by chi2", () => {
    const turned = studyText("decuplet-7-2").replace('value: "+"', 'value: "-"');
    const [right, wrong] = [studyText("decuplet-7-2"), turned].map((text) => fitOf(text).minima[0]!);
    expect(wrong!.chi2 - right!.chi2).toBeGreaterThan(20);
  });
});
