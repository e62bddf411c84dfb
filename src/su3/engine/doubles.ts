import {
  type DoubleDouble,
  multiplyDoubleDouble,
  productError,
  rootAsDoubleDouble,
} from "../../exact/double-double.js";
import type { PrimeTable } from "../../exact/prime-powers.js";
import { roundedSquareRoot } from "../../exact/rounding.js";
import type { Block } from "./blocks.js";
import { exactInteger, exactSquare } from "./finished.js";
import type { LoweredCopy } from "./lowering.js";

/** Writes the correctly rounded float64 of the factors of multiplet `m` to `values` from `start` on. */
export type DoubleRounder = (lowered: LoweredCopy, m: number, values: Float64Array, start: number) => void;

/** Relative: far above the error of the products below, far below half a unit in the last place. */
const DOUBT = 2 ** -90;

/** Outside this range splitting a number may overflow or lose digits. */
const SMALLEST_TRUSTED = 2 ** -400;
const LARGEST_TRUSTED = 2 ** 400;

/**
 * The rounder for the products of one prime table: y · sqrt(F) · 1/sqrt(N) in pairs of float64, and with integers
 * wherever that pair lies too near the middle of two float64 to tell which is nearer.
 */
export function doubleRounder(table: PrimeTable): DoubleRounder {
  const rootOfRow = rowRoots(table);
  const rootsOfBlock = blockRoots(rootOfRow);
  return (lowered, m, values, start) => {
    const block = lowered.layout.blocks[m]!;
    const roots = rootsOfBlock(block);
    const inverseCofactor = rootAsDoubleDouble(1n, lowered.normCofactors[m]!);
    const [normHi, normLo] = multiplyDoubleDouble(rootOfRow(lowered.normExponents, m, -1), inverseCofactor);
    const first = lowered.layout.starts[m]!;
    const bigVector = lowered.big.get(m);
    for (let c = 0; c < block.size; c++) {
      const y = lowered.integers[first + c]!;
      if (bigVector === undefined && y === 0) continue;
      const rootHi = roots[2 * c]!;
      const ratio = rootHi * normHi;
      const ratioRest = productError(rootHi, normHi) + (rootHi * normLo + roots[2 * c + 1]! * normHi);
      const product = y * ratio;
      const rest = productError(y, ratio) + y * ratioRest;
      const hi = product + rest;
      const lo = rest - (hi - product);
      const doubt = hi * DOUBT;
      const settled = hi + (lo + doubt) === hi && hi + (lo - doubt) === hi;
      const trusted = isTrusted(rootHi) && isTrusted(normHi) && isTrusted(ratio);
      values[start + c] =
        bigVector === undefined && settled && trusted ? hi : exactDouble(table, lowered, m, c);
    }
  };
}

function isTrusted(x: number): boolean {
  return x > SMALLEST_TRUSTED && x < LARGEST_TRUSTED;
}

function exactDouble(table: PrimeTable, lowered: LoweredCopy, m: number, c: number): number {
  const y = exactInteger(lowered, m, c);
  if (y === 0n) return 0;
  const { num, den } = exactSquare(table, lowered, m, c);
  return (y < 0n ? -1 : 1) * roundedSquareRoot(num, den);
}

/** The square roots of F of a block as pairs hi, lo, one after another; made once a block. */
function blockRoots(rootOfRow: RowRoot): (block: Block) => Float64Array {
  const made = new Map<Block, Float64Array>();
  return (block) => {
    let roots = made.get(block);
    if (roots === undefined) {
      roots = new Float64Array(2 * block.size);
      for (let c = 0; c < block.size; c++) roots.set(rootOfRow(block.weights, c, 1), 2 * c);
      made.set(block, roots);
    }
    return roots;
  };
}

type RowRoot = (rows: Int16Array, row: number, direction: 1 | -1) => DoubleDouble;

/** The square root of the product of primes with the exponents of a row, or its inverse, from powers kept by prime. */
function rowRoots({ primes }: PrimeTable): RowRoot {
  const one: DoubleDouble = [1, 0];
  const up = primes.map((p) => [one, rootAsDoubleDouble(BigInt(p), 1n)]);
  const down = primes.map((p) => [one, rootAsDoubleDouble(1n, BigInt(p))]);
  const power = (ladder: DoubleDouble[], exponent: number) => {
    for (let e = ladder.length; e <= exponent; e++)
      ladder.push(multiplyDoubleDouble(ladder[e - 1]!, ladder[1]!));
    return ladder[exponent]!;
  };
  return (rows, row, direction) => {
    let product = one;
    for (let j = 0; j < primes.length; j++) {
      const e = direction * rows[row * primes.length + j]!;
      if (e !== 0) product = multiplyDoubleDouble(product, power(e > 0 ? up[j]! : down[j]!, Math.abs(e)));
    }
    return product;
  };
}
