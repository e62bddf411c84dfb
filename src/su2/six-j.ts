import { multiplyRoots, type SignedRoot, signedRoot, ZERO_ROOT } from "../exact/signed-root.js";
import { requireInteger } from "../require.js";

/**
 * SU(2) 6j symbol { j1 j2 j3; j4 j5 j6 }, exact. All spins are doubled; 0 where a triad violates the triangle rule.
 *
 * The triads are (1 2 3), (1 5 6), (4 2 6) and (4 5 3). Cost O(j) products of integers of O(j) digits.
 * Source: G. Racah, Phys. Rev. 62 (1942) 438 (provenance: memory; checked by orthogonality and the sum rules).
 * @throws InputError if a spin is negative or no integer
 * @example sixJ(1, 1, 2, 1, 1, 2) // { 1/2 1/2 1; 1/2 1/2 1 } = 1/6
 */
export function sixJ(
  twoJ1: number,
  twoJ2: number,
  twoJ3: number,
  twoJ4: number,
  twoJ5: number,
  twoJ6: number,
): SignedRoot {
  for (const [i, twoJ] of [twoJ1, twoJ2, twoJ3, twoJ4, twoJ5, twoJ6].entries()) {
    requireInteger(`sixJ: twoJ${i + 1}`, twoJ, 0, "Spins are given doubled.");
  }
  const triads = [
    [twoJ1, twoJ2, twoJ3],
    [twoJ1, twoJ5, twoJ6],
    [twoJ4, twoJ2, twoJ6],
    [twoJ4, twoJ5, twoJ3],
  ] as const;
  if (!triads.every(([a, b, c]) => isTriad(a, b, c))) return ZERO_ROOT;
  const lower = triads.map(([a, b, c]) => (a + b + c) / 2);
  const upper = [
    (twoJ1 + twoJ2 + twoJ4 + twoJ5) / 2,
    (twoJ2 + twoJ3 + twoJ5 + twoJ6) / 2,
    (twoJ3 + twoJ1 + twoJ6 + twoJ4) / 2,
  ];
  const last = Math.min(...upper);
  // All terms over the common denominator of the last one keep the sum in integers.
  let sum = 0n;
  const common = product([...lower.map((n) => last - n), ...upper.map((n) => n - Math.max(...lower))]);
  for (let t = Math.max(...lower); t <= last; t++) {
    const divisor = product([...lower.map((n) => t - n), ...upper.map((n) => n - t)]);
    const term = (factorial(t + 1) * common) / divisor;
    sum += t % 2 === 0 ? term : -term;
  }
  const deltas = triads.map(([a, b, c]) => triangle(a, b, c)).reduce(multiplyRoots);
  return multiplyRoots(deltas, signedRoot(sum, sum * sum, common * common));
}

/** Whether three doubled spins can couple to zero. */
export function isTriad(twoA: number, twoB: number, twoC: number): boolean {
  return (twoA + twoB + twoC) % 2 === 0 && twoC >= Math.abs(twoA - twoB) && twoC <= twoA + twoB;
}

/** sqrt((a+b-c)! (a-b+c)! (-a+b+c)! / (a+b+c+1)!) */
function triangle(twoA: number, twoB: number, twoC: number): SignedRoot {
  const num = product([(twoA + twoB - twoC) / 2, (twoA - twoB + twoC) / 2, (twoB + twoC - twoA) / 2]);
  return signedRoot(1, num, factorial((twoA + twoB + twoC) / 2 + 1));
}

/** The product of the factorials of some integers. */
function product(numbers: readonly number[]): bigint {
  return numbers.reduce((value, n) => value * factorial(n), 1n);
}

function factorial(n: number): bigint {
  let value = 1n;
  for (let i = 2; i <= n; i++) value *= BigInt(i);
  return value;
}
