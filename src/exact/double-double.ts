import { bitLength, integerSquareRoot } from "./integer.js";

/**
 * Numbers held as an unevaluated sum hi + lo of two float64, good to about 104 binary digits.
 *
 * Source: T.J. Dekker, Numer. Math. 18 (1971) 224 (provenance: memory).
 */
export type DoubleDouble = readonly [hi: number, lo: number];

const SPLITTER = 2 ** 27 + 1;

/** The rounding error a b - fl(a b), exact while neither overflows nor underflows. */
export function productError(a: number, b: number): number {
  const scaledA = SPLITTER * a;
  const a1 = scaledA - (scaledA - a);
  const a2 = a - a1;
  const scaledB = SPLITTER * b;
  const b1 = scaledB - (scaledB - b);
  const b2 = b - b1;
  return a2 * b2 - (a * b - a1 * b1 - a2 * b1 - a1 * b2);
}

/** The product a b; relative error below 2^-102. */
export function multiplyDoubleDouble(a: DoubleDouble, b: DoubleDouble): DoubleDouble {
  const product = a[0] * b[0];
  const rest = productError(a[0], b[0]) + (a[0] * b[1] + a[1] * b[0]);
  const hi = product + rest;
  return [hi, rest - (hi - product)];
}

/** The square root of num/den, for integers num, den > 0 of moderate size; relative error below 2^-105. */
export function rootAsDoubleDouble(num: bigint, den: bigint): DoubleDouble {
  const shift = BigInt(Math.max(0, 110 + bitLength(den) - bitLength(num)));
  const root = integerSquareRoot((num << (2n * shift)) / den);
  const hi = Number(root);
  const unit = 2 ** -Number(shift);
  return [hi * unit, Number(root - BigInt(hi)) * unit];
}
