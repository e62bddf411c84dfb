import { describe, expect, test } from "vitest";
import { InternalError } from "../../../src/errors.js";
import type { Block } from "../../../src/su3/engine/blocks.js";
import { emptyColumns, exactInteger, exactSquare, finisher } from "../../../src/su3/engine/finished.js";
import type { LoweredCopy } from "../../../src/su3/engine/lowering.js";
import { normalisationCheck } from "../../../src/su3/engine/normalisation.js";
import { checkCompleteness, type Solution, solveProduct } from "../../../src/su3/engine/solution.js";
import { decomposeProduct } from "../../../src/su3/product.js";

const PRIME = 2n ** 61n - 1n;

/** A solution and the rows of integers of every block. */
function solved(
  left: [number, number],
  right: [number, number],
): Solution & { rows: Map<Block, bigint[][]> } {
  const [a, b] = [left, right].map(([p, q]) => ({ p, q })) as [
    { p: number; q: number },
    { p: number; q: number },
  ];
  const solution = solveProduct(a, b, decomposeProduct(a, b));
  const rows = new Map<Block, bigint[][]>();
  for (const copy of solution.copies) {
    for (const [m, block] of copy.layout.blocks.entries()) {
      const row = Array.from({ length: block.size }, (_, c) => exactInteger(copy, m, c));
      rows.set(block, [...(rows.get(block) ?? []), row]);
    }
  }
  return { ...solution, rows };
}

function power(base: bigint, exponent: bigint): bigint {
  if (exponent === 0n) return 1n;
  const half = power(base, exponent / 2n);
  return (((half * half) % PRIME) * (exponent % 2n === 0n ? 1n : base)) % PRIME;
}

/** F of every channel of a block modulo the prime, from its exponents. */
function weightsModulo(block: Block, primes: readonly number[]): bigint[] {
  return Array.from({ length: block.size }, (_, c) =>
    primes.reduce((product, p, j) => {
      const e = block.weights[c * primes.length + j]!;
      return (product * power(power(BigInt(p), e < 0 ? PRIME - 2n : 1n), BigInt(Math.abs(e)))) % PRIME;
    }, 1n),
  );
}

describe("the integers of a solution", () => {
  test("are orthogonal between all copies in every block of (4,4) x (3,3), modulo 2^61 - 1", () => {
    const { product, rows } = solved([4, 4], [3, 3]);
    let pairs = 0;
    for (const [block, vectors] of rows) {
      const weights = weightsModulo(block, product.table.primes);
      const weighted = vectors.map((row) => row.map((y, c) => (y * weights[c]!) % PRIME));
      for (let i = 0; i < vectors.length; i++) {
        for (let j = 0; j < i; j++) {
          const overlap = vectors[i]!.reduce((sum, y, c) => sum + y * weighted[j]![c]!, 0n) % PRIME;
          expect(overlap, `3Y = ${block.threeY}, 2I = ${block.twoI}, rows ${i} and ${j}`).toBe(0n);
          pairs++;
        }
      }
    }
    expect(pairs).toBeGreaterThan(18_000);
  });

  test("have no common divisor in any multiplet", () => {
    for (const vectors of solved([4, 1], [2, 3]).rows.values()) {
      for (const row of vectors) expect(row.reduce(gcd, 0n)).toBe(1n);
    }
  });

  test("finish to the same fractions by the fast way and by BigInt, (5,2) x (2,6)", () => {
    const { product, copies } = solved([5, 2], [2, 6]);
    const finish = finisher(product);
    for (const copy of copies) {
      for (const [m, block] of copy.layout.blocks.entries()) {
        const columns = emptyColumns(block.size);
        finish(copy, m, columns, 0);
        for (let c = 0; c < block.size; c++) {
          const y = exactInteger(copy, m, c);
          expect(columns.sign[c]).toBe(y < 0n ? -1 : y > 0n ? 1 : 0);
          if (y === 0n) continue;
          const exact = exactSquare(product.table, copy, m, c);
          const fast = columns.big.get(c) ?? { num: BigInt(columns.num[c]!), den: BigInt(columns.den[c]!) };
          expect(fast).toEqual(exact);
          expect(gcd(exact.num, exact.den)).toBe(1n);
        }
      }
    }
  });
});

describe("the identities checked in every run", () => {
  test("notice a single wrong sign or scale", () => {
    const { product, copies } = solved([2, 1], [1, 1]);
    const check = normalisationCheck(product.table);
    const copy = copies.find(({ layout }) => layout.irrep.p === 2 && layout.irrep.q === 1)!;
    check(copy);
    const doubled = { ...copy, integers: copy.integers.map((y, i) => (i === 0 ? 2 * y : y)) };
    expect(() => check(doubled)).toThrow(InternalError);
    const scaled: LoweredCopy = {
      ...copy,
      normExponents: copy.normExponents.map((e, i) => (i === 0 ? e + 1 : e)),
    };
    expect(() => check(scaled)).toThrow(
      new InternalError(
        "normalisationCheck: the factors of (2,1) copy 1 at 3Y = -5, 2I = 1 are not normalised. " +
          "This is a bug in Couplet; please report it with the command you ran.",
      ),
    );
  });

  test("notice a missing irrep", () => {
    const [left, right] = [
      { p: 1, q: 1 },
      { p: 1, q: 1 },
    ];
    const solution = solveProduct(left, right, decomposeProduct(left, right));
    checkCompleteness(left, right, solution);
    expect(() => checkCompleteness(left, right, { ...solution, copies: solution.copies.slice(1) })).toThrow(
      new InternalError(
        "checkCompleteness: the irreps of (1,1) x (1,1) have 63 states together. " +
          "This is a bug in Couplet; please report it with the command you ran.",
      ),
    );
  });

  test("notice a wrong multiplicity", () => {
    const octet = { p: 1, q: 1 };
    expect(() => solveProduct(octet, octet, [{ irrep: octet, multiplicity: 3 }])).toThrow(
      new InternalError(
        "leadingMultiplet: (1,1) occurs 3 times but 2 extremal states were found. " +
          "This is a bug in Couplet; please report it with the command you ran.",
      ),
    );
  });
});

function gcd(a: bigint, b: bigint): bigint {
  return b === 0n ? (a < 0n ? -a : a) : gcd(b, a % b);
}
