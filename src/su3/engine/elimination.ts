import { gcd } from "../../exact/integer.js";

/** Rows reduced against each other, and the pivot column of each: zero in every other row. */
export interface ReducedRows {
  readonly rows: readonly bigint[][];
  readonly pivots: readonly number[];
}

/** A vector of integers divided by their greatest common divisor; the zero vector stays. */
export function primitive(vector: readonly bigint[]): bigint[] {
  let content = 0n;
  for (const value of vector) {
    if (value !== 0n) content = gcd(content, value);
    if (content === 1n) return [...vector];
  }
  return content === 0n ? [...vector] : vector.map((value) => value / content);
}

/** Gauss-Jordan elimination in integers, looking for pivots in the given order of columns; rows end primitive. */
export function reducedRows(matrix: readonly (readonly bigint[])[], columns: readonly number[]): ReducedRows {
  let rest = matrix.map(primitive);
  let done: bigint[][] = [];
  const pivots: number[] = [];
  for (const column of columns) {
    const index = rest.findIndex((row) => row[column] !== 0n);
    if (index < 0) continue;
    const pivot = rest[index]!;
    const cleared = (row: bigint[]) => clearedColumn(row, pivot, column);
    rest = rest.filter((_, i) => i !== index).map(cleared);
    done = [...done.map(cleared), pivot];
    pivots.push(column);
  }
  return { rows: done, pivots };
}

/**
 * Basis of the vectors that every row of a matrix annuls, with pivots sought from the last column backwards.
 *
 * The free columns are then the first independent ones, and vector i is zero on every free column but the i-th.
 */
export function nullSpace(
  matrix: readonly (readonly bigint[])[],
  width: number,
): { basis: bigint[][]; free: number[] } {
  const backwards = Array.from({ length: width }, (_, i) => width - 1 - i);
  const { rows, pivots } = reducedRows(matrix, backwards);
  const free = backwards.filter((column) => !pivots.includes(column)).reverse();
  const basis = free.map((column) => {
    const scale = rows.reduce((product, row, i) => lcm(product, row[pivots[i]!]!), 1n);
    const vector = new Array<bigint>(width).fill(0n);
    vector[column] = scale;
    for (const [i, row] of rows.entries()) vector[pivots[i]!] = -(row[column]! * scale) / row[pivots[i]!]!;
    return primitive(vector);
  });
  return { basis, free };
}

/** Least common multiple of two non-zero integers, positive. */
export function lcm(a: bigint, b: bigint): bigint {
  const product = (a / gcd(a, b)) * b;
  return product < 0n ? -product : product;
}

function clearedColumn(row: bigint[], pivot: readonly bigint[], column: number): bigint[] {
  const factor = row[column]!;
  if (factor === 0n) return row;
  return primitive(row.map((value, i) => value * pivot[column]! - factor * pivot[i]!));
}
