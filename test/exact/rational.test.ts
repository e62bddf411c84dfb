import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { gcd } from "../../src/exact/integer.js";
import {
  addRational,
  compareRationals,
  divideRational,
  equalRationals,
  formatRational,
  multiplyRational,
  negateRational,
  parseRational,
  type Rational,
  rational,
  rationalToNumber,
  subtractRational,
} from "../../src/exact/rational.js";

const seed = 20_240_502;
const integer = fc.bigInt({ min: -(2n ** 70n), max: 2n ** 70n });
const positive = fc.bigInt({ min: 1n, max: 2n ** 70n });
const anyRational = fc.tuple(integer, positive).map(([n, d]) => rational(n, d));
/** Denominators with many common factors, where reduction matters. */
const closeRational = fc
  .tuple(fc.integer({ min: -60, max: 60 }), fc.constantFrom(1, 2, 3, 4, 6, 12, 20, 24, 30, 60, 120))
  .map(([n, d]) => rational(n, d));
const someRational = fc.oneof(anyRational, closeRational);

function isCanonical({ num, den }: Rational): boolean {
  return den > 0n && gcd(num, den) === 1n;
}

describe("rationals form a field with one canonical form", () => {
  test("sums, products and quotients are in lowest terms and equal those by cross-multiplication", () => {
    fc.assert(
      fc.property(someRational, someRational, (a, b) => {
        const sum = rational(a.num * b.den + b.num * a.den, a.den * b.den);
        const product = rational(a.num * b.num, a.den * b.den);
        const results = [addRational(a, b), multiplyRational(a, b), subtractRational(a, b)];
        if (b.num !== 0n) results.push(divideRational(a, b));
        const quotient = b.num === 0n || equalRationals(multiplyRational(results.at(-1)!, b), a);
        return (
          results.every(isCanonical) &&
          equalRationals(results[0]!, sum) &&
          equalRationals(results[1]!, product) &&
          quotient
        );
      }),
      { seed, numRuns: 500 },
    );
  });

  test("addition and multiplication are associative, commutative and distributive", () => {
    fc.assert(
      fc.property(someRational, someRational, someRational, (a, b, c) => {
        const times = multiplyRational;
        const plus = addRational;
        return (
          equalRationals(plus(plus(a, b), c), plus(a, plus(b, c))) &&
          equalRationals(times(times(a, b), c), times(a, times(b, c))) &&
          equalRationals(plus(a, b), plus(b, a)) &&
          equalRationals(times(a, plus(b, c)), plus(times(a, b), times(a, c))) &&
          equalRationals(plus(a, negateRational(a)), rational(0))
        );
      }),
      { seed, numRuns: 300 },
    );
  });

  test("the order is that of the difference's sign", () => {
    fc.assert(
      fc.property(someRational, someRational, (a, b) => {
        const difference = subtractRational(a, b).num;
        return compareRationals(a, b) === (difference < 0n ? -1 : difference > 0n ? 1 : 0);
      }),
      { seed },
    );
  });

  test("a negative denominator moves its sign up, and zero is 0/1", () => {
    expect(rational(6, -4)).toEqual({ num: -3n, den: 2n });
    expect(rational(0, -5)).toEqual({ num: 0n, den: 1n });
  });
});

describe("text and numbers", () => {
  test("text reads back as the same rational", () => {
    fc.assert(
      fc.property(someRational, (a) => equalRationals(parseRational(formatRational(a)), a)),
      { seed },
    );
    expect([rational(3, 20), rational(-1), rational(0)].map(formatRational)).toEqual(["3/20", "-1", "0"]);
    expect(parseRational("6/40")).toEqual(rational(3, 20));
  });

  test("every float64 between the extremes is the number of its own exact fraction", () => {
    const finite = fc.double({ noNaN: true, noDefaultInfinity: true });
    fc.assert(
      fc.property(finite, (x) => {
        const exact = timesSmallest(Math.abs(x));
        return rationalToNumber(rational(x < 0 ? -exact : exact, 2n ** 1074n)) === x + 0;
      }),
      { seed, numRuns: 300 },
    );
  });

  test("text of any other form is refused", () => {
    expect(() => parseRational("0.15")).toThrow(
      new InputError(
        'parseRational: expected an integer or a fraction such as -3/20, got "0.15". Write decimals as fractions.',
      ),
    );
    for (const text of ["", "1/", "1/0", "1/-2", "+1", "1e3", " 1"])
      expect(() => parseRational(text)).toThrow(InputError);
  });

  test("denominators and divisors of 0 are refused", () => {
    expect(() => rational(1, 0)).toThrow(
      new InputError("rational: den: expected an integer other than 0, got 0."),
    );
    expect(() => divideRational(rational(1), rational(0))).toThrow(
      new InputError("divideRational: divisor: expected a rational other than 0, got 0."),
    );
  });
});

/** x · 2^1074 as an integer, from the bits of the float64. */
function timesSmallest(x: number): bigint {
  const bits = new BigUint64Array(Float64Array.of(x).buffer)[0]!;
  const exponent = bits >> 52n;
  const mantissa = bits & (2n ** 52n - 1n);
  return exponent === 0n ? mantissa : (mantissa + 2n ** 52n) << (exponent - 1n);
}
