import fc from "fast-check";
import { describe, expect, test } from "vitest";
import {
  bitLength,
  gcd,
  gcdOfNumbers,
  gcdOfSmall,
  integerSquareRoot,
  perfectSquareRoot,
} from "../../src/exact/integer.js";

const seed = 20_240_501;

/** Euclid's algorithm by subtraction of multiples, in BigInt only. */
function euclid(a: bigint, b: bigint): bigint {
  return b === 0n ? (a < 0n ? -a : a) : euclid(b, a % b);
}

describe("greatest common divisors", () => {
  test("gcd is Euclid's for integers of any size and sign", () => {
    const integer = fc.bigInt({ min: -(2n ** 200n), max: 2n ** 200n });
    fc.assert(
      fc.property(integer, integer, (a, b) => gcd(a, b) === euclid(a, b)),
      { seed },
    );
  });

  test("a common factor is found whatever its size", () => {
    const factor = fc.bigInt({ min: 1n, max: 2n ** 90n });
    fc.assert(
      fc.property(factor, factor, factor, (a, b, c) => gcd(a * c, b * c) === euclid(a, b) * c),
      { seed },
    );
  });

  test("gcdOfNumbers and gcdOfSmall agree with gcd up to 2^53 and 2^31", () => {
    const large = fc.integer({ min: 0, max: Number.MAX_SAFE_INTEGER });
    const small = fc.integer({ min: 0, max: 2 ** 31 - 1 });
    fc.assert(
      fc.property(large, large, (a, b) => BigInt(gcdOfNumbers(a, b)) === euclid(BigInt(a), BigInt(b))),
      { seed },
    );
    fc.assert(
      fc.property(small, small, (a, b) => BigInt(gcdOfSmall(a, b)) === euclid(BigInt(a), BigInt(b))),
      { seed },
    );
  });

  test("neighbours just below 2^53 have quotients that would round up, and are still right", () => {
    const top = Number.MAX_SAFE_INTEGER;
    for (let divisor = 2; divisor < 2000; divisor++) {
      for (const n of [top, top - 1, top - (top % divisor), top - (top % divisor) - 1]) {
        expect(gcdOfNumbers(n, divisor)).toBe(Number(euclid(BigInt(n), BigInt(divisor))));
      }
    }
  });

  test("gcd(0, 0) is 0 and gcd(0, n) is |n|", () => {
    expect([gcd(0n, 0n), gcd(0n, -7n), gcd(-7n, 0n)]).toEqual([0n, 7n, 7n]);
    expect([gcdOfNumbers(0, 0), gcdOfNumbers(0, 7), gcdOfNumbers(7, 0)]).toEqual([0, 7, 7]);
    // 2^31 is the first number that 32-bit arithmetic would take for a negative one.
    expect([gcdOfNumbers(2 ** 31, 2 ** 31), gcdOfNumbers(2 ** 31, 0)]).toEqual([2 ** 31, 2 ** 31]);
  });
});

describe("square roots and digits", () => {
  test("the integer square root r of n has r^2 <= n < (r+1)^2", () => {
    fc.assert(
      fc.property(fc.bigInt({ min: 0n, max: 2n ** 300n }), (n) => {
        const root = integerSquareRoot(n);
        return root * root <= n && n < (root + 1n) ** 2n;
      }),
      { seed },
    );
  });

  test("squares and their neighbours are told apart", () => {
    fc.assert(
      fc.property(fc.bigInt({ min: 2n, max: 2n ** 200n }), (root) => {
        return (
          perfectSquareRoot(root * root) === root &&
          perfectSquareRoot(root * root - 1n) === undefined &&
          perfectSquareRoot(root * root + 1n) === undefined
        );
      }),
      { seed },
    );
    expect([0n, 1n, 2n, 4n].map(perfectSquareRoot)).toEqual([0n, 1n, undefined, 2n]);
  });

  test("bitLength counts binary digits", () => {
    for (let bits = 0; bits < 300; bits++) {
      expect(bitLength(2n ** BigInt(bits))).toBe(bits + 1);
      expect(bitLength(2n ** BigInt(bits) - 1n)).toBe(bits);
    }
  });
});
