import { addRational, type Rational, rational } from "./rational.js";
import { divideRoots, multiplyRoots, rootToRational, type SignedRoot, signedRoot } from "./signed-root.js";

/**
 * A sum of signed roots in the fewest terms: roots whose ratio is rational are added up, zeros drop out.
 *
 * The terms that remain are linearly independent over the rationals, so the sum is zero exactly if there are none.
 * @example addRoots([sqrt(2), sqrt(8), sqrt(3)]) // [sqrt(18), sqrt(3)]
 */
export function addRoots(roots: readonly SignedRoot[]): SignedRoot[] {
  const sums: { unit: SignedRoot; times: Rational }[] = [];
  for (const root of roots) {
    if (root.sign === 0) continue;
    const like = sums.find(({ unit }) => rootToRational(divideRoots(root, unit)) !== undefined);
    if (like === undefined) sums.push({ unit: root, times: rational(1) });
    else like.times = addRational(like.times, rootToRational(divideRoots(root, like.unit))!);
  }
  return sums
    .filter(({ times }) => times.num !== 0n)
    .map(({ unit, times }) => multiplyRoots(unit, rationalRoot(times)));
}

function rationalRoot({ num, den }: Rational): SignedRoot {
  return signedRoot(num, num * num, den * den);
}
