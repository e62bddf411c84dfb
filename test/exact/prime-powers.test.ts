import { describe, expect, test } from "vitest";
import { extractPrimes, primeTable } from "../../src/exact/prime-powers.js";

function productOf(primes: readonly number[], row: Int16Array): bigint {
  return primes.reduce((product, p, i) => product * BigInt(p) ** BigInt(row[i]!), 1n);
}

describe("prime exponents", () => {
  const table = primeTable(40);
  const width = table.primes.length;

  test("the primes up to 40 are the twelve known ones", () => {
    expect(table.primes).toEqual([2, 3, 5, 7, 11, 13, 17, 19, 23, 29, 31, 37]);
  });

  test("rows of integers and factorials multiply back to them", () => {
    let factorial = 1n;
    for (let n = 1; n <= 40; n++) {
      factorial *= BigInt(n);
      expect(productOf(table.primes, table.integers.subarray(n * width, (n + 1) * width))).toBe(BigInt(n));
      expect(productOf(table.primes, table.factorials.subarray(n * width, (n + 1) * width))).toBe(factorial);
    }
  });

  test("extraction returns the cofactor without small primes, for numbers and BigInt alike", () => {
    for (const cofactor of [1, 41, 43 * 47]) {
      const row = new Int16Array(width);
      expect(extractPrimes(360 * cofactor, table, row, 1)).toBe(cofactor);
      expect(extractPrimes(BigInt(360 * cofactor), table, row, -1)).toBe(BigInt(cofactor));
      expect(row.every((e) => e === 0)).toBe(true);
      extractPrimes(360, table, row, 2);
      expect([...row.subarray(0, 4)]).toEqual([6, 4, 2, 0]);
    }
  });
});
