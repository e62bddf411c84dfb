import type { PrimeTable } from "../../exact/prime-powers.js";
import { requireIdentity } from "../../require.js";
import type { Block } from "./blocks.js";
import type { LoweredCopy } from "./lowering.js";

/** The largest prime below 2^26: products of two residues are exact as numbers. */
const MODULUS = 67_108_859;

/**
 * The check that the squares of every multiplet add up to one, sum y^2 F = N, modulo a prime of 26 bits.
 *
 * It costs a few per cent of the recursion and misses a wrong scale or sign once in 67 million.
 * @returns a function that checks one copy and throws InternalError where the identity fails
 */
export function normalisationCheck(table: PrimeTable): (lowered: LoweredCopy) => void {
  const powers = residuesOfPowers(table);
  const weights = new Map<Block, Float64Array>();
  const weightsOf = (block: Block) => {
    let found = weights.get(block);
    if (found === undefined) {
      found = Float64Array.from({ length: block.size }, (_, c) => powers(block.weights, c));
      weights.set(block, found);
    }
    return found;
  };
  return (lowered) => {
    const { layout, integers, big, normExponents, normCofactors } = lowered;
    for (const [m, block] of layout.blocks.entries()) {
      const vector =
        big.get(m)?.map(residueOfBig) ?? integers.subarray(layout.starts[m]!, layout.starts[m + 1]!);
      const norm = times(powers(normExponents, m), residueOfBig(normCofactors[m]!));
      requireIdentity("normalisationCheck", sumOfSquares(vector, weightsOf(block)) === norm, () => {
        const { p, q } = layout.irrep;
        return `the factors of (${p},${q}) copy ${lowered.copy} at 3Y = ${block.threeY}, 2I = ${block.twoI} are not normalised`;
      });
    }
  };
}

function sumOfSquares(vector: ArrayLike<number>, weights: Float64Array): number {
  let sum = 0;
  for (let c = 0; c < weights.length; c++) {
    const value = vector[c]!;
    if (value === 0) continue;
    const y = value - Math.floor(value / MODULUS) * MODULUS;
    const square = y * y - Math.floor((y * y) / MODULUS) * MODULUS;
    const term = square * weights[c]!;
    sum += term - Math.floor(term / MODULUS) * MODULUS;
  }
  return sum % MODULUS;
}

/** The residue of the product of primes with the exponents of one row. */
function residuesOfPowers({ primes }: PrimeTable): (rows: Int16Array, row: number) => number {
  const inverses = primes.map((p) => power(p, MODULUS - 2));
  return (rows, row) => {
    let product = 1;
    for (const [j, p] of primes.entries()) {
      const e = rows[row * primes.length + j]!;
      if (e !== 0) product = times(product, e > 0 ? power(p, e) : power(inverses[j]!, -e));
    }
    return product;
  };
}

function power(base: number, exponent: number): number {
  let result = 1;
  let square = base;
  for (let e = exponent; e > 0; e = Math.floor(e / 2)) {
    if (e % 2 === 1) result = times(result, square);
    square = times(square, square);
  }
  return result;
}

function times(a: number, b: number): number {
  return (a * b) % MODULUS;
}

function residueOfBig(n: bigint): number {
  const rest = Number(n % BigInt(MODULUS));
  return rest < 0 ? rest + MODULUS : rest;
}
