import { gcdOfNumbers } from "../../exact/integer.js";
import type { Block, ProductBlocks } from "./blocks.js";
import { patternNumber, raiseK, raiseL } from "./patterns.js";

/**
 * One step of the recursion, from a block to the one with I - 1/2 and Y + 1 (T) or Y - 1 (W): each target channel is
 * the sum of at most four source channels times integers, over an integer divisor. It belongs to the pair of blocks
 * and serves every irrep and copy. An absent source has the place `source.size` and the coefficient 0.
 */
export interface Link {
  readonly target: Block;
  /** Four places a target channel. */
  readonly sources: Int32Array;
  readonly coefficients: Float64Array;
  readonly divisors: Int32Array;
  /** The largest sum of absolute coefficients: a bound on growth before division. */
  readonly growth: number;
}

export type Step = "T" | "W";

/** The links of a product, each made when first asked for. */
export interface Links {
  /** The step from a block; undefined where the product has no states beyond it. */
  from(source: Block, step: Step): Link | undefined;
}

/** The links of a product. */
export function productLinks(product: ProductBlocks): Links {
  const made = { T: new Map<Block, Link>(), W: new Map<Block, Link>() };
  return {
    from: (source, step) => {
      const target = product.at(source.threeY + (step === "T" ? 3 : -3), source.twoI - 1);
      if (target === undefined) return undefined;
      let link = made[step].get(source);
      if (link === undefined) {
        link = makeLink(product, source, target, step);
        made[step].set(source, link);
      }
      return link;
    },
  };
}

function makeLink(product: ProductBlocks, source: Block, target: Block, step: Step): Link {
  const sources = new Int32Array(4 * target.size);
  const coefficients = new Float64Array(4 * target.size);
  const divisors = new Int32Array(target.size);
  const terms = step === "T" ? raisingTerms : loweringTerms;
  let growth = 0;
  for (let c = 0; c < target.size; c++) {
    const a = target.left[c]!;
    const b = target.right[c]!;
    let common = product.left.d[a]! * product.right.d[b]!;
    divisors[c] = common;
    for (const [i, [a2, b2, coefficient]] of terms(product, a, b).entries()) {
      const place = product.place(a2, b2, source.twoI);
      sources[4 * c + i] = place < 0 ? source.size : place;
      if (place < 0) continue;
      coefficients[4 * c + i] = coefficient;
      common = gcdOfNumbers(common, Math.abs(coefficient));
    }
    divisors[c]! /= common;
    let sum = 0;
    for (let i = 4 * c; i < 4 * c + 4; i++) {
      coefficients[i]! /= common;
      sum += Math.abs(coefficients[i]!);
    }
    growth = Math.max(growth, sum);
  }
  return { target, sources, coefficients, divisors, growth };
}

type Term = [left: number, right: number, coefficient: number];

/** d1 d2 y' = d2 [a1(k1-1) y(k1-1) + b1(l1-1) y(l1-1)] + d1 [-a2(k2-1) y(k2-1) + b2(l2-1) y(l2-1)] */
function raisingTerms({ left, right }: ProductBlocks, a: number, b: number): Term[] {
  const k1 = left.k[a]!;
  const l1 = left.l[a]!;
  const k2 = right.k[b]!;
  const l2 = right.l[b]!;
  const d1 = left.d[a]!;
  const d2 = right.d[b]!;
  return [
    [patternNumber(left, k1 - 1, l1), b, d2 * raiseK(left.irrep, k1 - 1)],
    [patternNumber(left, k1, l1 - 1), b, d2 * raiseL(left.irrep, l1 - 1)],
    [a, patternNumber(right, k2 - 1, l2), -d1 * raiseK(right.irrep, k2 - 1)],
    [a, patternNumber(right, k2, l2 - 1), d1 * raiseL(right.irrep, l2 - 1)],
  ];
}

/** d1 d2 y' = d2 [y(k1+1) - y(l1+1)] + d1 [y(k2+1) + y(l2+1)] */
function loweringTerms({ left, right }: ProductBlocks, a: number, b: number): Term[] {
  const k1 = left.k[a]!;
  const l1 = left.l[a]!;
  const k2 = right.k[b]!;
  const l2 = right.l[b]!;
  const d1 = left.d[a]!;
  const d2 = right.d[b]!;
  return [
    [patternNumber(left, k1 + 1, l1), b, d2],
    [patternNumber(left, k1, l1 + 1), b, -d2],
    [a, patternNumber(right, k2 + 1, l2), d1],
    [a, patternNumber(right, k2, l2 + 1), d1],
  ];
}
