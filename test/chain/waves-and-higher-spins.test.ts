import { describe, expect, test } from "vitest";
import { complete } from "../../src/completion/complete.js";
import { studyWarnings } from "../../src/model/validity.js";
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

describe("signs of the waves against each other", () => {
  const study = (signs: string) =>
    studyText("n1520-delta-pi")
      .replace(
        "measurements:",
        "  - { name: o, from: octet, to: [baryon-octet, pseudoscalar-octet], L: 2, model: a, masses: charge }\nmeasurements:",
      )
      .replace(
        "measurements:",
        `measurements:\n  - { width: N(1520) -> N pi, value: 66 +- 6 MeV, use: fit, source: invented }\n  - { width: N(1520) -> N eta, value: 0.08 +- 0.02 MeV, use: fit, source: invented }\n${signs}`,
      );
  const sign = (L: number, value: string, reaction: string) =>
    `  - { amplitude: [N(1520) -> N pi, N(1520) -> Delta(1232) pi L=${L}], value: "${value}"${reaction}, source: invented }\n`;
  const result = (signs: string) => {
    const fit = fitOf(study(signs));
    const waves = complete(fit, 0).parents[0]!.rows.find(({ id }) => id.includes("Delta(1232)++"))!.waves;
    return {
      phases: waves.map(({ phase }) => phase),
      relative: Math.sign(waves[0]!.re * waves[1]!.re),
      warned: studyWarnings(fit, 0).some((text) =>
        text.startsWith("no measurement fixes the signs of the waves"),
      ),
    };
  };
  const fixed = ', sign: "+"';

  test("are assumed where only widths are measured, and said to be", () => {
    expect(result("")).toMatchObject({ phases: ["assumed", "assumed"], warned: true });
  });

  test("are known where signed amplitudes of both waves are, and follow them", () => {
    for (const [value, relative] of [
      ["+", 1],
      ["-", -1],
    ] as const) {
      const same = result(sign(0, "+", fixed) + sign(2, value, fixed));
      expect(same).toEqual({ phases: ["known", "known"], relative, warned: false });
    }
  });

  test("are assumed where one wave has no sign, or a reaction's own sign is free", () => {
    expect(result(sign(0, "+", fixed))).toMatchObject({ phases: ["assumed", "assumed"], warned: true });
    expect(result(sign(0, "+", "") + sign(2, "-", ""))).toMatchObject({ phases: ["assumed", "assumed"] });
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
