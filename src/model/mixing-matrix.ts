import type { Mixing, Rotation } from "./model.js";

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
  const angles = mixing.rotations.map((rotation) => rotationAngle(rotation, parameters));
  const product = (derived: number): number[][] =>
    mixing.rotations.reduce(
      (matrix, { first, second }, k) => rotated(matrix, first, second, angles[k]!.value, k === derived),
      identity(n),
    );
  return {
    value: product(-1),
    derivatives: mixing.rotations.flatMap(({ parameter }, k) =>
      parameter === undefined
        ? []
        : [{ parameter, value: product(k).map((row) => row.map((d) => angles[k]!.slope * d)) }],
    ),
  };
}

/**
 * The angle of a rotation in radians, and its derivative with respect to the rotation's parameter.
 *
 * A tied one would have to exceed sin 2t' = 1 where the other pair mixes more than its own masses allow: it stays at
 * 45 deg there.
 */
export function rotationAngle(
  { angle, sign, offset, parameter, tiedBy }: Rotation,
  parameters: readonly number[],
): { readonly value: number; readonly slope: number } {
  const t = sign * (parameter === undefined ? angle : parameters[parameter]!) + offset;
  if (tiedBy === undefined) return { value: t, slope: sign };
  const [sine, cosine] = [tiedBy * Math.sin(2 * t), Math.cos(2 * t)];
  const tiedCosine = Math.sign(cosine) * Math.sqrt(Math.max(0, 1 - sine * sine));
  const slope = tiedCosine === 0 ? 0 : (sign * tiedBy * cosine) / tiedCosine;
  return { value: Math.atan2(Math.max(-1, Math.min(sine, 1)), tiedCosine) / 2, slope };
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
