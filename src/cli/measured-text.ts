import { gaussianDeviations } from "../fit/chi-square.js";
import type { Observable } from "../model/model.js";
import { asGiven } from "../tables/rounding.js";

/** A measurement as it was written: a value, a sign alone, or a limit, which chi2 takes as a half-Gaussian at 0. */
export function measuredText({ measured, signOnly }: Pick<Observable, "measured" | "signOnly">): string {
  const { value, plus, minus, limit } = measured;
  if (signOnly) return value > 0 ? "+" : "-";
  if (limit === undefined) return asGiven(value, plus, minus);
  const upper = plus * gaussianDeviations(limit.confidence);
  return `< ${asGiven(upper, 0, 0)} at ${asGiven(100 * limit.confidence, 0, 0)} %`;
}
