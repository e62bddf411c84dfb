import { refuse } from "../require.js";
import { gcd, perfectSquareRoot } from "./integer.js";
import { formatRational, multiplyRational, parseRational, type Rational, rational } from "./rational.js";
import { roundedSquareRoot } from "./rounding.js";

/** The exact number sign · sqrt(num/den): lowest terms, num >= 0, den > 0; zero is { 0, 0n, 1n }. */
export interface SignedRoot {
  readonly sign: -1 | 0 | 1;
  readonly num: bigint;
  readonly den: bigint;
}

/** The number 0. */
export const ZERO_ROOT: SignedRoot = Object.freeze({ sign: 0, num: 0n, den: 1n });

/** The number 1. */
export const ONE_ROOT: SignedRoot = Object.freeze({ sign: 1, num: 1n, den: 1n });

/**
 * The number sign · sqrt(num/den) in its one form.
 *
 * @param sign - any integer; only its sign counts
 * @throws InputError if num < 0 or den <= 0
 */
export function signedRoot(
  sign: number | bigint,
  num: bigint | number,
  den: bigint | number = 1n,
): SignedRoot {
  const n = BigInt(num);
  const d = BigInt(den);
  if (n < 0n) refuse("signedRoot: num", "an integer >= 0", n, "Carry the sign in `sign`.");
  if (d <= 0n) refuse("signedRoot: den", "an integer > 0", d);
  if (n === 0n || sign === 0 || sign === 0n) return ZERO_ROOT;
  const g = gcd(n, d);
  return { sign: sign < 0 ? -1 : 1, num: n / g, den: d / g };
}

/** The root of a signed square: -9/20 stands for -sqrt(9/20), the way printed tables give coefficients. */
export function rootOfSignedSquare(square: Rational): SignedRoot {
  return square.num < 0n ? signedRoot(-1, -square.num, square.den) : signedRoot(1, square.num, square.den);
}

/** The signed square sign · num/den of a root; inverse of `rootOfSignedSquare`. */
export function signedSquare(root: SignedRoot): Rational {
  return { num: root.sign < 0 ? -root.num : root.num, den: root.den };
}

/** The product a b. */
export function multiplyRoots(a: SignedRoot, b: SignedRoot): SignedRoot {
  return rootOfSignedSquare(multiplyRational(signedSquare(a), signedSquare(b)));
}

/**
 * The quotient a / b.
 *
 * @throws InputError if b is 0
 */
export function divideRoots(a: SignedRoot, b: SignedRoot): SignedRoot {
  if (b.sign === 0) refuse("divideRoots: divisor", "a root other than 0", 0);
  return multiplyRoots(a, { sign: b.sign, num: b.den, den: b.num });
}

/** The negative -a. */
export function negateRoot(a: SignedRoot): SignedRoot {
  return a.sign === 0 ? a : { sign: a.sign < 0 ? 1 : -1, num: a.num, den: a.den };
}

/** Whether a and b are the same number. */
export function equalRoots(a: SignedRoot, b: SignedRoot): boolean {
  return a.sign === b.sign && a.num === b.num && a.den === b.den;
}

/** The float64 nearest to a, ties to even; ±Infinity and ±0 beyond the range, see `roundedSquareRoot`. */
export function rootToNumber(a: SignedRoot): number {
  return a.sign === 0 ? 0 : a.sign * roundedSquareRoot(a.num, a.den);
}

/** The canonical text of a root: `-sqrt(3/20)`, `sqrt(2)`; a perfect square prints as its rational `1/2`, `-1`, `0`. */
export function formatRoot(a: SignedRoot): string {
  if (a.sign === 0) return "0";
  const sign = a.sign < 0 ? "-" : "";
  const num = perfectSquareRoot(a.num);
  const den = num === undefined ? undefined : perfectSquareRoot(a.den);
  if (num !== undefined && den !== undefined) return sign + formatRational({ num, den });
  return `${sign}sqrt(${formatRational(a)})`;
}

/**
 * Reads `-sqrt(3/20)`, `sqrt(2)`, `1/2`, `-1` or `0`.
 *
 * @throws InputError if the text is anything else
 */
export function parseRoot(text: string): SignedRoot {
  const match = /^(-?)(?:sqrt\((\d+(?:\/\d+)?)\)|(\d+(?:\/\d+)?))$/.exec(text);
  if (match === null) refuse("parseRoot", "a number such as -sqrt(3/20), sqrt(2), 1/2 or -1", text);
  const value = parseRational(match[2] ?? match[3]!);
  const square = match[2] === undefined ? multiplyRational(value, value) : value;
  return signedRoot(match[1] === "-" ? -1 : 1, square.num, square.den);
}

/** The rational a stands for where a is one, otherwise undefined. */
export function rootToRational(a: SignedRoot): Rational | undefined {
  const num = perfectSquareRoot(a.num);
  const den = perfectSquareRoot(a.den);
  if (num === undefined || den === undefined) return undefined;
  return rational(a.sign < 0 ? -num : num, den);
}
