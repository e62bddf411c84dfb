import { integerSquareRoot } from "../exact/integer.js";
import type { Irrep } from "../su3/irrep.js";
import { irrepName } from "../su3/irrep.js";
import { isoscalarTable, valueAt } from "../su3/isoscalar-factors.js";
import type { AuditCheck, PlannedCheck } from "./check.js";

/** Binary digits kept of the exact root, far more than a float64 has. */
const DIGITS = 160n;

/** The error of every float64 of some products against integer square roots, in units in the last place. */
export function roundingCheck(products: readonly (readonly [Irrep, Irrep])[]): PlannedCheck {
  const name = "rounding/doubles";
  return { name, run: () => checkedDoubles(name, products) };
}

function checkedDoubles(name: string, products: readonly (readonly [Irrep, Irrep])[]): AuditCheck {
  let checked = 0;
  let largest = 0;
  let where = "";
  const differences: string[] = [];
  for (const [left, right] of products) {
    const table = isoscalarTable(left, right);
    const doubles = table.doubles();
    const columns = table.columns();
    for (const [place, x] of doubles.entries()) {
      const { sign, num, den } = valueAt(columns, place);
      const error = sign === 0 ? Math.abs(x) : errorInUlps(sign * x, num, den);
      checked++;
      if (error > largest) {
        largest = error;
        where = `sqrt(${num}/${den})`;
      }
      if (!(error <= 0.5))
        differences.push(
          `${irrepName(left)} x ${irrepName(right)}, place ${place}: ${x} is off by ${error} ulp`,
        );
    }
  }
  return {
    name,
    what: `every float64 of ${products.map(([a, b]) => `${irrepName(a)} x ${irrepName(b)}`).join(", ")}`,
    source: `integer square roots to ${DIGITS} binary digits; at most 0.5 ulp is correct rounding`,
    checked,
    worst: `${largest.toFixed(6)} ulp at ${where}`,
    differences,
  };
}

/** |x - sqrt(num/den)| in units in the last place of x > 0; Infinity for another sign. */
export function errorInUlps(x: number, num: bigint, den: bigint): number {
  if (!(x > 0)) return Number.POSITIVE_INFINITY;
  const exact = integerSquareRoot((num << (2n * DIGITS)) / den);
  const ulpExponent = Math.floor(Math.log2(x)) - 52;
  const approximate = BigInt(x * 2 ** -ulpExponent) << (DIGITS + BigInt(ulpExponent));
  const difference = approximate > exact ? approximate - exact : exact - approximate;
  // Below a power of two the spacing is half as wide.
  const isPower = x === 2 ** (ulpExponent + 52);
  const finer = isPower && approximate > exact ? 2 : 1;
  return (finer * Number(difference)) / 2 ** (Number(DIGITS) + ulpExponent);
}
