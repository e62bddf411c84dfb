import { type SignedRoot, signedRoot } from "../exact/signed-root.js";
import { requireInteger } from "../require.js";

/** A complex number with integer parts. */
type Complex = readonly [re: number, im: number];

/** A generator lambda_a = matrix / sqrt(square), 3 x 3. */
interface Generator {
  readonly matrix: readonly (readonly Complex[])[];
  readonly square: number;
}

/**
 * The antisymmetric structure constant f_abc of SU(3), exact: [lambda_a, lambda_b] = 2i sum over c of f_abc lambda_c.
 *
 * Source: M. Gell-Mann, Phys. Rev. 125 (1962) 1067 (provenance: memory); computed as (1/4i) Tr([lambda_a, lambda_b]
 * lambda_c).
 * @param a - 1 to 8, as b and c
 * @throws InputError outside 1 to 8
 * @example structureF(4, 5, 8) // sqrt(3/4)
 */
export function structureF(a: number, b: number, c: number): SignedRoot {
  return traced("structureF", [a, b, c], -1);
}

/**
 * The symmetric constant d_abc of SU(3), exact: {lambda_a, lambda_b} = (4/3) delta_ab + 2 sum over c of d_abc lambda_c.
 *
 * Source: M. Gell-Mann, Phys. Rev. 125 (1962) 1067 (provenance: memory); computed as (1/4) Tr({lambda_a, lambda_b}
 * lambda_c).
 * @param a - 1 to 8, as b and c
 * @throws InputError outside 1 to 8
 * @example structureD(1, 1, 8) // sqrt(1/3)
 */
export function structureD(a: number, b: number, c: number): SignedRoot {
  return traced("structureD", [a, b, c], 1);
}

/** (1/4) of the real part of Tr(ab c + ba c), or of the imaginary part of Tr(ab c - ba c). */
function traced(where: string, indices: readonly [number, number, number], symmetry: 1 | -1): SignedRoot {
  for (const [i, index] of indices.entries()) requireInteger(`${where}: index ${i + 1}`, index, 1, "", 8);
  const [a, b, c] = indices.map(lambda) as [Generator, Generator, Generator];
  const [first, second] = [trace(a, b, c), trace(b, a, c)];
  const part = symmetry === 1 ? 0 : 1;
  const quadruple = first[part] + symmetry * second[part];
  return signedRoot(quadruple, quadruple * quadruple, 16 * a.square * b.square * c.square);
}

function trace(a: Generator, b: Generator, c: Generator): Complex {
  let [re, im] = [0, 0];
  for (const [i, row] of a.matrix.entries()) {
    for (const [j, x] of row.entries()) {
      for (const [k, y] of b.matrix[j]!.entries()) {
        const term = times(times(x, y), c.matrix[k]![i]!);
        re += term[0];
        im += term[1];
      }
    }
  }
  return [re, im];
}

function times([a, b]: Complex, [c, d]: Complex): Complex {
  return [a * c - b * d, a * d + b * c];
}

/** The Gell-Mann matrix of an index: pairs (12), (13), (23) real and imaginary, and the two diagonal ones. */
function lambda(index: number): Generator {
  const diagonal: Readonly<Record<number, readonly number[]>> = { 3: [1, -1, 0], 8: [1, 1, -2] };
  const pairs: Readonly<Record<number, readonly [number, number, Complex]>> = {
    1: [0, 1, [1, 0]],
    2: [0, 1, [0, -1]],
    4: [0, 2, [1, 0]],
    5: [0, 2, [0, -1]],
    6: [1, 2, [1, 0]],
    7: [1, 2, [0, -1]],
  };
  const entries = diagonal[index];
  const pair = pairs[index];
  const at = (i: number, j: number): Complex => {
    if (entries !== undefined) return [i === j ? entries[i]! : 0, 0];
    const [row, column, value] = pair!;
    if (i === row && j === column) return value;
    // Hermitian; adding 0 keeps -0 out.
    return i === column && j === row ? [value[0], 0 - value[1]] : [0, 0];
  };
  return {
    matrix: [0, 1, 2].map((i) => [0, 1, 2].map((j) => at(i, j))),
    square: index === 8 ? 3 : 1,
  };
}
