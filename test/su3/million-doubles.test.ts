import { describe, expect, test } from "vitest";
import { isoscalarTable } from "../../src/su3/isoscalar-factors.js";

/** Whether x > 0, no subnormal, is the float64 nearest to sqrt(num/den): the squares of its bounds lie around num/den. */
function isNearestRoot(x: number, num: bigint, den: bigint): boolean {
  const exponent = Math.floor(Math.log2(x)) - 53;
  // Twice the mantissa; its neighbours' midpoints are one away, but half as far below a power of two.
  const scale = 2 ** -exponent;
  const doubled = BigInt(x * scale);
  const shift = BigInt(-2 * exponent);
  const value = num << shift;
  const [low, high] = [doubled - 1n, doubled + 1n];
  if (value > high * high * den) return false;
  const isPower = (x * scale) / 2 === 2 ** Math.round(Math.log2((x * scale) / 2));
  if (!isPower) return value >= low * low * den;
  const [lowQuarter, quarters] = [4n * doubled - 2n, 16n * value];
  return quarters >= lowQuarter * lowQuarter * den;
}

describe("doubles of a large table", () => {
  test("a million of them, (6,6) x (6,6), are each the nearest to the exact root, by squares of integers", () => {
    const irrep = { p: 6, q: 6 };
    const table = isoscalarTable(irrep, irrep);
    const doubles = table.doubles();
    const { sign, num, den, big } = table.columns();
    let checked = 0;
    let wrong = 0;
    for (let place = 0; place < sign.length; place++) {
      const x = doubles[place]!;
      if (sign[place] === 0) {
        if (!Object.is(x, 0)) wrong++;
        continue;
      }
      const fraction =
        num[place] === 0 ? big.get(place)! : { num: BigInt(num[place]!), den: BigInt(den[place]!) };
      checked++;
      if (Math.sign(x) !== sign[place] || !isNearestRoot(Math.abs(x), fraction.num, fraction.den)) wrong++;
    }
    expect(checked).toBeGreaterThan(1_000_000);
    expect(wrong).toBe(0);
  }, 300_000);

  test("the check notices a neighbour on either side, also at powers of two", () => {
    const random = [2n, 3n, 5n, 7n, 11n, 13n, 1000003n];
    for (const n of random) {
      const x = Math.sqrt(Number(n));
      const step = 2 ** (Math.floor(Math.log2(x)) - 52);
      expect([x - step, x, x + step].map((y) => isNearestRoot(y, n, 1n))).toEqual([false, true, false]);
    }
    expect([1 - 2 ** -53, 1, 1 + 2 ** -52].map((y) => isNearestRoot(y, 1n, 1n))).toEqual([
      false,
      true,
      false,
    ]);
    // Below 2^60 the next float64 is 128 away, so that the bound lies 64 below.
    const below = (distance: bigint) => 2n ** 120n - 2n * distance * 2n ** 60n;
    expect([50n, 80n].map((distance) => isNearestRoot(2 ** 60, below(distance), 1n))).toEqual([true, false]);
  });
});
