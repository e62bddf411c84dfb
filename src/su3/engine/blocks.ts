import { type PrimeTable, primeTable } from "../../exact/prime-powers.js";
import type { Irrep } from "../irrep.js";
import { irrepPatterns, type Patterns, patternScales } from "./patterns.js";

/**
 * The channels of a product that couple to one (Y,I), in printed order: Y1 descending, then I1, then I2.
 *
 * A factor of the channel is y · sqrt(F/N), with y the integers of the recursion, F here and N with the copy:
 *
 *     F = n1(k1,l1) n2(k2,l2) al! / (be! ga! si!)
 *     al = I1+I2-I   be = I1-I2+I   ga = -I1+I2+I   si = I1+I2+I+1
 */
export interface Block {
  readonly threeY: number;
  readonly twoI: number;
  readonly size: number;
  /** The pattern numbers of the two multiplets of each channel. */
  readonly left: Int32Array;
  readonly right: Int32Array;
  /** Rows of exponents of F, one a channel. */
  readonly weights: Int16Array;
}

/** The blocks of a product, and the way from a pair of patterns to its place in a block. */
export interface ProductBlocks {
  readonly left: Patterns;
  readonly right: Patterns;
  readonly table: PrimeTable;
  readonly blocks: readonly Block[];
  /** The number of channels of the largest block. */
  readonly largestBlock: number;
  /** The block of (3Y, 2I), or undefined where the product has no such states. */
  at(threeY: number, twoI: number): Block | undefined;
  /** The place in its block of the channel (left pattern, right pattern) coupled to 2I; -1 where it does not exist. */
  place(left: number, right: number, twoI: number): number;
}

/** A block while its channels are being counted and filled in. */
interface Draft {
  readonly threeY: number;
  readonly twoI: number;
  readonly left: number[];
  readonly right: number[];
}

/** The blocks of left ⊗ right, by falling Y, then falling I. Cost: one step and one row of exponents a channel. */
export function productBlocks(leftIrrep: Irrep, rightIrrep: Irrep): ProductBlocks {
  const table = primeTable(leftIrrep.p + leftIrrep.q + rightIrrep.p + rightIrrep.q + 2);
  const left = irrepPatterns(leftIrrep);
  const right = irrepPatterns(rightIrrep);
  const drafts = new Map<number, Draft>();
  const firstPlace = new Int32Array(left.count * right.count + 1);
  const key = blockKey(left, right);
  for (let pair = 0; pair < left.count * right.count; pair++) {
    const a = Math.floor(pair / right.count);
    const b = pair % right.count;
    firstPlace[pair + 1] = firstPlace[pair]! + Math.min(left.d[a]!, right.d[b]!);
  }
  const places = new Int32Array(firstPlace[left.count * right.count]!);
  for (const a of left.printed) {
    for (const b of right.printed) {
      const lowest = Math.abs(left.d[a]! - right.d[b]!);
      for (let i = 0; i < Math.min(left.d[a]!, right.d[b]!); i++) {
        const draft = draftAt(drafts, key, left.threeY[a]! + right.threeY[b]!, lowest + 2 * i);
        places[firstPlace[a * right.count + b]! + i] = draft.left.length;
        draft.left.push(a);
        draft.right.push(b);
      }
    }
  }
  const writeWeights = weightWriter(left, right, table);
  const byKey = new Map<number, Block>();
  for (const [number, draft] of drafts) byKey.set(number, finishedBlock(draft, writeWeights));
  const blocks = [...byKey.values()].sort((a, b) => b.threeY - a.threeY || b.twoI - a.twoI);
  return {
    left,
    right,
    table,
    blocks,
    largestBlock: blocks.reduce((largest, block) => Math.max(largest, block.size), 0),
    at: (threeY, twoI) => (twoI < 0 ? undefined : byKey.get(key(threeY, twoI))),
    place: (a, b, twoI) => {
      if (a < 0 || b < 0) return -1;
      const i = (twoI - Math.abs(left.d[a]! - right.d[b]!)) / 2;
      return i < 0 || i >= Math.min(left.d[a]!, right.d[b]!)
        ? -1
        : places[firstPlace[a * right.count + b]! + i]!;
    },
  };
}

/** One number for (3Y, 2I): 2I stays below the stride in every product of these factors. */
function blockKey(left: Patterns, right: Patterns): (threeY: number, twoI: number) => number {
  const stride = left.irrep.p + left.irrep.q + right.irrep.p + right.irrep.q + 2;
  return (threeY, twoI) => threeY * stride + twoI;
}

function draftAt(
  drafts: Map<number, Draft>,
  key: (threeY: number, twoI: number) => number,
  threeY: number,
  twoI: number,
): Draft {
  const number = key(threeY, twoI);
  let draft = drafts.get(number);
  if (draft === undefined) {
    draft = { threeY, twoI, left: [], right: [] };
    drafts.set(number, draft);
  }
  return draft;
}

function finishedBlock(draft: Draft, writeWeights: WeightWriter): Block {
  const left = Int32Array.from(draft.left);
  const right = Int32Array.from(draft.right);
  const weights = writeWeights(left, right, draft.twoI);
  return { threeY: draft.threeY, twoI: draft.twoI, size: left.length, left, right, weights };
}

type WeightWriter = (lefts: Int32Array, rights: Int32Array, twoI: number) => Int16Array;

function weightWriter(left: Patterns, right: Patterns, table: PrimeTable): WeightWriter {
  const width = table.primes.length;
  const { factorials } = table;
  const leftScales = patternScales(left, table);
  const rightScales = patternScales(right, table);
  return (lefts, rights, twoI) => {
    const weights = new Int16Array(lefts.length * width);
    for (let c = 0; c < lefts.length; c++) {
      const a = lefts[c]!;
      const b = rights[c]!;
      const twoI1 = left.d[a]! - 1;
      const twoI2 = right.d[b]! - 1;
      const al = (twoI1 + twoI2 - twoI) / 2;
      const be = (twoI1 - twoI2 + twoI) / 2;
      const ga = (twoI2 - twoI1 + twoI) / 2;
      const si = (twoI1 + twoI2 + twoI) / 2 + 1;
      for (let j = 0; j < width; j++) {
        weights[c * width + j] =
          leftScales[a * width + j]! +
          rightScales[b * width + j]! +
          factorials[al * width + j]! -
          factorials[be * width + j]! -
          factorials[ga * width + j]! -
          factorials[si * width + j]!;
      }
    }
    return weights;
  };
}
