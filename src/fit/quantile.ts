import { refuse } from "../require.js";

/**
 * The value below which a part of a sample lies, with straight lines between the ordered values.
 *
 * Source: R.J. Hyndman and Y. Fan, Am. Stat. 50 (1996) 361, definition 7.
 * @param sorted - ascending, at least one value
 * @param part - from 0 (the least value) to 1 (the largest)
 * @throws InputError if there is no value
 */
export function quantile(sorted: ArrayLike<number>, part: number): number {
  if (sorted.length === 0) refuse("quantile: sorted", "at least one value", 0);
  const place = part * (sorted.length - 1);
  const below = Math.floor(place);
  const above = Math.min(below + 1, sorted.length - 1);
  return sorted[below]! + (place - below) * (sorted[above]! - sorted[below]!);
}
