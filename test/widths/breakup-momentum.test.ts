import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { breakupMomentumMeV } from "../../src/widths/breakup-momentum.js";

const SEED = 20240531;
const massMeV = fc.double({ min: 1, max: 5000, noNaN: true });

/** q^2 by exact rational arithmetic on the binary values of the masses, in units of 2^-k MeV; the independent path. */
function momentumByBigInt(parentMeV: number, firstMeV: number, secondMeV: number): number {
  const scale = 2 ** 80;
  const exact = (value: number) => BigInt(value * 2 ** 40) * (BigInt(scale) >> 40n);
  const [M, a, b] = [exact(parentMeV), exact(firstMeV), exact(secondMeV)];
  const product = (M - a - b) * (M + a + b) * (M - a + b) * (M + a - b);
  if (product <= 0n) return 0;
  const root = integerRoot(product << 200n); // sqrt(product) * 2^100
  return Number((root << 20n) / (2n * M)) / 2 ** 120 / scale;
}

function integerRoot(value: bigint): bigint {
  let root = 1n << BigInt(Math.ceil(value.toString(2).length / 2));
  for (;;) {
    const next = (root + value / root) >> 1n;
    if (next >= root) return root;
    root = next;
  }
}

describe("breakup momentum", () => {
  test("a 1232 MeV parent gives nucleon and pion 227.325 MeV", () => {
    expect(breakupMomentumMeV(1232, 938.919, 138.039)).toBeCloseTo(227.325, 2);
  });

  test("phi(1020) gives two charged kaons 126.918 MeV, printed as 127 in the listings of RPP 2024", () => {
    expect(breakupMomentumMeV(1019.461, 493.677, 493.677)).toBeCloseTo(126.918, 2);
  });

  test("a massless pair shares half the mass each", () => {
    expect(breakupMomentumMeV(547.862, 0, 0)).toBe(547.862 / 2);
  });

  test("energies of the daughters add up to the mass of the parent", () => {
    const property = fc.property(massMeV, massMeV, massMeV, (parent, first, second) => {
      fc.pre(parent > first + second);
      const q = breakupMomentumMeV(parent, first, second);
      expect(Math.hypot(first, q) + Math.hypot(second, q)).toBeCloseTo(parent, 8);
    });
    fc.assert(property, { seed: SEED });
  });

  test("close to threshold every digit agrees with integer arithmetic", () => {
    const excess = fc.integer({ min: 1, max: 2 ** 30 }).map((steps) => steps * 2 ** -30);
    const whole = fc.integer({ min: 100, max: 2000 });
    const property = fc.property(whole, whole, excess, (first, second, above) => {
      const parent = first + second + above;
      const expected = momentumByBigInt(parent, first, second);
      const q = breakupMomentumMeV(parent, first, second);
      expect(Math.abs(q - expected) / expected).toBeLessThan(4 * Number.EPSILON);
    });
    fc.assert(property, { seed: SEED, numRuns: 300 });
  });

  test("at and below threshold it is 0", () => {
    expect(breakupMomentumMeV(1000, 600, 400)).toBe(0);
    const property = fc.property(massMeV, massMeV, massMeV, (parent, first, second) => {
      fc.pre(parent <= first + second);
      expect(breakupMomentumMeV(parent, first, second)).toBe(0);
    });
    fc.assert(property, { seed: SEED });
  });

  test("the order of the daughters does not matter, to the last bit", () => {
    const property = fc.property(massMeV, massMeV, massMeV, (parent, first, second) => {
      expect(breakupMomentumMeV(parent, first, second)).toBe(breakupMomentumMeV(parent, second, first));
    });
    fc.assert(property, { seed: SEED });
  });

  test("a mass that is no mass is refused in words", () => {
    expect(() => breakupMomentumMeV(Number.NaN, 1, 1)).toThrow(
      new InputError(
        "breakupMomentumMeV: parentMeV: expected a finite number > 0, got NaN. Give the mass in MeV.",
      ),
    );
    expect(() => breakupMomentumMeV(1000, 1, -1)).toThrow(
      new InputError(
        "breakupMomentumMeV: secondMeV: expected a finite number >= 0, got -1. Give the mass in MeV; 0 for a photon.",
      ),
    );
  });
});
