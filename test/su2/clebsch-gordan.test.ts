import { describe, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { equalRoots, formatRoot, negateRoot, signedSquare } from "../../src/exact/signed-root.js";
import { clebschGordan } from "../../src/su2/clebsch-gordan.js";
import { scalarProductOfRoots } from "../support/sum-of-roots.js";

const { fraction } = require("mathjs/lib/browser/math.js") as typeof import("mathjs");

const LARGEST_TWO_J = 6;

/** Values as printed in the Review of Particle Physics, "Clebsch-Gordan coefficients" table (provenance: memory). */
const PRINTED: [twoJ1: number, twoM1: number, twoJ2: number, twoM2: number, twoJ: number, value: string][] = [
  [1, 1, 1, -1, 2, "sqrt(1/2)"],
  [1, 1, 1, -1, 0, "sqrt(1/2)"],
  [1, -1, 1, 1, 0, "-sqrt(1/2)"],
  [2, 2, 1, -1, 3, "sqrt(1/3)"],
  [2, 2, 1, -1, 1, "sqrt(2/3)"],
  [2, 0, 1, 1, 1, "-sqrt(1/3)"],
  [3, 3, 1, -1, 4, "1/2"],
  [3, 1, 1, 1, 2, "-1/2"],
  [2, 2, 2, -2, 4, "sqrt(1/6)"],
  [2, 0, 2, 0, 4, "sqrt(2/3)"],
  [2, 2, 2, -2, 0, "sqrt(1/3)"],
  [2, 0, 2, 0, 0, "-sqrt(1/3)"],
  [2, 0, 2, 0, 2, "0"],
  [4, 4, 1, -1, 5, "sqrt(1/5)"],
  [4, 2, 1, 1, 3, "-sqrt(1/5)"],
  [3, 3, 2, -2, 1, "sqrt(1/2)"],
  [3, 1, 2, 0, 1, "-sqrt(1/3)"],
  [3, -1, 2, 2, 1, "sqrt(1/6)"],
  [4, 4, 2, -2, 2, "sqrt(3/5)"],
  [4, 0, 2, 0, 2, "-sqrt(2/5)"],
  [3, 3, 3, -3, 0, "1/2"],
  [4, 0, 4, 0, 8, "sqrt(18/35)"],
];

function projections(twoJ: number): number[] {
  return Array.from({ length: twoJ + 1 }, (_, i) => twoJ - 2 * i);
}

function totals(twoJ1: number, twoJ2: number): number[] {
  return Array.from({ length: Math.min(twoJ1, twoJ2) + 1 }, (_, i) => Math.abs(twoJ1 - twoJ2) + 2 * i);
}

function pairsOfSpins(largest: number): [number, number][] {
  const spins = Array.from({ length: largest + 1 }, (_, i) => i);
  return spins.flatMap((a) => spins.map((b) => [a, b] as [number, number]));
}

describe("SU(2) Clebsch-Gordan coefficients", () => {
  test("equal the printed values", () => {
    for (const [twoJ1, twoM1, twoJ2, twoM2, twoJ, value] of PRINTED) {
      const computed = formatRoot(clebschGordan(twoJ1, twoM1, twoJ2, twoM2, twoJ, twoM1 + twoM2));
      expect(computed, `<${twoJ1} ${twoM1}; ${twoJ2} ${twoM2} | ${twoJ}>/2`).toBe(value);
    }
  });

  test(`are orthonormal over the product states, exactly, up to 2j = ${LARGEST_TWO_J}`, () => {
    for (const [twoJ1, twoJ2] of pairsOfSpins(LARGEST_TWO_J)) {
      const row = (twoJ: number, twoM: number) =>
        projections(twoJ1)
          .filter((twoM1) => Math.abs(twoM - twoM1) <= twoJ2)
          .map((twoM1) => clebschGordan(twoJ1, twoM1, twoJ2, twoM - twoM1, twoJ, twoM));
      for (const twoJ of totals(twoJ1, twoJ2)) {
        for (const other of totals(twoJ1, twoJ2)) {
          for (const twoM of projections(Math.min(twoJ, other))) {
            const product = scalarProductOfRoots(row(twoJ, twoM), row(other, twoM));
            expect(formatRoot(product)).toBe(twoJ === other ? "1" : "0");
          }
        }
      }
    }
  });

  test(`are orthonormal over the coupled states, exactly, up to 2j = ${LARGEST_TWO_J}`, () => {
    for (const [twoJ1, twoJ2] of pairsOfSpins(LARGEST_TWO_J)) {
      const column = (twoM1: number, twoM: number) =>
        totals(twoJ1, twoJ2)
          .filter((twoJ) => Math.abs(twoM) <= twoJ)
          .map((twoJ) => clebschGordan(twoJ1, twoM1, twoJ2, twoM - twoM1, twoJ, twoM));
      for (const twoM1 of projections(twoJ1)) {
        for (const twoM2 of projections(twoJ2)) {
          for (const other of projections(twoJ1)) {
            const twoM = twoM1 + twoM2;
            if (Math.abs(twoM - other) > twoJ2) continue;
            const product = scalarProductOfRoots(column(twoM1, twoM), column(other, twoM));
            expect(formatRoot(product)).toBe(other === twoM1 ? "1" : "0");
          }
        }
      }
    }
  });

  test("get (-1)^(j1+j2-j) when the spins change places, and when all projections change sign", () => {
    for (const [twoJ1, twoJ2] of pairsOfSpins(LARGEST_TWO_J)) {
      for (const twoJ of totals(twoJ1, twoJ2)) {
        const odd = ((twoJ1 + twoJ2 - twoJ) / 2) % 2 === 1;
        for (const twoM1 of projections(twoJ1)) {
          for (const twoM2 of projections(twoJ2)) {
            if (Math.abs(twoM1 + twoM2) > twoJ) continue;
            const value = clebschGordan(twoJ1, twoM1, twoJ2, twoM2, twoJ, twoM1 + twoM2);
            const expected = odd ? negateRoot(value) : value;
            expect(equalRoots(clebschGordan(twoJ2, twoM2, twoJ1, twoM1, twoJ, twoM1 + twoM2), expected)).toBe(
              true,
            );
            expect(
              equalRoots(clebschGordan(twoJ1, -twoM1, twoJ2, -twoM2, twoJ, -twoM1 - twoM2), expected),
            ).toBe(true);
          }
        }
      }
    }
  });

  test("are positive for m1 = j1, m = j (Condon and Shortley)", () => {
    for (const [twoJ1, twoJ2] of pairsOfSpins(9)) {
      for (const twoJ of totals(twoJ1, twoJ2)) {
        expect(clebschGordan(twoJ1, twoJ1, twoJ2, twoJ - twoJ1, twoJ, twoJ).sign).toBe(1);
      }
    }
  });

  test("squares add up to one in another library's fractions, for spins of 20 and 15/2", () => {
    let sum = fraction(0);
    for (const twoM1 of projections(40)) {
      const twoM2 = 5 - twoM1;
      if (Math.abs(twoM2) > 15) continue;
      const { num, den } = signedSquare(clebschGordan(40, twoM1, 15, twoM2, 33, 5));
      sum = sum.add(fraction(`${num < 0n ? -num : num}/${den}`));
    }
    expect(sum.equals(fraction(1))).toBe(true);
  });

  test("vanish where labels do not couple", () => {
    const zero = "0";
    expect(formatRoot(clebschGordan(2, 2, 2, 0, 2, 0))).toBe(zero);
    expect(formatRoot(clebschGordan(2, 0, 2, 0, 6, 0))).toBe(zero);
    expect(formatRoot(clebschGordan(4, 0, 2, 0, 0, 0))).toBe(zero);
    expect(formatRoot(clebschGordan(2, 0, 1, 1, 2, 0))).toBe(zero);
  });

  test("refuse impossible labels", () => {
    expect(() => clebschGordan(2, 4, 2, 0, 2, 0)).toThrow(
      new InputError(
        "clebschGordan: twoM1: expected a number from -2 to 2 in steps of 2, got 4. Projections are given doubled.",
      ),
    );
    expect(() => clebschGordan(2, 1, 2, 0, 2, 0)).toThrow(InputError);
    expect(() => clebschGordan(2, 0, -2, 0, 2, 0)).toThrow(
      new InputError("clebschGordan: twoJ2: expected an integer >= 0, got -2. Spins are given doubled."),
    );
    expect(() => clebschGordan(2, 0, 2, 0, 0.5, 0)).toThrow(
      new InputError("clebschGordan: twoJ: expected an integer >= 0, got 0.5. Spins are given doubled."),
    );
  });
});
