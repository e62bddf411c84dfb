import { gcd, perfectSquareRoot } from "./integer.js";
import { type SignedRoot, signedRoot } from "./signed-root.js";

/** Roots written as integers, without a common divisor, times one positive root. */
export interface CommonRoot {
  readonly root: SignedRoot;
  readonly multiples: readonly bigint[];
}

/**
 * The largest root that divides all of some roots, and the integer multiples they are of it; undefined where some of
 * their ratios are irrational, or all are 0.
 *
 * @example commonRoot([sqrt(2/3), -sqrt(1/6)]) // { root: sqrt(1/6), multiples: [2n, -1n] }
 */
export function commonRoot(roots: readonly SignedRoot[]): CommonRoot | undefined {
  const denominator = roots.reduce((lcm, { den }) => (lcm * den) / gcd(lcm, den), 1n);
  const squares = roots.map(({ num, den }) => (num * denominator) / den);
  const common = squares.reduce((divisor, square) => gcd(divisor, square), 0n);
  if (common === 0n) return undefined;
  const multiples = squares.map((square, k) => {
    const size = perfectSquareRoot(square / common);
    return size === undefined ? undefined : BigInt(roots[k]!.sign) * size;
  });
  if (!multiples.every((multiple) => multiple !== undefined)) return undefined;
  return { root: signedRoot(1, common, denominator), multiples };
}
