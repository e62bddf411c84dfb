import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { constrainedFractions, smallestConflict } from "../../src/completion/constrained-fractions.js";

const diagonal = (sigmas: readonly number[]) =>
  sigmas.map((a, i) => sigmas.map((_, j) => (i === j ? a * a : 0)));
const sumOf = (values: readonly number[]) => values.reduce((sum, value) => sum + value, 0);

describe("fractions moved to add up to 1", () => {
  test("independent ones move by their variances: 0.7, 0.4 with errors 0.02, 0.04 lose 1/5 and 4/5 of 0.1", () => {
    const { fractions, chi2 } = constrainedFractions([0.7, 0.4], diagonal([0.02, 0.04]));
    expect(fractions[0]).toBeCloseTo(0.68, 12);
    expect(fractions[1]).toBeCloseTo(0.32, 12);
    expect(chi2).toBeCloseTo(0.1 ** 2 / (0.02 ** 2 + 0.04 ** 2), 9);
  });

  test("what has no error stays, and what has the same error for both moves as one", () => {
    // The last two are two thirds and one third of one measured number 0.6 +- 0.06.
    const shares = [2 / 3, 1 / 3];
    const covariance = [[0, 0, 0], ...shares.map((a) => [0, ...shares.map((b) => a * b * 0.06 ** 2)])];
    const { fractions, chi2 } = constrainedFractions([0.5, 0.4, 0.2], covariance);
    expect(fractions[0]).toBeCloseTo(0.5, 12);
    expect(fractions[1]! / fractions[2]!).toBeCloseTo(2, 9);
    expect(sumOf(fractions)).toBeCloseTo(1, 12);
    expect(chi2).toBeCloseTo((0.1 / 0.06) ** 2, 6);
  });

  test("none goes below zero: a small one with a large error stops there, and the rest takes what is left", () => {
    const { fractions } = constrainedFractions([0.9, 0.3, 0.01], diagonal([0.05, 0.05, 0.5]));
    expect(fractions[2]).toBe(0);
    expect(fractions[0]).toBeCloseTo(0.8, 9);
    expect(fractions[1]).toBeCloseTo(0.2, 9);
  });

  test("without errors nothing can move", () => {
    expect(constrainedFractions([0.7, 0.4], diagonal([0, 0])).chi2).toBe(Number.POSITIVE_INFINITY);
  });

  test("no other point of the simplex has a smaller chi2, in 200 random cases", () => {
    const parts = fc.array(fc.double({ min: 0.01, max: 1, noNaN: true }), { minLength: 4, maxLength: 4 });
    fc.assert(
      fc.property(parts, parts, parts, (x, sigmas, other) => {
        const chi2 = (y: readonly number[]) => sumOf(y.map((v, k) => ((v - x[k]!) / sigmas[k]!) ** 2));
        const found = constrainedFractions(x, diagonal(sigmas));
        expect(sumOf(found.fractions)).toBeCloseTo(1, 9);
        expect(Math.min(...found.fractions)).toBeGreaterThanOrEqual(0);
        expect(found.chi2).toBeCloseTo(chi2(found.fractions), 6);
        const elsewhere = other.map((v) => v / sumOf(other));
        for (const t of [1e-3, 0.1, 1]) {
          const between = found.fractions.map((v, k) => v + t * (elsewhere[k]! - v));
          expect(chi2(between)).toBeGreaterThanOrEqual(found.chi2 - 1e-9 * (1 + found.chi2));
        }
      }),
      { seed: 20240501, numRuns: 200 },
    );
  });

  test("the projection is the derivative of the moved fractions", () => {
    const x = [0.6, 0.4, 0.2];
    const covariance = diagonal([0.1, 0.05, 0.02]);
    const { fractions, projection } = constrainedFractions(x, covariance);
    const step = 1e-6;
    for (const j of x.keys()) {
      const moved = constrainedFractions(
        x.map((v, k) => (k === j ? v + step : v)),
        covariance,
      ).fractions;
      for (const i of x.keys()) expect((moved[i]! - fractions[i]!) / step).toBeCloseTo(projection[i]![j]!, 6);
    }
  });
});

describe("the smallest set that conflicts by itself", () => {
  test("is one of two if two alone pass 1 by more than 2 sigma, though more would as well", () => {
    const groups = [[0], [1], [2], [3]];
    const set = smallestConflict(groups, [0.3, 0.8, 0.1, 0.5], diagonal([0.02, 0.02, 0.02, 0.02]), 2);
    expect(set.sort()).toEqual([1, 3]);
  });

  test("counts the rows of one measurement as one", () => {
    const set = smallestConflict([[0, 1], [2]], [0.7, 0.5, 0.9], diagonal([0.01, 0.01, 0.01]), 2);
    expect(set).toEqual([0]);
  });
});
