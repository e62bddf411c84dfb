import { extractPrimes } from "../../exact/prime-powers.js";
import { requireIdentity } from "../../require.js";
import type { Irrep } from "../irrep.js";
import type { Block, ProductBlocks } from "./blocks.js";
import type { LeadingCopy } from "./copies.js";
import type { Link, Links, Step } from "./links.js";
import { irrepPatterns, type Patterns, patternNumber, raiseKFactors, raiseLFactors } from "./patterns.js";
import { largestOf, type Rescaling, stepBig, stepNumbers } from "./steps.js";

/** Where the multiplets of an irrep lie in a copy's vector of integers, by pattern number. */
export interface IrrepLayout {
  readonly irrep: Irrep;
  readonly patterns: Patterns;
  readonly blocks: readonly Block[];
  /** The first place of each multiplet; its block's channels follow, then one 0. Length: patterns + 1. */
  readonly starts: Int32Array;
}

/**
 * All isoscalar factors of one copy as integers: factor = y sqrt(F/N), F by channel in the blocks, N by multiplet.
 *
 * Every multiplet's integers have no common divisor. Where one passes 2^53 the whole multiplet stands in `big`.
 */
export interface LoweredCopy {
  readonly layout: IrrepLayout;
  readonly copy: number;
  readonly integers: Float64Array;
  readonly big: ReadonlyMap<number, readonly bigint[]>;
  /** Rows of exponents of N, one a multiplet, and the cofactor of N without small primes. */
  readonly normExponents: Int16Array;
  readonly normCofactors: readonly bigint[];
}

/** The layout of an irrep in a product. */
export function irrepLayout(product: ProductBlocks, irrep: Irrep): IrrepLayout {
  const patterns = irrepPatterns(irrep);
  const blocks = Array.from(patterns.d, (d, m) => product.at(patterns.threeY[m]!, d - 1)!);
  const starts = new Int32Array(blocks.length + 1);
  for (const [m, block] of blocks.entries()) starts[m + 1] = starts[m]! + block.size + 1;
  return { irrep, patterns, blocks, starts };
}

/**
 * A copy lowered from its leading multiplet to all others: T-steps up in L at K = P + Q, then W-steps down in K.
 *
 * Below K = Q one more W-step must give zero, and along K = Q a T-step must give the multiplet that came down; both are
 * checked.
 */
export function loweredCopy(
  product: ProductBlocks,
  links: Links,
  layout: IrrepLayout,
  leading: LeadingCopy,
  copy: number,
): LoweredCopy {
  const { irrep, patterns } = layout;
  const descent = new Descent(product, links, layout);
  const top = irrep.p + irrep.q;
  descent.begin(patternNumber(patterns, top, 0), leading);
  for (let l = 0; l <= irrep.q; l++) {
    const head = patternNumber(patterns, top, l);
    if (l > 0) descent.step("T", patternNumber(patterns, top, l - 1), head, raiseLFactors(irrep, l - 1));
    for (let k = top - 1; k >= irrep.q; k--) {
      descent.step(
        "W",
        patternNumber(patterns, k + 1, l),
        patternNumber(patterns, k, l),
        raiseKFactors(irrep, k),
      );
    }
    const lowest = patternNumber(patterns, irrep.q, l);
    descent.checkClosure(lowest);
    if (l > 0) descent.checkPath(patternNumber(patterns, irrep.q, l - 1), lowest);
  }
  return { layout, copy, ...descent.result };
}

function sameIntegers(a: ArrayLike<number | bigint>, b: ArrayLike<number | bigint>): boolean {
  if (a.length !== b.length) return false;
  for (let i = 0; i < a.length; i++) if (a[i] !== b[i] && BigInt(a[i]!) !== BigInt(b[i]!)) return false;
  return true;
}

/** The vectors of one copy while they are being filled in. */
class Descent {
  readonly #product: ProductBlocks;
  readonly #links: Links;
  readonly #layout: IrrepLayout;
  readonly #integers: Float64Array;
  readonly #big = new Map<number, readonly bigint[]>();
  readonly #largest: Float64Array;
  readonly #normExponents: Int16Array;
  readonly #normCofactors: bigint[];
  readonly #rests: Int32Array;

