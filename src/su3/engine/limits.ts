import { LimitError } from "../../errors.js";
import { type Irrep, irrepName, isospinMultiplets } from "../irrep.js";
import type { SeriesEntry } from "../product.js";
import type { ProductBlocks } from "./blocks.js";

/** A table of this many factors takes about half a minute and a gigabyte. */
const LARGEST_TABLE = 20_000_000;
const LARGEST_CHANNEL_LIST = 1_000_000;

/**
 * Refuses a product whose channels alone are too many to list.
 *
 * @throws LimitError above one million channels
 */
export function requireFeasibleChannels(left: Irrep, right: Irrep): void {
  const pairs = (left.p + 1) * (left.q + 1) * (right.p + 1) * (right.q + 1);
  const count = pairs > LARGEST_CHANNEL_LIST ? pairs : channelCount(left, right);
  if (count <= LARGEST_CHANNEL_LIST) return;
  throw new LimitError(
    `isoscalarTable: expected at most ${LARGEST_CHANNEL_LIST} channels, got ${count} or more in ` +
      `${irrepName(left)} x ${irrepName(right)}. Choose smaller irreps.`,
  );
}

/**
 * The number of factors of a table, zeros included; refuses one with too many.
 *
 * @throws LimitError above 20 million factors
 */
export function requireFeasibleTable(product: ProductBlocks, series: readonly SeriesEntry[]): number {
  let count = 0;
  for (const { irrep, multiplicity } of series) {
    for (const { threeY, twoI } of isospinMultiplets(irrep))
      count += multiplicity * product.at(threeY, twoI)!.size;
  }
  if (count <= LARGEST_TABLE) return count;
  const name = `${irrepName(product.left.irrep)} x ${irrepName(product.right.irrep)}`;
  throw new LimitError(
    `isoscalarTable: expected at most ${LARGEST_TABLE} factors, got ${count} in ${name}. ` +
      "Choose smaller irreps, or ask for one irrep with `into`.",
  );
}

/** The number of ways to couple an isospin multiplet of one irrep with one of the other. */
function channelCount(left: Irrep, right: Irrep): number {
  const rightMultiplets = isospinMultiplets(right);
  let count = 0;
  for (const { twoI } of isospinMultiplets(left)) {
    for (const other of rightMultiplets) count += Math.min(twoI, other.twoI) + 1;
  }
  return count;
}
