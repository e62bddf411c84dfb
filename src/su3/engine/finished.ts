import { gcd, gcdOfNumbers } from "../../exact/integer.js";
import type { PrimeTable } from "../../exact/prime-powers.js";
import type { ProductBlocks } from "./blocks.js";
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
/** Stands for a cofactor where y itself is no number. */
const NO_NUMBER = 2n ** 64n;

/**
 * The numbers of one multiplet while primes are moved between them, per channel: factor^2 is
 * above · aboveRest · y^2 / (below · belowRest), the rests 1 until a product would pass 2^53.
 */
interface Scratch {
  readonly y: Float64Array;
  readonly above: Float64Array;
  readonly aboveRest: Float64Array;
  readonly below: Float64Array;
  readonly belowRest: Float64Array;
}

/**
 * The finisher for a product: lowest terms by taking the primes of the denominator out of y, one prime after another,
 * without a greatest common divisor except against the cofactor of N.
 */
export function finisher({ table, largestBlock }: ProductBlocks): Finisher {
  const width = table.primes.length;
  const powers = Array.from(table.primes, (p) => Float64Array.from({ length: POWERS }, (_, e) => p ** e));
  const bigPowers = keptPowers(table);
  const column = () => new Float64Array(largestBlock);
  const scratch = { y: column(), above: column(), aboveRest: column(), below: column(), belowRest: column() };
  return (lowered, m, columns, start) => {
    const { layout, integers, normExponents } = lowered;
    const { weights, size } = layout.blocks[m]!;
    const bigVector = lowered.big.get(m);
    for (let c = 0; c < size; c++) {
      const value =
        bigVector === undefined ? integers[layout.starts[m]! + c]! : Math.sign(Number(bigVector[c]!));
      columns.sign[start + c] = Math.sign(value);
      scratch.y[c] = Math.abs(value);
    }
    for (const name of ["above", "aboveRest", "below", "belowRest"] as const) scratch[name].fill(1, 0, size);
    for (let j = 0; j < width; j++) {
      movePrime(scratch, size, weights, j, width, normExponents[m * width + j]!, powers[j]!);
    }
    const cofactor = bigVector === undefined ? lowered.normCofactors[m]! : NO_NUMBER;
    writeFractions(scratch, size, cofactor, columns, start, (c) =>
      exactSquare(table, lowered, m, c, bigPowers),
    );
  };
}

/** Moves the power of one prime in F/N of each channel to its place, less what cancels against y. */
function movePrime(
  { y, above, aboveRest, below, belowRest }: Scratch,
  size: number,
  weights: Int16Array,
  j: number,
  width: number,
  norm: number,
  powers: Float64Array,
): void {
  const p = powers[1]!;
  for (let c = 0, i = j; c < size; c++, i += width) {
    let e = weights[i]! - norm;
    if (e < 0) {
      let value = y[c]!;
      for (let quotient = value / p; quotient === Math.floor(quotient); quotient = value / p) {
        value = quotient;
        e += 2;
        if (e >= 0) break;
      }
      y[c] = value;
      if (e < 0) multiplyInto(below, belowRest, c, e > -POWERS ? powers[-e]! : Infinity);
    }
    if (e > 0) multiplyInto(above, aboveRest, c, e < POWERS ? powers[e]! : Infinity);
  }
}

/** Multiplies product · rest by a factor, keeping each below 2^53 as long as two numbers can hold it. */
function multiplyInto(product: Float64Array, rest: Float64Array, c: number, factor: number): void {
  const next = product[c]! * factor;
  if (next <= LARGEST) {
    product[c] = next;
  } else {
    rest[c]! *= product[c]!;
    product[c] = factor;
  }
}

/** Writes the fractions, less what y^2 and the cofactor of N have in common; `settle` does it where numbers fail. */
function writeFractions(
  { y, above, aboveRest, below, belowRest }: Scratch,
  size: number,
  cofactor: bigint,
  { sign, num, den, big }: FinishedColumns,
  start: number,
  settle: (c: number) => BigFraction,
): void {
  const small = cofactor <= LARGEST;
  const divisor = small ? Number(cofactor) : 1;
  for (let c = 0; c < size; c++) {
    const place = start + c;
    if (sign[place] === 0) continue;
    // gcd(y^2, cofactor) = common · again, whatever powers of primes the two hold.
    const common = divisor === 1 ? 1 : gcdOfNumbers(y[c]!, divisor);
    const again = common === 1 ? 1 : gcdOfNumbers(common, divisor / common);
    multiplyInto(below, belowRest, c, divisor / (common * again));
    const root = y[c]! / common;
    const otherRoot = y[c]! / again;
    const square = above[c]! * root * otherRoot;
    if (small && square <= LARGEST && below[c]! <= LARGEST && aboveRest[c] === 1 && belowRest[c] === 1) {
      num[place] = square;
      den[place] = below[c]!;
      continue;
    }
    num[place] = 0;
    den[place] = 0;
    const largest = Math.max(above[c]!, aboveRest[c]!, below[c]!, belowRest[c]!);
    if (small && largest <= LARGEST) {
      big.set(place, {
        num: BigInt(above[c]!) * BigInt(aboveRest[c]!) * BigInt(root) * BigInt(otherRoot),
        den: BigInt(below[c]!) * BigInt(belowRest[c]!),
      });
    } else big.set(place, settle(c));
  }
}

/** A power of prime number j of a table. */
type BigPower = (j: number, exponent: number) => bigint;

/** Powers of primes that are kept once made: the same few dozen come again with every factor. */
function keptPowers({ primes }: PrimeTable): BigPower {
  const kept = primes.map(() => [1n]);
  return (j, exponent) => {
    const powers = kept[j]!;
    for (let e = powers.length; e <= exponent; e++) powers.push(powers[e - 1]! * BigInt(primes[j]!));
    return powers[exponent]!;
  };
}

/** The square of a factor other than 0, in lowest terms, for any size. */
export function exactSquare(
  table: PrimeTable,
  lowered: LoweredCopy,
  m: number,
  c: number,
  power: BigPower = keptPowers(table),
): BigFraction {
  const { primes } = table;
  const { layout, normExponents, normCofactors } = lowered;
  const value = exactInteger(lowered, m, c);
  let y = value < 0n ? -value : value;
  let num = 1n;
  let den = 1n;
  for (let j = 0; j < primes.length; j++) {
    const p = power(j, 1);
    let e = layout.blocks[m]!.weights[c * primes.length + j]! - normExponents[m * primes.length + j]!;
    for (; e < 0 && y % p === 0n; e += 2) y /= p;
    if (e > 0) num *= power(j, e);
    if (e < 0) den *= power(j, -e);
  }
  const square = y * y;
  const common = gcd(square, normCofactors[m]!);
  return { num: num * (square / common), den: den * (normCofactors[m]! / common) };
}

/** The integer y of a factor. */
export function exactInteger({ layout, integers, big }: LoweredCopy, m: number, c: number): bigint {
  return big.get(m)?.[c] ?? BigInt(integers[layout.starts[m]! + c]!);
}
