import { extractPrimes, type PrimeTable } from "../../exact/prime-powers.js";
import { sameIrrep } from "../irrep.js";
import type { Block, ProductBlocks } from "./blocks.js";
import { lcm, primitive, reducedRows } from "./elimination.js";
import type { LeadingMultiplet } from "./leading.js";

/**
 * Name of the rule that tells the copies of an irrep apart.
 *
 * At the leading multiplet, in the order of the sign rule (largest I1, then I2 descending): where both factors are the
 * same irrep, copies symmetric under their exchange come first, then antisymmetric ones. Within each of these, copy 1 is
 * the projection of the first channel onto the space of copies, copy 2 that of the first channel on which copy 1 leaves
 * a remainder, within the complement, and so on.
 */
export const MULTIPLICITY_RULE = "exchange-then-first-channels-v1";

/** The leading multiplet of one copy: factors y sqrt(F/N), orthogonal to the other copies, first component positive. */
export interface LeadingCopy {
  readonly y: readonly bigint[];
  /** N as exponents of small primes and a cofactor without them. */
  readonly normExponents: Int16Array;
  readonly normCofactor: bigint;
}

/** The copies of an irrep by `MULTIPLICITY_RULE`, at the leading multiplet. */
export function leadingCopies(product: ProductBlocks, leading: LeadingMultiplet): LeadingCopy[] {
  const { block, row } = leading;
  const weights = integerWeights(block, product.table);
  const symmetryClasses = sameIrrep(product.left.irrep, product.right.irrep)
    ? exchangeClasses(product, leading)
    : [leading.basis];
  return symmetryClasses
    .flatMap((vectors) => orthogonalised(vectors, weights.values))
    .map((vector) => {
      const y =
        row.map((place) => vector[place]!).find((value) => value !== 0n)! < 0n
          ? vector.map((v) => -v)
          : vector;
      const normExponents = weights.base.slice();
      const normCofactor = extractPrimes(dot(y, y, weights.values), product.table, normExponents, 1);
      return { y, normExponents, normCofactor };
    });
}

/** The symmetric and the antisymmetric vectors, each reduced on the free places again. */
function exchangeClasses(product: ProductBlocks, { block, free, basis }: LeadingMultiplet): bigint[][][] {
  const exchanged = free.map((place) => {
    const swapped = product.place(block.right[place]!, block.left[place]!, block.twoI);
    return { place: swapped, sign: exchangeSign(product, block, place) };
  });
  const columns = free.map((_, i) => i);
  return [1n, -1n].map((symmetry) => {
    const coordinates = basis.map((vector) =>
      exchanged.map(({ place, sign }, i) => vector[free[i]!]! + symmetry * sign * vector[place]!),
    );
    const scale = basis.reduce((product, vector, i) => lcm(product, vector[free[i]!]!), 1n);
    const weights = basis.map((vector, i) => scale / vector[free[i]!]!);
    return reducedRows(coordinates, columns).rows.map((row) =>
      primitive(
        combination(
          basis,
          row.map((value, i) => value * weights[i]!),
        ),
      ),
    );
  });
}

/** (-1)^(I1+I2-I): exchange of the factors takes y(c1,c2) to this times y(c2,c1). */
function exchangeSign({ left, right }: ProductBlocks, block: Block, place: number): bigint {
  const al = (left.d[block.left[place]!]! + right.d[block.right[place]!]! - 2 - block.twoI) / 2;
  return al % 2 === 0 ? 1n : -1n;
}

function combination(basis: readonly bigint[][], coefficients: readonly bigint[]): bigint[] {
  return basis[0]!.map((_, place) =>
    coefficients.reduce((sum, value, i) => sum + value * basis[i]![place]!, 0n),
  );
}

/** Gram and Schmidt from the last vector to the first: each loses its part along those after it. */
function orthogonalised(vectors: readonly bigint[][], weights: readonly bigint[]): bigint[][] {
  const done: { vector: bigint[]; norm: bigint }[] = [];
  for (const start of [...vectors].reverse()) {
    let vector = start;
    for (const { vector: other, norm } of done) {
      const overlap = dot(vector, other, weights);
      if (overlap !== 0n) vector = primitive(vector.map((value, i) => value * norm - other[i]! * overlap));
    }
    done.push({ vector, norm: dot(vector, vector, weights) });
  }
  return done.map(({ vector }) => vector).reverse();
}

function dot(a: readonly bigint[], b: readonly bigint[], weights: readonly bigint[]): bigint {
  let sum = 0n;
  for (let i = 0; i < a.length; i++) if (a[i] !== 0n && b[i] !== 0n) sum += a[i]! * b[i]! * weights[i]!;
  return sum;
}

/** The F of a block as integers, times common powers of primes whose exponents are `base`. */
function integerWeights(block: Block, table: PrimeTable): { base: Int16Array; values: bigint[] } {
  const width = table.primes.length;
  const base = block.weights.slice(0, width);
  for (let i = 0; i < block.weights.length; i++) {
    base[i % width] = Math.min(base[i % width]!, block.weights[i]!);
  }
  const values = Array.from({ length: block.size }, (_, c) =>
    table.primes.reduce(
      (product, p, j) => product * BigInt(p) ** BigInt(block.weights[c * width + j]! - base[j]!),
      1n,
    ),
  );
  return { base, values };
}
