import { bitLength, integerSquareRoot } from "./integer.js";

/**
 * Correct rounding of exact numbers to float64: nearest, ties to even, settled with integers.
 *
 * At and above 2^1024 - 2^970 the result is Infinity; below 2^-1022 it is a subnormal, rounded once to the multiple of
 * 2^-1074; at and below 2^-1075 it is 0. These are the rules of IEEE 754 for an operation in `roundTiesToEven`.
 */

const MANTISSA_BITS = 53;
const SMALLEST_EXPONENT = -1074;
const LARGEST_EXPONENT = 971;

/** The float64 nearest to num/den, for integers num >= 0 and den > 0. */
export function roundedQuotient(num: bigint, den: bigint): number {
  if (num === 0n) return 0;
  const shift = shiftFor(bitLength(num) - bitLength(den));
  const [n, d] = scaled(num, den, shift);
  const quotient = n / d;
  return rounded(quotient, shift, quotient * d !== n);
}

/** The float64 nearest to sqrt(num/den), for integers num >= 0 and den > 0. */
export function roundedSquareRoot(num: bigint, den: bigint): number {
  if (num === 0n) return 0;
  const shift = shiftFor(Math.floor((bitLength(num) - bitLength(den) - 1) / 2));
  const [n, d] = scaled(num, den, 2 * shift);
  const root = integerSquareRoot(n / d);
  return rounded(root, shift, root * root * d !== n);
}

/** The power of two that makes a number of about 2^exponent an integer with two bits to spare, or reaches 2^-1075. */
function shiftFor(exponent: number): number {
  return Math.min(MANTISSA_BITS + 2 - exponent, 1 - SMALLEST_EXPONENT);
}

function scaled(num: bigint, den: bigint, shift: number): [bigint, bigint] {
  return shift >= 0 ? [num << BigInt(shift), den] : [num, den << BigInt(-shift)];
}

/** Rounds (integer + rest) 2^-shift, where 0 <= rest < 1 and `inexact` says whether rest > 0. */
function rounded(integer: bigint, shift: number, inexact: boolean): number {
  const dropped = Math.max(bitLength(integer) - MANTISSA_BITS, SMALLEST_EXPONENT + shift);
  const half = 1n << BigInt(dropped - 1);
  let mantissa = integer >> BigInt(dropped);
  const rest = integer - (mantissa << BigInt(dropped));
  if (rest > half || (rest === half && (inexact || (mantissa & 1n) === 1n))) mantissa += 1n;
  const exponent = dropped - shift;
  return exponent > LARGEST_EXPONENT ? Infinity : Number(mantissa) * 2 ** exponent;
}
