import { addRational, multiplyRational, type Rational, rational } from "../../src/exact/rational.js";
import {
  divideRoots,
  multiplyRoots,
  rootToRational,
  type SignedRoot,
  signedRoot,
  ZERO_ROOT,
} from "../../src/exact/signed-root.js";

/**
 * The exact sum of roots that are rational multiples of each other, as the terms of a scalar product of rows are.
 *
 * Throws if two of them are not: then the sum is no signed root of a rational.
 */
export function sumOfRoots(roots: readonly SignedRoot[]): SignedRoot {
  const terms = roots.filter((root) => root.sign !== 0);
  const [first] = terms;
  if (first === undefined) return ZERO_ROOT;
  const ratios = terms.map((root): Rational => {
    const ratio = rootToRational(divideRoots(root, first));
    if (ratio === undefined) throw new Error("the roots are not rational multiples of each other");
    return ratio;
  });
  const sum = ratios.reduce(addRational, rational(0));
  const square = multiplyRational(sum, sum);
  return multiplyRoots(first, signedRoot(sum.num < 0n ? -1 : 1, square.num, square.den));
}

/** The exact scalar product of two rows of roots. */
export function scalarProductOfRoots(a: readonly SignedRoot[], b: readonly SignedRoot[]): SignedRoot {
  return sumOfRoots(a.map((root, i) => multiplyRoots(root, b[i]!)));
}
