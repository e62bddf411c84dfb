import { refuse } from "../require.js";
import { gcd } from "./integer.js";
import { roundedQuotient } from "./rounding.js";

/** An exact rational number in its one form: lowest terms, `den` > 0, zero as 0/1. */
export interface Rational {
  readonly num: bigint;
  readonly den: bigint;
}

/**
 * The rational num/den in lowest terms.
 *
 * @throws InputError if `den` is 0
 */
export function rational(num: bigint | number, den: bigint | number = 1n): Rational {
  const n = BigInt(num);
  const d = BigInt(den);
  if (d === 0n) refuse("rational: den", "an integer other than 0", d);
  const g = d < 0n ? -gcd(n, d) : gcd(n, d);
  return { num: n / g, den: d / g };
}

/**
 * The sum a + b, reduced with greatest common divisors of the denominators only.
 *
 * Source: D.E. Knuth, The Art of Computer Programming, vol. 2, section 4.5.1 (provenance: common practice).
 */
export function addRational(a: Rational, b: Rational): Rational {
  const g = gcd(a.den, b.den);
  if (g === 1n) return { num: a.num * b.den + b.num * a.den, den: a.den * b.den };
  const t = a.num * (b.den / g) + b.num * (a.den / g);
  const h = gcd(t, g);
  return { num: t / h, den: (a.den / g) * (b.den / h) };
}

/** The negative -a. */
export function negateRational(a: Rational): Rational {
  return { num: -a.num, den: a.den };
}

/** The difference a - b. */
export function subtractRational(a: Rational, b: Rational): Rational {
  return addRational(a, negateRational(b));
}

/** The product a b, reduced crosswise before multiplying. */
export function multiplyRational(a: Rational, b: Rational): Rational {
  const g = gcd(a.num, b.den);
  const h = gcd(b.num, a.den);
  return { num: (a.num / g) * (b.num / h), den: (a.den / h) * (b.den / g) };
}

/**
 * The quotient a / b.
 *
 * @throws InputError if b is 0
 */
export function divideRational(a: Rational, b: Rational): Rational {
  if (b.num === 0n) refuse("divideRational: divisor", "a rational other than 0", 0);
  return multiplyRational(a, b.num < 0n ? { num: -b.den, den: -b.num } : { num: b.den, den: b.num });
}

/** Whether a and b are the same number. */
export function equalRationals(a: Rational, b: Rational): boolean {
  return a.num === b.num && a.den === b.den;
}

/** The order of a and b: negative where a < b, 0 where equal, positive where a > b. */
export function compareRationals(a: Rational, b: Rational): -1 | 0 | 1 {
  const difference = a.num * b.den - b.num * a.den;
  return difference < 0n ? -1 : difference > 0n ? 1 : 0;
}

/** The float64 nearest to a, ties to even; ±Infinity and ±0 beyond the range, see `roundedQuotient`. */
export function rationalToNumber(a: Rational): number {
  return a.num < 0n ? -roundedQuotient(-a.num, a.den) : roundedQuotient(a.num, a.den);
}

/** The canonical text of a rational: `3/20`, `-1`, `0`. */
export function formatRational(a: Rational): string {
  return a.den === 1n ? a.num.toString() : `${a.num}/${a.den}`;
}

/**
 * Reads `3/20`, `-1` or `0`; a fraction need not be in lowest terms. Decimals such as `0.15` are refused.
 *
 * @throws InputError if the text is anything else, or the denominator is 0
 */
export function parseRational(text: string): Rational {
  const match = /^(-?\d+)(?:\/(\d+))?$/.exec(text);
  if (match === null || /^0+$/.test(match[2] ?? "1")) {
    refuse("parseRational", "an integer or a fraction such as -3/20", text, "Write decimals as fractions.");
  }
  return rational(BigInt(match[1]!), BigInt(match[2] ?? 1));
}
