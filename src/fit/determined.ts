/** A change by this part of a number, while the parameters change by their own length, is rounding. */
const ROUNDING = 1e-6;

/**
 * Whether a number depends on nothing that the data leave free.
 *
 * @param change - of the number for a step of length 1 along the free directions of the fit (`degenerateDirections`)
 * @param size - what counts as 1 for the number
 * @param parameters - of the fit
 */
export function isDetermined(change: number, size: number, parameters: readonly number[]): boolean {
  return Math.abs(change) * Math.hypot(...parameters) <= ROUNDING * Math.abs(size);
}
