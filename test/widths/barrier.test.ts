import { describe, expect, test } from "vitest";
import { barrierFactorSquared, barrierPolynomial } from "../../src/widths/barrier.js";

/** Polynomials written out, in powers of z. F. von Hippel and C. Quigg, Phys. Rev. D 5 (1972) 624; from memory. */
const POLYNOMIALS = [[1], [1, 1], [9, 3, 1], [225, 45, 6, 1], [11025, 1575, 135, 10, 1]];

describe("centrifugal barrier", () => {
  test("at z = 1 the polynomials are 1, 2, 13, 277, 12746", () => {
    expect([0, 1, 2, 3, 4].map((L) => barrierPolynomial(L, 1))).toEqual([1, 2, 13, 277, 12746]);
  });

  test.each([0, 1, 2, 3, 4])("the recurrence gives the written polynomial of L = %i", (L) => {
    for (const z of [0, 1e-3, 0.3, 2, 17, 400]) {
      const written = POLYNOMIALS[L]!.reduceRight((sum, coefficient) => sum * z + coefficient, 0);
      expect(Math.abs(barrierPolynomial(L, z) / written - 1)).toBeLessThan(1e-13);
    }
  });

  test("the factor is 0 at threshold for L > 0, 1 for L = 0, and tends to 1 far above", () => {
    expect([0, 1, 4].map((L) => barrierFactorSquared(L, 0))).toEqual([1, 0, 0]);
    for (const L of [1, 4, 9]) expect(barrierFactorSquared(L, 1e9)).toBeCloseTo(1, 6);
  });

  test("the factor grows with z and falls with L", () => {
    for (const z of [0.1, 1, 10, 100]) {
      for (const L of [0, 1, 2, 3, 4, 5]) {
        expect(barrierFactorSquared(L + 1, z)).toBeLessThan(barrierFactorSquared(L, z));
        expect(barrierFactorSquared(L + 1, 1.1 * z)).toBeGreaterThan(barrierFactorSquared(L + 1, z));
      }
    }
  });
});
