import type { RelativeChanges } from "./relative-changes.js";
import type { Slice } from "./running-rows.js";
import type { Estimate } from "./tables.js";

/** Another answer to the same data: by entry, then the remainder if there is one, its width over the parent's own. */
export interface OtherAnswer {
  readonly part: "branch" | "model";
  readonly ratios: readonly number[];
}

/**
 * Fractions integrated over the line shape with their errors; the distribution of masses stays as it is.
 *
 * F_i = integral rho f_i dm with f_i = w_i/sum_j w_j. Relative changes d_j of the widths, the same at all masses, give
 * dF_i = integral rho f_i (d_i - sum_j f_j d_j) dm: errors of data and breaking are linear in these. Other answers' widths,
 * ratios r_j to the own, give integral rho r_i f_i/(sum_j r_j f_j) dm, of which branch is the largest difference and model
 * half the range. A row that has no width at any mass has the errors of its nominal fraction.
 * @param nominal - fractions at the nominal mass, by row
 * @param integrated - F_i
 * @param slices - of the line shape
 * @param changes - of the entries, then of the remainder, which all rows after the entries share
 */
export function integratedEstimates(
  nominal: readonly Estimate[],
  integrated: readonly number[],
  slices: readonly Slice[],
  changes: RelativeChanges,
  others: readonly OtherAnswer[],
): Estimate[] {
  const sums = summed(slices, (fractions) => fractions);
  const of = (part: OtherAnswer["part"]) =>
    others.filter((other) => other.part === part).map(({ ratios }) => reweighted(slices, ratios));
  const [branches, models] = [of("branch"), of("model")];
  return nominal.map((own, i): Estimate => {
    const value = integrated[i]!;
    if (value === 0) return { ...own, value };
    const shared = summed(slices, (fractions) => fractions.map((f) => fractions[i]! * f));
    const weights = sums.map((sum, j) => (i === j ? sum : 0) - shared[j]!);
    const away = Math.max(0, ...branches.map((other) => Math.abs(other[i]! - sums[i]!)));
    const values = [sums[i]!, ...models.map((other) => other[i]!)];
    // What is lost in the digits of a double is none.
    const size = (error: number) => (error > 1e-12 * value ? error : 0);
    return {
      value,
      ...changes.errors(weights),
      branch: size(away),
      ...(models.length === 0 ? {} : { model: size((Math.max(...values) - Math.min(...values)) / 2) }),
    };
  });
}

/** Integral over the line shape of something by row. */
function summed(slices: readonly Slice[], of: (fractions: readonly number[]) => readonly number[]): number[] {
  const sums = new Array<number>(slices[0]!.fractions.length).fill(0);
  for (const { chance, fractions } of slices)
    for (const [j, value] of of(fractions).entries()) sums[j]! += chance * value;
  return sums;
}

/** Integrated fractions with other widths; rows after the last ratio have the last. */
function reweighted(slices: readonly Slice[], ratios: readonly number[]): number[] {
  return summed(slices, (fractions) => {
    const changed = fractions.map((f, j) => f * ratios[Math.min(j, ratios.length - 1)]!);
    const total = changed.reduce((sum, value) => sum + value, 0);
    return changed.map((value) => (total > 0 ? value / total : 0));
  });
}
