import { describe, expect, test } from "vitest";
import { nullSpace, primitive, reducedRows } from "../../../src/su3/engine/elimination.js";
import { seededIntegers } from "../../support/seeded-integers.js";

const seed = 33_002;

describe("integer elimination", () => {
  test(`finds a basis that every row annuls, zero on the other free columns (seed ${seed})`, () => {
    const random = seededIntegers(seed);
    for (let trial = 0; trial < 300; trial++) {
      const width = 1 + random.below(6);
      const matrix = Array.from({ length: random.below(6) }, () =>
        Array.from({ length: width }, () => BigInt(random.below(7) - 3)),
      );
      const { basis, free } = nullSpace(matrix, width);
      const rank = reducedRows(matrix, [...Array(width).keys()]).pivots.length;
      expect(basis.length).toBe(width - rank);
      for (const [i, vector] of basis.entries()) {
        for (const row of matrix)
          expect(row.reduce((sum, value, j) => sum + value * vector[j]!, 0n)).toBe(0n);
        expect(free.map((column) => vector[column] !== 0n)).toEqual(free.map((_, j) => j === i));
      }
    }
  });

  test("takes pivots in the order asked for, so that the first columns stay free", () => {
    const row = [[1n, 2n, 3n]];
    expect(nullSpace(row, 3)).toEqual({
      basis: [
        [3n, 0n, -1n],
        [0n, 3n, -2n],
      ],
      free: [0, 1],
    });
    expect(reducedRows(row, [1, 0, 2]).pivots).toEqual([1]);
  });

  test("divides by the content and leaves the zero vector alone", () => {
    expect(primitive([6n, -9n, 0n])).toEqual([2n, -3n, 0n]);
    expect(primitive([0n, 0n])).toEqual([0n, 0n]);
  });
});
