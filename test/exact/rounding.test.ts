import { describe, expect, test } from "vitest";
import { roundedQuotient, roundedSquareRoot } from "../../src/exact/rounding.js";
import { seededIntegers } from "../support/seeded-integers.js";

/** Neighbours of a float64 >= 0 as integers times 2^-1076, a quarter of the smallest subnormal. */
function bounds(x: number): { below: bigint; above: bigint; even: boolean } {
  const bits = new BigUint64Array(Float64Array.of(x).buffer)[0]!;
  const quarter = (b: bigint) => {
    const exponent = b >> 52n;
    const mantissa = b & (2n ** 52n - 1n);
    return (exponent === 0n ? mantissa : (mantissa + 2n ** 52n) << (exponent - 1n)) << 2n;
  };
  const here = quarter(bits);
  const lower = bits === 0n ? 0n : quarter(bits - 1n);
  return { below: (here + lower) / 2n, above: (here + quarter(bits + 1n)) / 2n, even: (bits & 1n) === 0n };
}

/** Whether x is the float64 nearest to num/den, ties to even, by exact integers; x may be Infinity. */
function isNearest(x: number, num: bigint, den: bigint): boolean {
  const value = num << 1076n;
  if (x === Infinity) return value >= (2n ** 1024n - 2n ** 970n) * 2n ** 1076n * den;
  const { below, above, even } = bounds(x);
  const reaches = even
    ? value >= below * den && value <= above * den
    : value > below * den && value < above * den;
  return reaches;
}

/** The same for the square root. */
function isNearestRoot(x: number, num: bigint, den: bigint): boolean {
  const value = num << 2152n;
  if (x === Infinity) return value >= ((2n ** 1024n - 2n ** 970n) * 2n ** 1076n) ** 2n * den;
  const { below, above, even } = bounds(x);
  const [low, high] = [below * below * den, above * above * den];
  return even ? value >= low && value <= high : value > low && value < high;
}

const seed = 77_001;

describe("rounding to float64 is nearest, ties to even", () => {
  test(`for 20000 quotients and roots of integers of 1 to 130 digits (seed ${seed})`, () => {
    const random = seededIntegers(seed);
    for (let i = 0; i < 20_000; i++) {
      const num = random.bigint(1 + random.below(130)) + 1n;
      const den = random.bigint(1 + random.below(130)) + 1n;
      expect(isNearest(roundedQuotient(num, den), num, den), `${num}/${den}`).toBe(true);
      expect(isNearestRoot(roundedSquareRoot(num, den), num, den), `sqrt(${num}/${den})`).toBe(true);
    }
  });

  test(`near and beyond the overflow and underflow thresholds (seed ${seed + 1})`, () => {
    const random = seededIntegers(seed + 1);
    for (let i = 0; i < 3000; i++) {
      const [num, den] = [random.bigint(60) + 1n, random.bigint(60) + 1n];
      for (const power of [960n, 1020n, 1030n]) {
        const large = num << power;
        expect(isNearest(roundedQuotient(large, den), large, den)).toBe(true);
        expect(isNearest(roundedQuotient(den, large), den, large)).toBe(true);
        const square = num << (2n * power);
        expect(isNearestRoot(roundedSquareRoot(square, den), square, den)).toBe(true);
        expect(isNearestRoot(roundedSquareRoot(den, square), den, square)).toBe(true);
      }
    }
  });

  test("subnormals are rounded once", () => {
    for (let k = 1n; k < 400n; k++) {
      for (const eighths of [8n * k, 8n * k + 1n, 8n * k + 4n, 8n * k + 7n]) {
        const den = 8n << 1074n;
        expect(isNearest(roundedQuotient(eighths, den), eighths, den)).toBe(true);
        expect(roundedSquareRoot(eighths * eighths, den * den)).toBe(roundedQuotient(eighths, den));
      }
    }
  });

  test("exact halfway cases go to the even neighbour", () => {
    const half = 2n ** 54n + 1n;
    expect(roundedQuotient(2n ** 54n + 2n, 1n)).toBe(2 ** 54);
    expect(roundedQuotient(2n ** 54n + 6n, 1n)).toBe(2 ** 54 + 8);
    expect(roundedSquareRoot((2n ** 54n + 2n) ** 2n, 1n)).toBe(2 ** 54);
    expect(roundedSquareRoot((2n ** 54n + 2n) ** 2n + 1n, 1n)).toBe(2 ** 54 + 4);
    expect(roundedSquareRoot(half * half, 4n)).toBe(2 ** 53);
  });

  test("the edges are those of IEEE 754", () => {
    expect(roundedQuotient(0n, 5n)).toBe(0);
    expect(roundedQuotient(2n ** 1024n - 2n ** 970n - 1n, 1n)).toBe(Number.MAX_VALUE);
    expect(roundedQuotient(2n ** 1024n - 2n ** 970n, 1n)).toBe(Infinity);
    expect(roundedQuotient(1n, 2n ** 1075n)).toBe(0);
    expect(roundedQuotient(2n ** 10n + 1n, 2n ** 1085n)).toBe(Number.MIN_VALUE);
    expect(roundedSquareRoot(1n, 2n ** 2150n)).toBe(0);
    expect(roundedSquareRoot(1n, 2n ** 2148n)).toBe(Number.MIN_VALUE);
  });

  test("the check itself rejects a neighbour", () => {
    const x = roundedSquareRoot(2n, 1n);
    expect(isNearestRoot(x, 2n, 1n)).toBe(true);
    expect(isNearestRoot(x + 2 ** -52, 2n, 1n)).toBe(false);
    expect(isNearestRoot(x - 2 ** -52, 2n, 1n)).toBe(false);
    expect(isNearest(1 / 3 + 2 ** -54, 1n, 3n)).toBe(false);
  });
});
