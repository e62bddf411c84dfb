import type { Mixing } from "./model.js";

/** An orthogonal matrix and its derivatives with respect to the parameters among its angles. */
export interface MixingMatrix {
  /** U(state, bare). */
  readonly value: readonly (readonly number[])[];
  readonly derivatives: readonly {
    readonly parameter: number;
    readonly value: readonly (readonly number[])[];
  }[];
}

/**
 * The mixing matrix of a group at a parameter vector, with derivatives.
 *
 * U is the product of plane rotations in their order, R(i, j; t) having cos t at (i, i) and (j, j), sin t at (i, j) and
 * -sin t at (j, i): for two states |1> = cos t |a> + sin t |b>, |2> = -sin t |a> + cos t |b>.
 */
export function mixingMatrix(mixing: Mixing, parameters: readonly number[]): MixingMatrix {
  const n = mixing.states.length;
  const angles = mixing.rotations.map(
    ({ angle, sign, offset, parameter }) =>
      sign * (parameter === undefined ? angle : parameters[parameter]!) + offset,
  );
  const product = (derived: number): number[][] =>
    mixing.rotations.reduce(
      (matrix, { first, second }, k) => rotated(matrix, first, second, angles[k]!, k === derived),
      identity(n),
    );
  return {
    value: product(-1),
    derivatives: mixing.rotations.flatMap(({ parameter, sign }, k) =>
      parameter === undefined
        ? []
        : [{ parameter, value: product(k).map((row) => row.map((d) => sign * d)) }],
    ),
  };
}

function identity(n: number): number[][] {
  return Array.from({ length: n }, (_, i) => Array.from({ length: n }, (_, j) => (i === j ? 1 : 0)));
}

/** matrix times R(i, j; angle), or times its derivative. */
function rotated(matrix: number[][], i: number, j: number, angle: number, derivative: boolean): number[][] {
  const [c, s] = derivative ? [-Math.sin(angle), Math.cos(angle)] : [Math.cos(angle), Math.sin(angle)];
  return matrix.map((row) =>
    row.map((old, k) => {
      if (k === i) return row[i]! * c - row[j]! * s;
      if (k === j) return row[i]! * s + row[j]! * c;
      return derivative ? 0 : old;
    }),
  );
}
