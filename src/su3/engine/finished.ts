import { gcd, gcdOfNumbers } from "../../exact/integer.js";
import type { PrimeTable } from "../../exact/prime-powers.js";
import type { LoweredCopy } from "./lowering.js";

/**
 * Factors in their finished form, sign · sqrt(num/den) in lowest terms, in columns of numbers.
 *
 * A structural zero has sign 0, num 0 and den 1. Where num or den passes 2^53, both columns hold 0 and the pair stands
 * in `big`, by its place.
 */
export interface FinishedColumns {
  readonly sign: Int8Array;
  readonly num: Float64Array;
  readonly den: Float64Array;
  readonly big: Map<number, BigFraction>;
}

/** A positive fraction in lowest terms. */
export interface BigFraction {
  readonly num: bigint;
  readonly den: bigint;
}

/** Columns for `count` factors, all zero. */
export function emptyColumns(count: number): FinishedColumns {
  return {
    sign: new Int8Array(count),
    num: new Float64Array(count),
    den: new Float64Array(count).fill(1),
    big: new Map(),
  };
}

/** Writes the factors of multiplet `m` of a copy to the columns from `start` on. */
export type Finisher = (lowered: LoweredCopy, m: number, columns: FinishedColumns, start: number) => void;

const LARGEST = Number.MAX_SAFE_INTEGER;
const POWERS = 64;

/**
 * The finisher for the products of one prime table: lowest terms by taking the primes of the denominator out of y,
 * without a greatest common divisor except against the cofactor of N.
 */
export function finisher(table: PrimeTable): Finisher {
  const primes = Float64Array.from(table.primes);
  const width = primes.length;
  const powers = Float64Array.from(
    { length: width * POWERS },
    (_, i) => primes[Math.floor(i / POWERS)]! ** (i % POWERS),
  );
  return (lowered, m, { sign, num, den, big }, start) => {
    const { layout, integers, normExponents } = lowered;
    const { weights, size } = layout.blocks[m]!;
    const cofactor = lowered.normCofactors[m]!;
    const bigVector = lowered.big.get(m);
    const small = bigVector === undefined && cofactor <= LARGEST;
    const cofactorNumber = Number(cofactor);
    const first = layout.starts[m]!;
    for (let c = 0; c < size; c++) {
      const value = bigVector === undefined ? integers[first + c]! : Math.sign(Number(bigVector[c]!));
      if (value === 0) continue;
      const place = start + c;
      sign[place] = value < 0 ? -1 : 1;
      let y = Math.abs(value);
      let above = 1;
      let below = cofactorNumber;
      const exact = small && (cofactorNumber === 1 || gcdOfNumbers(y, cofactorNumber) === 1);
      for (let j = 0; j < width; j++) {
        let e = weights[c * width + j]! - normExponents[m * width + j]!;
        if (e < 0) {
          const p = primes[j]!;
          for (let q = y / p; e < 0 && q === Math.floor(q); q = y / p) {
            y = q;
            e += 2;
          }
          if (e < 0) below *= e > -POWERS ? powers[j * POWERS - e]! : Infinity;
        }
        if (e > 0) above *= e < POWERS ? powers[j * POWERS + e]! : Infinity;
      }
      const square = above * y * y;
      if (exact && square <= LARGEST && below <= LARGEST) {
        num[place] = square;
        den[place] = below;
        continue;
      }
      num[place] = 0;
      den[place] = 0;
      const whole = exact && above <= LARGEST && below <= LARGEST;
      big.set(
        place,
        whole
          ? { num: BigInt(above) * BigInt(y) ** 2n, den: BigInt(below) }
          : exactSquare(table, lowered, m, c),
      );
    }
  };
}

/** The square of a factor other than 0, in lowest terms, for any size. */
export function exactSquare({ primes }: PrimeTable, lowered: LoweredCopy, m: number, c: number): BigFraction {
  const { layout, normExponents, normCofactors } = lowered;
  const value = exactInteger(lowered, m, c);
  let y = value < 0n ? -value : value;
  let num = 1n;
  let den = 1n;
  for (const [j, prime] of primes.entries()) {
    const p = BigInt(prime);
    let e = layout.blocks[m]!.weights[c * primes.length + j]! - normExponents[m * primes.length + j]!;
    for (; e < 0 && y % p === 0n; e += 2) y /= p;
    if (e > 0) num *= p ** BigInt(e);
    if (e < 0) den *= p ** BigInt(-e);
  }
  const square = y * y;
  const common = gcd(square, normCofactors[m]!);
  return { num: num * (square / common), den: den * (normCofactors[m]! / common) };
}

/** The integer y of a factor. */
export function exactInteger({ layout, integers, big }: LoweredCopy, m: number, c: number): bigint {
  return big.get(m)?.[c] ?? BigInt(integers[layout.starts[m]! + c]!);
}
