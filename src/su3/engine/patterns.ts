import type { PrimeTable } from "../../exact/prime-powers.js";
import type { Irrep } from "../irrep.js";

/**
 * The isospin multiplets of one irrep for the engine, as patterns (k,l), k = q..p+q, l = 0..q, with what the generators
 * need at each of them: 2I = k - l, 3Y = 3(k + l) - 2(p + 2q).
 *
 * Pattern (k,l) has the number (k - q)(q + 1) + l. In phases with all V+ >= 0, the raising doublet T = (V+, U+) and the
 * lowering doublet W = (-U-, V-) have the reduced elements, with d = 2I + 1 at (k,l),
 *
 *     <k+1,l||T||k,l> = sqrt(a(k)/(d+1))    <k,l+1||T||k,l> = -sqrt(b(l)/(d-1))
 *
 * Source: L.C. Biedenharn, Phys. Lett. 3 (1962) 69, G.E. Baird and L.C. Biedenharn, J. Math. Phys. 4 (1963) 1449, times
 * (-1)^l (provenance: memory; checked with generator matrices).
 */
export interface Patterns {
  readonly irrep: Irrep;
  readonly count: number;
  /** k, l, 2I + 1 and 3Y of each pattern. */
  readonly k: Int32Array;
  readonly l: Int32Array;
  readonly d: Int32Array;
  readonly threeY: Int32Array;
  /** The patterns in printed order: Y descending, then I descending. */
  readonly printed: readonly number[];
}

/** The number of pattern (k,l), or -1 where there is none. */
export function patternNumber({ irrep: { p, q } }: Patterns, k: number, l: number): number {
  return k < q || k > p + q || l < 0 || l > q ? -1 : (k - q) * (q + 1) + l;
}

/** The factors of a(k) = (p+q-k)(k+1-q)(k+2), the square behind a step of k to k + 1. */
export function raiseKFactors({ p, q }: Irrep, k: number): [number, number, number] {
  return [p + q - k, k + 1 - q, k + 2];
}

/** The factors of b(l) = (p+q+1-l)(q-l)(l+1), the square behind a step of l to l + 1. */
export function raiseLFactors({ p, q }: Irrep, l: number): [number, number, number] {
  return [p + q + 1 - l, q - l, l + 1];
}

/** a(k); 0 at the upper end. */
export function raiseK(irrep: Irrep, k: number): number {
  const [x, y, z] = raiseKFactors(irrep, k);
  return x * y * z;
}

/** b(l); 0 at the upper end. */
export function raiseL(irrep: Irrep, l: number): number {
  const [x, y, z] = raiseLFactors(irrep, l);
  return x * y * z;
}

/** The patterns of an irrep. */
export function irrepPatterns(irrep: Irrep): Patterns {
  const { p, q } = irrep;
  const count = (p + 1) * (q + 1);
  const k = Int32Array.from({ length: count }, (_, i) => q + Math.floor(i / (q + 1)));
  const l = Int32Array.from({ length: count }, (_, i) => i % (q + 1));
  const d = k.map((value, i) => value - l[i]! + 1);
  const threeY = k.map((value, i) => 3 * (value + l[i]!) - 2 * (p + 2 * q));
  const printed = Array.from(k.keys()).sort((a, b) => threeY[b]! - threeY[a]! || d[b]! - d[a]!);
  return { irrep, count, k, l, d, threeY, printed };
}

/**
 * Rows of exponents, one a pattern, of the squared scale that makes every coefficient of the recursion an integer:
 * n(k,l) = (p+q-k)! (p+q+1-l)! (q-l)! d / ((k-q)! (k+1)! l!). The table must reach p + q + 2.
 */
export function patternScales({ irrep: { p, q }, count, k, l, d }: Patterns, table: PrimeTable): Int16Array {
  const width = table.primes.length;
  const { factorials, integers } = table;
  const scales = new Int16Array(count * width);
  for (let i = 0; i < count; i++) {
    for (let j = 0; j < width; j++) {
      scales[i * width + j] =
        factorials[(p + q - k[i]!) * width + j]! +
        factorials[(p + q + 1 - l[i]!) * width + j]! +
        factorials[(q - l[i]!) * width + j]! +
        integers[d[i]! * width + j]! -
        factorials[(k[i]! - q) * width + j]! -
        factorials[(k[i]! + 1) * width + j]! -
        factorials[l[i]! * width + j]!;
    }
  }
  return scales;
}
