import type { Parent } from "../model/model.js";
import { constrainedFractions } from "./constrained-fractions.js";
import type { Completed, Entry } from "./total-width.js";

/** Fractions and partial widths of a parent's rows: those of its entries, then of the remainder if there is one. */
export interface RowNumbers {
  readonly fractions: readonly number[];
  readonly widthsMeV: readonly number[];
}

/** Measured fractions leave at least this part of a total width that is the sum of the rows. */
const LEAST_PREDICTED = 1e-3;

/**
 * The rows of a completed parent with other numbers in its entries, whatever they come to.
 *
 * The rules are those of `completeParent`, with no conflict left: rows that pass a measured total are the total; what was
 * moved to add up to 1 is moved again, by the same covariance; and without a remainder in the completed parent there is
 * none here. With the parent's own entries and total it gives its own rows.
 * @param entries - as many as the completed parent has, in the same order
 * @param givenMeV - the measured total width, >= 0; without meaning for a total that is the sum of the rows
 */
export function otherRows(
  parent: Parent,
  entries: readonly Entry[],
  givenMeV: number,
  { remainder, movedBy }: Completed,
): RowNumbers {
  const isSum = parent.total.kind === "sum";
  const fixed = entries.map((entry) => (entry.kind === "measured fraction" ? entry.value : 0));
  const free = entries.map((entry) =>
    entry.kind === "predicted" ? entry.widthMeV : entry.kind === "measured width" ? entry.value : 0,
  );
  const most = isSum ? Math.min(1, (1 - LEAST_PREDICTED) / sumOf(fixed)) : 1;
  const scaleMeV = isSum ? sumOf(free) / (1 - most * sumOf(fixed)) : givenMeV;
  const raw = entries.map((_, k) => free[k]! + most * fixed[k]! * scaleMeV);
  if (movedBy !== undefined && givenMeV > 0) {
    const moved = constrainedFractions(
      raw.map((width) => width / givenMeV),
      movedBy,
    );
    if (Number.isFinite(moved.chi2)) return shared(moved.fractions.map((fraction) => fraction * givenMeV));
  }
  return shared(remainder === undefined ? raw : [...raw, Math.max(0, givenMeV - sumOf(raw))]);
}

function shared(widthsMeV: readonly number[]): RowNumbers {
  const total = sumOf(widthsMeV);
  return { widthsMeV, fractions: widthsMeV.map((width) => (total > 0 ? width / total : 0)) };
}

function sumOf(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0);
}
