import { Matrix, SingularValueDecomposition } from "ml-matrix";
import { expect, test } from "vitest";
import { singularValues } from "../../src/fit/singular-values.js";
import { seededUniform } from "./squared-forms.js";

const dot = (a: ArrayLike<number>, b: ArrayLike<number>) =>
  Array.from(a).reduce((sum, value, k) => sum + value * b[k]!, 0);

/** A matrix as its columns, put together from left to right. */
function randomColumns(uniform: () => number, rows: number, columns: number, rank = columns): number[][] {
  const basis = Array.from({ length: rank }, () => Array.from({ length: rows }, uniform));
  return Array.from({ length: columns }, (_, k) => {
    if (k < rank) return basis[k]!;
    const weights = basis.map(uniform);
    return basis[0]!.map((_, i) => basis.reduce((sum, column, j) => sum + weights[j]! * column[i]!, 0));
  });
}

test("values agree with those of a bidiagonal method, and U S = A V with orthogonal V, for 60 matrices (seed 17)", () => {
  const uniform = seededUniform(17);
  for (let round = 0; round < 60; round++) {
    const [rows, count] = [1 + (round % 9), 1 + ((7 * round) % 6)];
    const columns = randomColumns(uniform, rows, count, Math.max(1, count - (round % 3)));
    const { values, scaledLeft, right } = singularValues(Float64Array.from(columns.flat()), rows);
    const other = new SingularValueDecomposition(new Matrix(columns).transpose(), { autoTranspose: true });
    const size = values[0]!;
    for (const [k, value] of other.diagonal.entries())
      expect(Math.abs(values[k]! - value)).toBeLessThan(1e-14 * (size + 1));
    for (const [k, v] of right.entries()) {
      for (const [j, w] of right.entries())
        expect(Math.abs(dot(v, w) - (j === k ? 1 : 0))).toBeLessThan(1e-13);
      const image = columns[0]!.map((_, i) =>
        columns.reduce((sum, column, j) => sum + column[i]! * v[j]!, 0),
      );
      for (const [i, entry] of image.entries())
        expect(Math.abs(entry - scaledLeft[k]![i]!)).toBeLessThan(1e-13 * (size + 1));
      expect(Math.abs(Math.sqrt(dot(image, image)) - values[k]!)).toBeLessThan(1e-13 * (size + 1));
    }
    expect([...values].sort((a, b) => b - a)).toEqual(values);
  }
});

test("small values keep their relative accuracy: columns of sizes 1, 1e-12 and 1e-24", () => {
  const matrix = Float64Array.from([1, 1, 0, 1e-12, -1e-12, 0, 0, 0, 3e-24]);
  const { values } = singularValues(matrix, 3);
  for (const [k, exact] of [Math.SQRT2, Math.SQRT2 * 1e-12, 3e-24].entries())
    expect(Math.abs(values[k]! / exact - 1)).toBeLessThan(1e-14);
});
