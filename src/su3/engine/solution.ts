import { requireIdentity } from "../../require.js";
import { type Irrep, irrepDimension } from "../irrep.js";
import type { SeriesEntry } from "../product.js";
import { type ProductBlocks, productBlocks } from "./blocks.js";
import { leadingCopies } from "./copies.js";
import { leadingMultiplet } from "./leading.js";
import { requireFeasibleChannels, requireFeasibleTable } from "./limits.js";
import { productLinks } from "./links.js";
import { irrepLayout, type LoweredCopy, loweredCopy } from "./lowering.js";
import { normalisationCheck } from "./normalisation.js";

/** The isoscalar factors of a product as integers: its blocks, and the copies of its irreps in the order of the series. */
export interface Solution {
  readonly product: ProductBlocks;
  readonly copies: readonly LoweredCopy[];
  /** The number of factors, zeros included. */
  readonly count: number;
}

/** Told how many factors are solved, and of how many. */
export type SolveProgress = (done: number, total: number) => void;

/**
 * Solves left ⊗ right for the irreps of `series`, all or some of those in the product.
 *
 * @param progress - told after each copy
 * @throws LimitError above one million channels or 20 million factors; InternalError if a leading space has the wrong
 * size, a multiplet is not normalised, or a step below the lowest multiplet does not vanish
 */
export function solveProduct(
  left: Irrep,
  right: Irrep,
  series: readonly SeriesEntry[],
  progress: SolveProgress = () => {},
): Solution {
  requireFeasibleChannels(left, right);
  const product = productBlocks(left, right);
  const count = requireFeasibleTable(product, series);
  const links = productLinks(product);
  const checkNormalisation = normalisationCheck(product.table);
  let done = 0;
  const copies = series.flatMap(({ irrep, multiplicity }) => {
    const layout = irrepLayout(product, irrep);
    const leading = leadingCopies(product, leadingMultiplet(product, irrep, multiplicity));
    return leading.map((first, index) => {
      const copy = loweredCopy(product, links, layout, first, index + 1);
      checkNormalisation(copy);
      done += layout.blocks.reduce((sum, { size }) => sum + size, 0);
      progress(done, count);
      return copy;
    });
  });
  return { product, copies, count };
}

/**
 * The check that a series is complete: dimensions add up, and every block has as many copies as channels.
 *
 * @throws InternalError if not
 */
export function checkCompleteness(left: Irrep, right: Irrep, { product, copies }: Solution): void {
  const total = copies.reduce((sum, { layout }) => sum + irrepDimension(layout.irrep), 0);
  requireIdentity("checkCompleteness", total === irrepDimension(left) * irrepDimension(right), () => {
    return `the irreps of (${left.p},${left.q}) x (${right.p},${right.q}) have ${total} states together`;
  });
  const rows = new Map(product.blocks.map((block) => [block, 0]));
  for (const { layout } of copies) for (const block of layout.blocks) rows.set(block, rows.get(block)! + 1);
  for (const [block, count] of rows) {
    requireIdentity("checkCompleteness", count === block.size, () => {
      return `3Y = ${block.threeY}, 2I = ${block.twoI} has ${block.size} channels but ${count} multiplets`;
    });
  }
}
