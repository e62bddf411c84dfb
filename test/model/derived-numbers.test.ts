import { describe, expect, test } from "vitest";
import { describeFit, fitJson } from "../../src/cli/fit.js";
import { type Fit, type FittedParameter, fitModel } from "../../src/model/fit-model.js";
import { type Case, ETA, planted, resolved, SINGLET, THREE, TWO_OCTETS, VECTORS } from "./mixing-cases.js";

const ratiosOf = ({ minima }: Fit): FittedParameter[] =>
  minima[0]!.parameters.filter(({ name }) => name.includes(" tan theta("));
const ratios = (text: string) => ratiosOf(fitModel(resolved(text)));
const planting = (one: Case) => fitModel(resolved(planted(one)));

describe("what mixing leaves free of the choice of signs", () => {
  const pair = "tan theta(Lambda(1850), Lambda(1650))";

  test("octet and singlet: the planted ratios, whatever signs the fit chose; in text and JSON", () => {
    const fit = planting(SINGLET);
    const found = ratiosOf(fit);
    expect(found.map(({ name, unit, kind }) => [name, unit, kind])).toEqual([
      [`s.g(1)/o.g(8_1) ${pair}`, "1", "derived"],
      [`s.g(1)/o.g(8_2) ${pair}`, "1", "derived"],
    ]);
    expect(found[0]!.value).toBeCloseTo((1.7 / 2) * Math.tan(0.4), 4);
    expect(found[1]!.value).toBeCloseTo((1.7 / 1.1) * Math.tan(0.4), 4);
    expect(describeFit(fit)).toContain(`  s.g(1)/o.g(8_1) ${pair}  `);
    expect(fitJson(fit).minima[0]!.parameters).toContainEqual(found[0]);
  });

  test("the relative error is that of ln g_b - ln g_a + ln tan theta", () => {
    const fit = planting(SINGLET);
    const [minimum] = fit.minima;
    const index = (name: string) => fit.model.parameters.findIndex((parameter) => parameter.name === name);
    const [a, b, t] = ["o.g(8_1)", "s.g(1)", "angle(Lambda(1850), Lambda(1650))"].map(index) as [
      number,
      number,
      number,
    ];
    const angle = minimum!.vector[t]!;
    const slopes = [
      [a, -1 / minimum!.vector[a]!],
      [b, 1 / minimum!.vector[b]!],
      [t, 1 / (Math.sin(angle) * Math.cos(angle))],
    ] as const;
    const square = slopes
      .flatMap(([i, x]) => slopes.map(([j, y]) => x * minimum!.covariance[i]![j]! * y))
      .reduce((sum, part) => sum + part, 0);
    const [ratio] = ratiosOf(fit);
    expect(ratio!.error / Math.abs(ratio!.value)).toBeCloseTo(Math.sqrt(square), 10);
  });

  test("ratios of couplings that the quark-line rule ties together", () => {
    const text = `couplet: 1
title: Axial mesons, invented
multiplets:
  a: { irrep: 8, spinParity: 1++, members: [{ name: A(1250), place: pi, mass: 1250 MeV, width: 400 MeV }, { name: KA, place: K, mass: 1310 MeV, width: sum }] }
  b: { irrep: 8, spinParity: 1+-, members: [{ name: B(1240), place: pi, mass: 1240 MeV, width: 150 MeV }, { name: KB, place: K, mass: 1340 MeV, width: sum }] }
mixing:
  - { bare: [a/K, b/K], states: [{ name: K(1280), mass: 1280 MeV, width: 90 MeV }, { name: K(1410), mass: 1410 MeV, width: 170 MeV }], angle: free }
  - { bare: [vector-octet/phi, vector-singlet/omega], states: [{ name: phi(1020) }, { name: omega(782) }], convention: meson, angle: 39 deg }
decays:
  - { name: a, from: a, to: [vector-octet, pseudoscalar-octet], L: 0, model: a }
  - { name: b, from: b, to: [vector-octet, pseudoscalar-octet], L: 0, model: a }
  - { name: b1, from: b, to: [vector-singlet, pseudoscalar-octet], L: 0, model: a }
quarkLine: [[b, b1]]
measurements:
  - { width: A(1250) -> rho(770) pi, value: 250 +- 60 MeV, source: invented }
  - { width: B(1240) -> omega(782) pi, value: 130 +- 20 MeV, source: invented }
  - { fraction: K(1280) -> rho(770) K, value: 0.38 +- 0.13, source: invented }
  - { fraction: K(1410) -> K*(892) pi, value: 0.9 +- 0.1, source: invented }
`;
    expect(ratios(text).map(({ name }) => name)).toEqual([
      "b.g(8_1)/a.g(8_2) tan theta(K(1280), K(1410))",
      "b1.g(8)/b.g(8_1) tan theta(phi(1020), omega(782))",
    ]);
  });

  test("mesons as daughters: theta of the meson convention, also where the quark basis is written", () => {
    const names = ["e.g(8)/o.g(8_1)", "e.g(8)/o.g(8_2)"].map((text) => `${text} tan theta(eta, eta'(958))`);
    const expected = [0.5 / 1.2, 0.5 / 0.6].map((ratio) => ratio * Math.tan(-0.25));
    const text = planted(ETA);
    const quark = text.replace(
      "convention: meson, angle: free",
      `convention: quark, angle: ${-0.25 + Math.atan(Math.SQRT2)} rad`,
    );
    expect(quark).not.toBe(text);
    for (const written of [text, quark]) {
      const found = ratios(written);
      expect(found.map(({ name }) => name)).toEqual(names);
      for (const [k, { value }] of found.entries()) expect(value).toBeCloseTo(expected[k]!, 4);
    }
  });

  test("two octets have four; one that does not decay and three states have none", () => {
    const found = planting(TWO_OCTETS);
    const expected = [-0.7 / 2, -0.7 / 1.1, 1.6 / 2, 1.6 / 1.1].map((ratio) => ratio * Math.tan(0.5));
    for (const [k, { value }] of ratiosOf(found).entries()) expect(value).toBeCloseTo(expected[k]!, 3);
    expect(ratiosOf(found)).toHaveLength(4);
    for (const one of [VECTORS, THREE]) expect(ratiosOf(planting(one))).toEqual([]);
  });
});
