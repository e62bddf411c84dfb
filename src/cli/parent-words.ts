import { couplet } from "../gen/couplet.js";
import { roundedValue, withError } from "../tables/rounding.js";

import v1 = couplet.v1;

/** A value with its errors, or with one where rounding makes them equal. */
export function withErrors(value: number, plus: number, minus: number): string {
  const rounded = roundedValue(value, plus, minus);
  return rounded.plus === rounded.minus
    ? withError(value, plus)
    : `${rounded.value} +${rounded.plus} -${rounded.minus}`;
}

/** A parent's total width with its errors, in MeV. */
export function totalWidthText(parent: v1.Parent.$Properties): string {
  const { totalWidth, totalWidthError, totalWidthPlus, totalWidthMinus } = parent;
  const mean = totalWidthError ?? 0;
  return withErrors(totalWidth ?? 0, totalWidthPlus ?? mean, totalWidthMinus ?? mean);
}

/** Where a parent's total width comes from, in short. */
export function totalWords({ totalOrigin, totalSource }: v1.Parent.$Properties): string {
  if (totalOrigin === v1.TotalOrigin.TOTAL_ORIGIN_SUM) return "sum of rows";
  // Files from before there was a source do not tell the two apart.
  if (!totalSource) return "measured";
  return totalSource === "study" ? "given in the study" : "catalogue";
}
