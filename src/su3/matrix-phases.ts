import { requireIdentity } from "../require.js";
import type { State } from "./state.js";

/**
 * One state of the octet in the matrix basis (3x3 traceless matrices, rows quark, columns antiquark): the matrix is
 * entries / sqrt(square), the generators act on it by commutator, and the state of convention `deswart-v1` is
 * phase times the matrix.
 */
export interface MatrixState {
  readonly state: State;
  readonly entries: Matrix;
  readonly square: number;
  readonly phase: 1 | -1;
}

export type Matrix = readonly (readonly number[])[];

/**
 * The octet in the matrix basis with its phases against `deswart-v1`, in the order of `states`.
 *
 * The matrices are the usual ones, each multiplying its particle's symbol in the baryon or meson matrix: E13 for p or
 * K+, E31 for Xi- or K-, (E11 - E22)/sqrt2 for Sigma0 or pi0, (E11 + E22 - 2 E33)/sqrt6 for Lambda or eta8. The phases
 * follow: with the first state (p, K+) positive, all matrix elements of I+ and V+ must be.
 */
export function octetMatrixStates(): MatrixState[] {
  const basis = octetMatrices();
  const phases: (1 | -1 | 0)[] = basis.map((_, i) => (i === 0 ? 1 : 0));
  const raisings = [unit(0, 1), unit(0, 2)];
  for (let round = 0; round < basis.length; round++) {
    for (const generator of raisings) {
      for (const [i, from] of basis.entries()) {
        for (const [j, to] of basis.entries()) {
          const element = Math.sign(overlap(to.entries, commutator(generator, from.entries)));
          if (element === 0) continue;
          if (phases[i] === 0 && phases[j] !== 0) phases[i] = (element * phases[j]!) as 1 | -1;
          if (phases[j] === 0 && phases[i] !== 0) phases[j] = (element * phases[i]!) as 1 | -1;
          requireIdentity("octetMatrixStates", phases[i]! * phases[j]! * element >= 0, () => {
            return `no phases make the matrix element between states ${i} and ${j} positive`;
          });
        }
      }
    }
  }
  return basis.map((entry, i) => ({ ...entry, phase: phases[i] as 1 | -1 }));
}

/** The commutator [a, b] of two 3x3 matrices of integers. */
export function commutator(a: Matrix, b: Matrix): Matrix {
  const ab = product(a, b);
  const ba = product(b, a);
  return ab.map((row, i) => row.map((value, j) => value - ba[i]![j]!));
}

/** The product a b of two 3x3 matrices. */
export function product(a: Matrix, b: Matrix): Matrix {
  return a.map((row) => [0, 1, 2].map((j) => row.reduce((sum, value, k) => sum + value * b[k]![j]!, 0)));
}

/** The trace of a^T b, which is the scalar product of real matrices. */
export function overlap(a: Matrix, b: Matrix): number {
  return a.reduce((sum, row, i) => sum + row.reduce((part, value, j) => part + value * b[i]![j]!, 0), 0);
}

function octetMatrices(): Omit<MatrixState, "phase">[] {
  const octet = { p: 1, q: 1 };
  const matrix = (threeY: number, twoI: number, twoI3: number, entries: Matrix) => ({
    state: { irrep: octet, threeY, twoI, twoI3 },
    entries,
    square: overlap(entries, entries),
  });
  return [
    matrix(3, 1, 1, unit(0, 2)),
    matrix(3, 1, -1, unit(1, 2)),
    matrix(0, 2, 2, unit(0, 1)),
    matrix(0, 2, 0, diagonal(1, -1, 0)),
    matrix(0, 2, -2, unit(1, 0)),
    matrix(0, 0, 0, diagonal(1, 1, -2)),
    matrix(-3, 1, 1, unit(2, 1)),
    matrix(-3, 1, -1, unit(2, 0)),
  ];
}

/** The matrix E_ij with a single 1. */
function unit(i: number, j: number): Matrix {
  return [0, 1, 2].map((row) => [0, 1, 2].map((column) => (row === i && column === j ? 1 : 0)));
}

function diagonal(...values: readonly number[]): Matrix {
  return values.map((value, i) => values.map((_, j) => (i === j ? value : 0)));
}
