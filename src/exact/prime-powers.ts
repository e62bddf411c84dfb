/**
 * Integers as exponents of the primes up to a limit: products and quotients of factorials without large numbers.
 *
 * A row of `primes.length` exponents stands for the product of primes[i] ** row[i]; rows lie one after another in flat
 * arrays, row n starting at n · primes.length.
 */
export interface PrimeTable {
  readonly primes: readonly number[];
  /** Exponents of the integers 0..limit; the rows of 0 and 1 are zero. */
  readonly integers: Int16Array;
  /** Exponents of 0!, 1!, ... limit!. */
  readonly factorials: Int16Array;
}

/** The table of prime exponents of the integers and factorials up to `limit`. Cost O(limit · number of primes). */
export function primeTable(limit: number): PrimeTable {
  const primes: number[] = [];
  for (let n = 2; n <= limit; n++) if (primes.every((p) => n % p !== 0)) primes.push(n);
  const width = primes.length;
  const integers = new Int16Array((limit + 1) * width);
  const factorials = new Int16Array((limit + 1) * width);
  for (let n = 2; n <= limit; n++) {
    let rest = n;
    for (let i = 0; i < width; i++) {
      for (; rest % primes[i]! === 0; rest /= primes[i]!) integers[n * width + i]! += 1;
      factorials[n * width + i] = factorials[(n - 1) * width + i]! + integers[n * width + i]!;
    }
  }
  return { primes, integers, factorials };
}

/**
 * Splits an integer n > 0 into small primes, added `weight` times to `exponents`, and the cofactor that is returned.
 *
 * An integer below 2^53 may be given, and is returned, as a number.
 */
export function extractPrimes<N extends number | bigint>(
  n: N,
  table: PrimeTable,
  exponents: Int16Array,
  weight: number,
): N {
  return (
    typeof n === "number"
      ? extractFromNumber(n, table.primes, exponents, weight)
      : extractFromBig(n, table.primes, exponents, weight)
  ) as N;
}

function extractFromNumber(
  n: number,
  primes: readonly number[],
  exponents: Int16Array,
  weight: number,
): number {
  let rest = n;
  for (let i = 0; i < primes.length && rest !== 1; i++) {
    const p = primes[i]!;
    for (; rest % p === 0; rest /= p) exponents[i]! += weight;
  }
  return rest;
}

function extractFromBig(n: bigint, primes: readonly number[], exponents: Int16Array, weight: number): bigint {
  let rest = n;
  for (let i = 0; i < primes.length && rest !== 1n; i++) {
    const p = BigInt(primes[i]!);
    for (; rest % p === 0n; rest /= p) exponents[i]! += weight;
  }
  return rest;
}
