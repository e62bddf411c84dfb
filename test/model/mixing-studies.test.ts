import { describe, expect, test } from "vitest";
import { Evaluation, evaluator } from "../../src/model/evaluate.js";
import { type Fit, fitModel } from "../../src/model/fit-model.js";
import type { Model } from "../../src/model/model.js";
import {
  ANTIDECUPLET,
  CASES,
  type Case,
  DECUPLET,
  planted,
  resolved,
  SINGLET,
  TENSORS,
  THREE,
  TWENTY_SEVEN,
  TWO_OCTETS,
  vectorOf,
} from "./mixing-cases.js";

/** Signed amplitudes of each parent's open channels times the root of phase space, all relative to the largest. */
function physics(model: Model, vector: readonly number[]): number[] {
  const evaluation = new Evaluation(evaluator(model), vector);
  return model.parents.flatMap(({ channels }) => {
    const parts = channels.map((c) =>
      model.channels[c]!.waves.reduce(
        (sum, _, w) => sum + evaluation.amplitude(c, w).value * Math.sqrt(evaluation.kinematicFactor(c, w)),
        0,
      ),
    );
    const largest = parts.reduce((best, part) => (Math.abs(part) > Math.abs(best) + 1e-9 ? part : best), 0);
    return largest === 0 ? parts : parts.map((part) => part * Math.sign(largest));
  });
}

const fitted = new Map<string, Fit>();
function fitOfCase(one: Case): Fit {
  const known = fitted.get(one.name) ?? fitModel(resolved(planted(one)));
  fitted.set(one.name, known);
  return known;
}

describe.each(CASES)("$name", (one) => {
  test("the planted physics is found, signs included, and once", () => {
    const fit = fitOfCase(one);
    const { model, minima } = fit;
    expect(minima[0]!.chi2).toBeLessThan(1e-9);
    const wanted = physics(model, vectorOf(model, one.truth));
    const found = physics(model, minima[0]!.vector);
    for (const [k, value] of wanted.entries())
      expect(Math.abs(found[k]! - value)).toBeLessThan(1e-4 * (1 + Math.abs(value)));
    // Anything else as good would be the same physics told twice, or a degeneracy of the data.
    expect(minima.filter(({ chi2 }) => chi2 < 1e-6)).toHaveLength(1);
  });

  test("the angle comes out up to the signs that are free by definition", () => {
    const { minima } = fitOfCase(one);
    for (const { name, kind, value } of minima[0]!.parameters) {
      if (kind !== "mixing angle") continue;
      expect(Math.abs(Math.tan(value))).toBeCloseTo(Math.abs(Math.tan(one.truth[name]!)), 4);
    }
  });
});

describe("degeneracies are counted, not listed as physics", () => {
  test.each([SINGLET, DECUPLET, ANTIDECUPLET, TWENTY_SEVEN, TENSORS])("$name", (one) => {
    const { minima } = fitOfCase(one);
    // (t, g_b) and (-t, -g_b) predict the same up to the sign of one state, which is free.
    expect(minima[0]!.equivalents).toBeGreaterThan(0);
  });
});

describe("amplitudes of mixed states by hand", () => {
  // Isoscalar factors: J.J. de Swart, Rev. Mod. Phys. 35 (1963) 916; provenance: memory.
  const isospin = (one: Case, id: string) => {
    const model = resolved(planted(one));
    const index = model.channels.findIndex((channel) => channel.id === id);
    const evaluation = new Evaluation(evaluator(model), vectorOf(model, one.truth));
    return evaluation.amplitude(index, 0).value / model.channels[index]!.isospinCoefficient;
  };
  const [s, a] = [2, 1.1];
  const rotated = (t: number, first: number, second: number) => [
    Math.cos(t) * first + Math.sin(t) * second,
    -Math.sin(t) * first + Math.cos(t) * second,
  ];

  test("octet and singlet: N Kbar and Sigma pi", () => {
    const kaon = rotated(0.4, s * Math.sqrt(1 / 10) + a * Math.sqrt(1 / 2), 1.7 * Math.sqrt(1 / 4));
    const pion = rotated(0.4, -s * Math.sqrt(3 / 5), 1.7 * Math.sqrt(3 / 8));
    for (const [k, name] of ["Lambda(1850)", "Lambda(1650)"].entries()) {
      expect(isospin(SINGLET, `${name} -> p K-`)).toBeCloseTo(kaon[k]!, 12);
      expect(isospin(SINGLET, `${name} -> Sigma+ pi-`)).toBeCloseTo(pion[k]!, 12);
    }
  });

  test("octet and decuplet: Lambda pi; octet and antidecuplet: N eta; octet and 27: Lambda eta", () => {
    const lambda = rotated(-0.5, s * Math.sqrt(1 / 5), -1.6 * Math.sqrt(1 / 4));
    const eta = rotated(0.3, -s * Math.sqrt(1 / 20) + a * Math.sqrt(1 / 4), 0.9 * Math.sqrt(1 / 4));
    const lambdaEta = rotated(0.6, -s * Math.sqrt(1 / 5), 1.4 * Math.sqrt(27 / 40));
    for (const k of [0, 1]) {
      expect(isospin(DECUPLET, `${["Sigma(1755)", "Sigma(1900)"][k]}+ -> Lambda pi+`)).toBeCloseTo(
        lambda[k]!,
        12,
      );
      expect(isospin(ANTIDECUPLET, `${["N(1655)", "N(1800)"][k]}+ -> p eta`)).toBeCloseTo(eta[k]!, 12);
      expect(isospin(TWENTY_SEVEN, `${["Lambda(1750)", "Lambda(1900)"][k]} -> Lambda eta`)).toBeCloseTo(
        lambdaEta[k]!,
        12,
      );
    }
  });

  test("states of two octets turn into each other: one angle serves F and D alike", () => {
    const pion = rotated(0.5, s * Math.sqrt(9 / 20) + a / 2, -0.7 * Math.sqrt(9 / 20) + 1.6 / 2);
    for (const [k, name] of ["N(1600)", "N(1750)"].entries())
      expect(isospin(TWO_OCTETS, `${name}+ -> p pi0`)).toBeCloseTo(pion[k]!, 12);
  });

  test("three states: the matrix is the product of rotations (1,2), (1,3), (2,3), the first one leftmost", () => {
    const [c1, c2, c3] = [0.3, -0.2, 0.4].map(Math.cos) as [number, number, number];
    const [s1, s2, s3] = [0.3, -0.2, 0.4].map(Math.sin) as [number, number, number];
    const first = [c1 * c2, s1 * c3 - c1 * s2 * s3, s1 * s3 + c1 * s2 * c3];
    const kaon = [
      s * Math.sqrt(1 / 10) + a * Math.sqrt(1 / 2),
      1.4 * Math.sqrt(3 / 20),
      1.3 * Math.sqrt(1 / 4),
    ];
    const expected = first.reduce((sum, weight, k) => sum + weight * kaon[k]!, 0);
    expect(isospin(THREE, "Lambda(1650) -> p K-")).toBeCloseTo(expected, 12);
  });
});
