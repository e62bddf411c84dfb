import { describe, expect, test } from "vitest";
import { modelSpread } from "../../src/uncertainty/model-spread.js";
import { fitOf } from "./planted.js";

const decay = (from: string, L: number, model: string) =>
  `  - { from: ${from}, to: [baryon-octet, pseudoscalar-octet], L: ${L}, model: ${model}, name: ${from} }\n`;

/** Invented octets of which nucleon and Lambda are measured: both couplings are fixed. */
function study(decays: string): string {
  const octet = (id: string, spinParity: string, mass: number) => `  ${id}:
    irrep: 8
    spinParity: ${spinParity}
    members:
      - { name: N(${mass}), place: N, mass: ${mass} MeV, width: 150 MeV }
      - { name: Lambda(${mass + 130}), place: Lambda, mass: ${mass + 130} MeV, width: 60 MeV }
`;
  const measured = (mass: number) => `  - { width: N(${mass}) -> N pi, value: 80 +- 5 MeV, source: invented }
  - { width: N(${mass}) -> N eta, value: 20 +- 3 MeV, source: invented }
  - { width: Lambda(${mass + 130}) -> N Kbar, value: 15 +- 2 MeV, source: invented }
`;
  const has = (id: string) => decays.includes(`from: ${id},`);
  return `couplet: 1
title: Octets, every number invented
multiplets:
${has("half") ? octet("half", "1/2-", 1550) : ""}${has("high") ? octet("high", "5/2-", 1665) : ""}decays:
${decays}fit: { mirrors: best }
measurements:
${has("half") ? measured(1550) : ""}${has("high") ? measured(1665) : ""}`;
}

const compared = (decays: string) => {
  const { fits, skipped } = modelSpread(fitOf(study(decays)));
  return [...fits, ...skipped].map(({ model: { id, options } }) =>
    [id, ...Object.entries(options).map(([name, value]) => `${name} ${value}`)].join(" "),
  );
};

describe("width models compared", () => {
  const others = ["a n 1", "b", "c radiusFm 0.1973269804", `c radiusFm ${5 * 0.1973269804}`];

  test("are model d in both forms where a parent has spin 1/2", () => {
    expect(compared(decay("half", 0, "a"))).toEqual([...others, "d", "d derivativeForm 1", "e"]);
    expect(compared(decay("half", 0, "a") + decay("high", 2, "a"))).toEqual([
      ...others,
      "d",
      "d derivativeForm 1",
      "e",
    ]);
  });

  test("are each form against the other for a study in one of them", () => {
    const all = ["a n 1", "a n 2", ...others.slice(1)];
    expect(compared(decay("half", 0, "d"))).toEqual([...all, "d derivativeForm 1", "e"]);
    expect(compared(decay("half", 0, "{ id: d, derivativeForm: 1 }"))).toEqual([...all, "d", "e"]);
  });

  test("are model d once where no parent has spin 1/2, and not at all where the study has it in either form", () => {
    expect(compared(decay("high", 2, "a"))).toEqual([...others, "d", "e"]);
    for (const model of ["d", "{ id: d, derivativeForm: 1 }"])
      expect(compared(decay("high", 2, model))).toEqual(["a n 1", "a n 2", ...others.slice(1), "e"]);
  });

  test("tell the forms apart by the masses of the daughters alone", () => {
    const spread = modelSpread(fitOf(study(decay("half", 0, "d"))));
    const derivative = spread.fits.find(({ model }) => model.options["derivativeForm"] === 1)!;
    const direct = fitOf(study(decay("half", 0, "{ id: d, derivativeForm: 1 }"))).minima[0]!;
    expect(derivative.chi2).toBeCloseTo(direct.chi2, 8);
    expect(derivative.parameters.find(({ name }) => /alpha_F/.test(name))!.value).toBeCloseTo(
      direct.parameters.find(({ name }) => /alpha_F/.test(name))!.value,
      6,
    );
    expect(Math.abs(derivative.chi2 - spread.own.chi2)).toBeGreaterThan(1e-3);
  });
});
