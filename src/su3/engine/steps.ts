import { gcd, gcdOfNumbers, gcdOfSmall } from "../../exact/integer.js";
import { lcm } from "./elimination.js";
import type { Link } from "./links.js";

/**
 * One step of the recursion on a vector of integers, made primitive again: the same arithmetic twice, on numbers as
 * long as they stay below 2^53 and on BigInt, because one function for both runs many times slower on either.
 *
 * A vector has one slot more than its block has channels, for the absent sources: it holds 0.
 */

/** What a step multiplied the vector by, beyond the recursion: multiplier / divisor. */
export interface Rescaling {
  readonly multiplier: number | bigint;
  readonly divisor: number | bigint;
}

const LARGEST = Number.MAX_SAFE_INTEGER;

/**
 * Writes the primitive result of a step into `target`; undefined, with `target` spoilt, if a number would pass 2^53.
 *
 * @param largest - a bound on the absolute values of `source`
 * @param rests - scratch, at least as long as the target block
 */
export function stepNumbers(
  link: Link,
  source: Float64Array,
  largest: number,
  target: Float64Array,
  rests: Int32Array,
): Rescaling | undefined {
  const { sources, coefficients, divisors, growth } = link;
  const size = divisors.length;
  if (growth * largest > LARGEST) return undefined;
  let multiplier = 1;
  for (let c = 0, i = 0; c < size; c++, i += 4) {
    const sum =
      coefficients[i]! * source[sources[i]!]! +
      coefficients[i + 1]! * source[sources[i + 1]!]! +
      coefficients[i + 2]! * source[sources[i + 2]!]! +
      coefficients[i + 3]! * source[sources[i + 3]!]!;
    const divisor = divisors[c]!;
    const quotient = sum / divisor;
    if (quotient === Math.floor(quotient)) {
      target[c] = quotient;
      rests[c] = 1;
    } else {
      const common = gcdOfSmall(divisor, sum - Math.floor(quotient) * divisor);
      const rest = divisor / common;
      target[c] = sum / common;
      rests[c] = rest;
      if (multiplier % rest !== 0) multiplier *= rest / gcdOfNumbers(multiplier, rest);
      if (multiplier > LARGEST) return undefined;
    }
  }
  if (multiplier !== 1) {
    for (let c = 0; c < size; c++) {
      const value = target[c]! * (multiplier / rests[c]!);
      if (value > LARGEST || value < -LARGEST) return undefined;
      target[c] = value;
    }
  }
  return { multiplier, divisor: divideByContent(target, size) };
}

/** Divides the first `size` numbers by their greatest common divisor, which is returned (1 for the zero vector). */
function divideByContent(vector: Float64Array, size: number): number {
  let content = 0;
  for (let c = 0; c < size && content !== 1; c++) {
    if (vector[c] !== 0) content = gcdOfNumbers(Math.abs(vector[c]!), content);
  }
  if (content > 1) for (let c = 0; c < size; c++) vector[c]! /= content;
  return Math.max(content, 1);
}

/** The largest absolute value in a vector. */
export function largestOf(vector: Float64Array): number {
  let largest = 0;
  for (let c = 0; c < vector.length; c++) {
    const value = Math.abs(vector[c]!);
    if (value > largest) largest = value;
  }
  return largest;
}

/** The primitive result of a step in BigInt, as a new vector. */
export function stepBig(
  link: Link,
  source: readonly bigint[],
): Rescaling & { readonly big: readonly bigint[] } {
  const { sources, coefficients, divisors } = link;
  const sums = Array.from(divisors, (_, c) => {
    let sum = 0n;
    for (let i = 4 * c; i < 4 * c + 4; i++) {
      if (coefficients[i] !== 0) sum += BigInt(coefficients[i]!) * source[sources[i]!]!;
    }
    return sum;
  });
  const rests = sums.map((sum, c) => BigInt(divisors[c]!) / gcd(sum, BigInt(divisors[c]!)));
  const multiplier = rests.reduce(lcm, 1n);
  const scaled = sums.map((sum, c) => (sum * multiplier) / BigInt(divisors[c]!));
  let content = 0n;
  for (let c = 0; c < scaled.length && content !== 1n; c++) content = gcd(content, scaled[c]!);
  const divisor = content === 0n ? 1n : content;
  return { big: [...scaled.map((value) => value / divisor), 0n], multiplier, divisor };
}
