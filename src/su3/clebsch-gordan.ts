import { multiplyRoots, type SignedRoot, ZERO_ROOT } from "../exact/signed-root.js";
import { clebschGordan } from "../su2/clebsch-gordan.js";
import { type IsoscalarTable, isoscalarTable } from "./isoscalar-factors.js";
import { requireState, type State } from "./state.js";

/**
 * SU(3) Clebsch-Gordan coefficient <left; right | product, copy>: isoscalar factor times SU(2) coefficient.
 *
 * Exact, in the convention `deswart-v1`, left factor first; 0 where Y, I or I3 do not couple.
 * @param table - a table of the product that holds the irrep; without it the irrep is solved anew
 * @throws InputError if a state does not exist, or the product has no such irrep or copy
 */
export function su3ClebschGordan(
  left: State,
  right: State,
  product: State,
  copy: number,
  table: IsoscalarTable = isoscalarTable(left.irrep, right.irrep, { into: product.irrep }),
): SignedRoot {
  requireState("su3ClebschGordan: left", left);
  requireState("su3ClebschGordan: right", right);
  requireState("su3ClebschGordan: product", product);
  const channel = { threeY1: left.threeY, twoI1: left.twoI, threeY2: right.threeY, twoI2: right.twoI };
  const factor = table.factor(product.irrep, copy, product, channel);
  if (factor.sign === 0) return ZERO_ROOT;
  const isospin = clebschGordan(left.twoI, left.twoI3, right.twoI, right.twoI3, product.twoI, product.twoI3);
  return multiplyRoots(factor, isospin);
}
