import { Matrix, pseudoInverse } from "ml-matrix";

/** Fractions moved to add up to 1. */
export interface ConstrainedFractions {
  readonly fractions: readonly number[];
  /** Least chi2 = (x' - x) V^-1 (x' - x). */
  readonly chi2: number;
  /** dx'/dx, row by row; it takes the errors of the fractions to those of the moved ones. */
  readonly projection: readonly (readonly number[])[];
}

/** A fraction this far below 0 is put to 0 by a constraint of its own. */
const BELOW_ZERO = -1e-14;

/**
 * Fractions x' nearest to x that add up to 1, none below 0: least chi2 = (x' - x) V^-1 (x' - x).
 *
 * With the constraints A x' = b (the sum, and 0 for each fraction that would be negative), x' = x - V A^T (A V A^T)^-1 (A x -
 * b); the constraints at 0 are those of an active set. V need not be invertible: what has no error does not move, and
 * what moves together stays together.
 * Source: least squares with linear constraints, e.g. W.T. Eadie et al., Statistical Methods in Experimental Physics,
 * North-Holland (1971), section 8.4 (provenance: memory).
 * @param fractions - length n
 * @param covariance - V, n x n, positive semidefinite
 * @returns chi2 is infinite if nothing that can move is left to bring the sum to 1
 */
export function constrainedFractions(
  fractions: readonly number[],
  covariance: readonly (readonly number[])[],
): ConstrainedFractions {
  const n = fractions.length;
  const x = Matrix.columnVector([...fractions]);
  const V = new Matrix(covariance.map((row) => [...row]));
  const atZero = new Set<number>();
  for (let turn = 0; turn <= 4 * n; turn++) {
    const held = [...atZero];
    const A = Matrix.zeros(1 + held.length, n);
    for (let k = 0; k < n; k++) A.set(0, k, 1);
    for (const [row, k] of held.entries()) A.set(1 + row, k, 1);
    const b = Matrix.columnVector([1, ...held.map(() => 0)]);
    const excess = A.mmul(x).sub(b);
    const inverse = pseudoInverse(A.mmul(V).mmul(A.transpose()));
    const multipliers = inverse.mmul(excess);
    const gain = V.mmul(A.transpose());
    const moved = Matrix.sub(x, gain.mmul(multipliers)).to1DArray();
    const sum = moved.reduce((total, value) => total + value, 0);
    if (!(Math.abs(sum - 1) < 1e-9)) break;
    // A constraint at 0 that pulls a fraction up is needed; one that pushes it down is not.
    const idle = held.find((_, row) => multipliers.get(1 + row, 0) > 0);
    const negative = moved.findIndex((value, k) => value < BELOW_ZERO && !atZero.has(k));
    if (idle !== undefined) atZero.delete(idle);
    else if (negative >= 0) atZero.add(negative);
    else {
      return {
        fractions: moved.map((value, k) => (atZero.has(k) ? 0 : Math.max(0, value))),
        chi2: excess.transpose().mmul(multipliers).get(0, 0),
        projection: Matrix.sub(Matrix.eye(n), gain.mmul(inverse).mmul(A)).to2DArray(),
      };
    }
  }
  return { fractions, chi2: Number.POSITIVE_INFINITY, projection: Matrix.eye(n).to2DArray() };
}

/** Groups of entries looked at for the smallest conflict, at most; subsets of more are too many. */
const MOST_GROUPS = 16;

/**
 * The smallest set of groups whose fractions exceed 1 by more than `sigmas` standard deviations by themselves; of several
 * as small, the one that exceeds it most.
 *
 * @param groups - entries that belong together (one measurement, one predicted isospin channel), by index
 * @returns indices of groups; all of them if no smaller set conflicts
 */
export function smallestConflict(
  groups: readonly (readonly number[])[],
  fractions: readonly number[],
  covariance: readonly (readonly number[])[],
  sigmas: number,
): number[] {
  const sumOver = (set: readonly number[], of: (group: number) => number) =>
    set.reduce((sum, group) => sum + of(group), 0);
  const values = groups.map((group) => group.reduce((sum, k) => sum + fractions[k]!, 0));
  const shared = groups.map((a) =>
    groups.map((b) => a.reduce((sum, i) => sum + b.reduce((part, j) => part + covariance[i]![j]!, 0), 0)),
  );
  // The largest groups decide; a small one alone tips no balance of so many.
  const order = groups
    .map((_, g) => g)
    .sort((a, b) => values[b]! - values[a]!)
    .slice(0, MOST_GROUPS);
  const distance = (set: readonly number[]) => {
    const excess = sumOver(set, (g) => values[g]!) - 1;
    const variance = sumOver(set, (a) => sumOver(set, (b) => shared[a]![b]!));
    return excess > 0 ? excess / Math.sqrt(Math.max(variance, 1e-30)) : 0;
  };
  for (let size = 1; size <= order.length; size++) {
    let best: readonly number[] = [];
    for (const set of subsets(order, size)) if (distance(set) > Math.max(sigmas, distance(best))) best = set;
    if (best.length > 0) return [...best];
  }
  return groups.map((_, g) => g);
}

function* subsets(items: readonly number[], size: number): Generator<number[]> {
  if (size === 0) {
    yield [];
    return;
  }
  for (let k = 0; k + size <= items.length; k++) {
    for (const rest of subsets(items.slice(k + 1), size - 1)) yield [items[k]!, ...rest];
  }
}