  constructor(product: ProductBlocks, links: Links, layout: IrrepLayout) {
    this.#product = product;
    this.#links = links;
    this.#layout = layout;
    const count = layout.blocks.length;
    this.#integers = new Float64Array(layout.starts[count]!);
    this.#largest = new Float64Array(count);
    this.#normExponents = new Int16Array(count * product.table.primes.length);
    this.#normCofactors = new Array<bigint>(count).fill(1n);
    this.#rests = new Int32Array(product.largestBlock);
  }

  get result() {
    return {
      integers: this.#integers,
      big: this.#big as ReadonlyMap<number, readonly bigint[]>,
      normExponents: this.#normExponents,
      normCofactors: this.#normCofactors as readonly bigint[],
    };
  }

  begin(m: number, leading: LeadingCopy): void {
    this.#store(m, [...leading.y, 0n]);
    this.#norm(m).set(leading.normExponents);
    this.#normCofactors[m] = leading.normCofactor;
  }

  /** One step between multiplets; the factors are those of the squared reduced element of the product irrep. */
  step(step: Step, from: number, to: number, factors: readonly number[]): void {
    const link = this.#links.from(this.#layout.blocks[from]!, step)!;
    const { multiplier, divisor, big } = this.#advanced(link, from, this.#numbers(to));
    if (big !== undefined) this.#store(to, big);
    else this.#largest[to] = largestOf(this.#numbers(to));
    const norm = this.#norm(to);
    norm.set(this.#norm(from));
    const { table } = this.#product;
    for (const factor of factors) extractPrimes(factor, table, norm, 1);
    extractPrimes(multiplier, table, norm, 2);
    const large = BigInt(extractPrimes(divisor, table, norm, -2));
    this.#normCofactors[to] =
      large === 1n ? this.#normCofactors[from]! : this.#normCofactors[from]! / (large * large);
  }

  checkClosure(from: number): void {
    const link = this.#links.from(this.#layout.blocks[from]!, "W");
    if (link === undefined) return;
    const numbers = new Float64Array(link.target.size);
    const { big } = this.#advanced(link, from, numbers);
    const vanishes = big === undefined ? largestOf(numbers) === 0 : big.every((value) => value === 0n);
    const { irrep } = this.#layout;
    requireIdentity("loweredCopy", vanishes, () => {
      return `a step below the lowest multiplet of (${irrep.p},${irrep.q}) does not vanish`;
    });
  }

  /** Checks that a T-step gives the multiplet that was reached by the other path. */
  checkPath(from: number, to: number): void {
    const link = this.#links.from(this.#layout.blocks[from]!, "T")!;
    const numbers = new Float64Array(link.target.size + 1);
    const { big } = this.#advanced(link, from, numbers);
    const known = this.#big.get(to) ?? this.#numbers(to);
    // Both are primitive vectors, each in numbers as soon as these hold it.
    const same = sameIntegers(big ?? numbers, known);
    const { irrep } = this.#layout;
    requireIdentity("loweredCopy", same, () => {
      return `two paths to the multiplet ${to} of (${irrep.p},${irrep.q}) give different factors`;
    });
  }

  /** The step in numbers, written to `target`, or in BigInt where numbers do not hold it. */
  #advanced(
    link: Link,
    from: number,
    target: Float64Array,
  ): Rescaling & { readonly big?: readonly bigint[] } {
    const known = this.#big.get(from);
    if (known === undefined) {
      const rescaling = stepNumbers(link, this.#numbers(from), this.#largest[from]!, target, this.#rests);
      if (rescaling !== undefined) return rescaling;
    }
    return stepBig(link, known ?? Array.from(this.#numbers(from), BigInt));
  }

  /** Keeps a vector of BigInt, as numbers if they hold it. */
  #store(m: number, vector: readonly bigint[]): void {
    let largest = 0n;
    for (const value of vector) {
      const size = value < 0n ? -value : value;
      if (size > largest) largest = size;
    }
    this.#largest[m] = Number(largest);
    if (largest > Number.MAX_SAFE_INTEGER) {
      this.#big.set(m, vector);
      this.#numbers(m).fill(0);
    } else this.#numbers(m).set(vector.map(Number));
  }

  /** The slots of a multiplet, the last of them the 0 for absent sources. */
  #numbers(m: number): Float64Array {
    return this.#integers.subarray(this.#layout.starts[m]!, this.#layout.starts[m + 1]!);
  }

  #norm(m: number): Int16Array {
    const width = this.#product.table.primes.length;
    return this.#normExponents.subarray(m * width, (m + 1) * width);
  }
}
