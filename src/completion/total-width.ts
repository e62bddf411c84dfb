import type { Parent, TableValue } from "../model/model.js";
import type { CommonNormalisation } from "./common-normalisations.js";
import { constrainedFractions, smallestConflict } from "./constrained-fractions.js";
import { ErrorSpace, type Gradient } from "./error-space.js";
import { groupOf, type LinearFraction, RelativeChanges } from "./relative-changes.js";
import type { Estimate } from "./tables.js";

/** A row before its fraction is known. Gradients are with respect to the model's parameters. */
export type Entry =
  | {
      readonly id: string;
      readonly kind: "predicted";
      readonly widthMeV: number;
      readonly gradient: readonly number[];
      readonly breakingMeV: number;
      /** Of a width that is 0 since the channel is closed: relative change of the squared leading amplitude. */
      readonly closed?: { readonly gradient: readonly number[]; readonly breaking: number };
      /** What breaking moves together: the charge states of an isospin channel. */
      readonly group: string;
    }
  | {
      readonly id: string;
      readonly kind: "measured width" | "measured fraction";
      /** Index into the list of values that settle rows. */
      readonly observable: number;
      /** The row's part of the measured value; above 1 where the value is of a narrower charge state. */
      readonly share: number;
      /** The part itself: a width in MeV or a fraction. */
      readonly value: number;
      readonly split: boolean;
    };

/** A row's fraction and width; `unadjusted` where a policy moved them. */
export interface CompletedRow {
  readonly fraction: Estimate;
  readonly widthMeV: Estimate;
  readonly unadjusted?: { readonly fraction: Estimate; readonly widthMeV: Estimate };
}

/** A parent's fractions and widths, with errors, and what is left of its total width. */
export interface Completed {
  readonly totalMeV: number;
  readonly totalErrorsMeV: { readonly plus: number; readonly minus: number };
  readonly estimates: readonly CompletedRow[];
  readonly remainder?: { readonly fraction: Estimate; readonly widthMeV: Estimate };
  readonly values: readonly TableValue[];
  /** Covariance of the fractions before they were moved to add up to 1; absent where they stand as they were. */
  readonly movedBy?: readonly (readonly number[])[];
  /** How errors move the entries' fractions and the remainder's, relative to themselves. */
  readonly changes: RelativeChanges;
}

/** How a parent is completed. */
export interface CompletionOptions {
  /** Covariance of the model's parameters. */
  readonly covariance: readonly (readonly number[])[];
  /** Measured values that entries refer to. */
  readonly values: readonly TableValue[];
  /** The normalisation that each of them shares with others; undefined for one of its own. */
  readonly normalisations: readonly (CommonNormalisation | undefined)[];
  readonly conflicts: "refuse" | "constrained";
}

/** Sums of fractions may pass 1 by this through rounding of doubles. */
const ROUNDING = 1e-9;

/** Standard deviations by which fractions may be moved; common practice. */
const CONSTRAINED_SIGMAS = 2;

/**
 * Fractions of one parent from measured and predicted entries.
 *
 * A measured total width fixes the scale and leaves a remainder; `sum` makes the total the sum of the rows:
 * T = (sum of widths) / (1 - sum of measured fractions). Errors are linear, in the space of the model's parameters
 * (with the fit's covariance), the measured values, their common normalisations and the total width (each independent). Fractions that add up to more
 * than 1 of a measured total are a conflict, unless the policy `constrained` brings them to 1 with a chi2 up to 4; then
 * every row keeps its old value beside the new one.
 *
 * @returns the fractions, or a sentence naming the conflicting entries where they add up to more than 1
 */
export function completeParent(
  parent: Parent,
  entries: readonly Entry[],
  { covariance, values, normalisations, conflicts }: CompletionOptions,
): Completed | { conflict: string } {
  const widths = entries.map((entry) =>
    entry.kind === "predicted" ? entry.widthMeV : entry.kind === "measured width" ? entry.value : 0,
  );
  const fixed = entries.map((entry) => (entry.kind === "measured fraction" ? entry.value : 0));
  const widthTotal = sumOf(widths);
  const fractionTotal = sumOf(fixed);
  const isSum = parent.total.kind === "sum";
  const totalMeV = isSum ? widthTotal / (1 - fractionTotal) : parent.total.widthMeV;
  const fractions = entries.map((_, k) => fixed[k]! + widths[k]! / totalMeV);
  const excess = isSum ? (fractionTotal < 1 && widthTotal > 0 ? 0 : 1) : sumOf(fractions) - 1;
  const isConflict = !(excess <= ROUNDING);
  if (isConflict && (isSum || conflicts === "refuse"))
    return { conflict: conflictText(parent, entries, fractions, values, totalMeV) };
  const space = new ErrorSpace(parent, covariance, values, covariance.length, normalisations);
  const total = isSum ? space.summedTotal(entries, fractionTotal, totalMeV) : space.givenTotal();
  const gradients = entries.map((entry, k) => space.fraction(entry, fractions[k]!, totalMeV, total));
  const breaking = entries.map((entry) => (entry.kind === "predicted" ? entry.breakingMeV / totalMeV : 0));
  const broken = (weights: readonly number[]) => brokenError(entries, breaking, weights);
  // Breaking moves a total that is the sum of the rows, by 1/(1 - sum of measured fractions) for each predicted width.
  const share = isSum ? 1 / (1 - fractionTotal) : 0;
  const lessTotal = (k: number, part: number) => entries.map((_, j) => (j === k ? 1 : 0) - part * share);
  const withTotal = entries.map((entry, k) => (entry.kind === "measured fraction" ? 0 : fractions[k]!));
  const plain = entries.map((_, k) =>
    space.estimates(
      fractions[k]!,
      gradients[k]!,
      {
        fraction: broken(lessTotal(k, withTotal[k]!)),
        widthMeV: totalMeV * broken(lessTotal(k, withTotal[k]! - fractions[k]!)),
      },
      totalMeV,
      total,
    ),
  );
  const { plusMeV: plus, minusMeV: minus } = parent.total;
  const totalErrorsMeV = isSum ? space.errors(total) : { plus, minus };
  const relativeTotal = {
    gradient: total.map((d) => d / totalMeV),
    broken: entries.map(() => share),
  };
  const changesOf = (linear: readonly LinearFraction[]) =>
    new RelativeChanges(space, entries, breaking, linear, relativeTotal);
  const base = { totalMeV, totalErrorsMeV, values };
  if (isConflict)
    return adjusted({
      parent,
      entries,
      fractions,
      gradients,
      breaking,
      plain,
      space,
      total,
      base,
      changesOf,
    });
  const linear = entries.map((_, k) => ({
    value: fractions[k]!,
    gradient: gradients[k]!,
    broken: lessTotal(k, withTotal[k]!),
  }));
  const left = 1 - sumOf(fractions);
  if (isSum || left < ROUNDING / 2) return { ...base, estimates: plain, changes: changesOf(linear) };
  const fromAll = entries.map(() => -1);
  const remainder = space.combination(fromAll, gradients);
  const unknown = broken(fromAll);
  return {
    ...base,
    estimates: plain,
    remainder: space.estimates(left, remainder, brokenAt(unknown, totalMeV), totalMeV, total),
    changes: changesOf([...linear, { value: left, gradient: remainder, broken: fromAll }]),
  };
}

/** Error from breaking of a combination of entries: those of one isospin channel move together, others by themselves. */
function brokenError(
  entries: readonly Entry[],
  breaking: readonly number[],
  weights: readonly number[],
): number {
  const sums = new Map<string, number>();
  for (const [k, entry] of entries.entries()) {
    const group = groupOf(entry);
    sums.set(group, (sums.get(group) ?? 0) + weights[k]! * breaking[k]!);
  }
  return Math.hypot(...sums.values());
}

/** The error from breaking of a fraction and of its width, where the total width does not move. */
function brokenAt(fraction: number, totalMeV: number): { fraction: number; widthMeV: number } {
  return { fraction, widthMeV: fraction * totalMeV };
}

function sumOf(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0);
}

/** A parent whose fractions add up to more than 1, with everything known of it. */
interface Conflict {
  readonly parent: Parent;
  readonly entries: readonly Entry[];
  readonly fractions: readonly number[];
  readonly gradients: readonly Gradient[];
  /** Standard deviation of each fraction from breaking of the symmetry. */
  readonly breaking: readonly number[];
  readonly plain: readonly CompletedRow[];
  readonly space: ErrorSpace;
  readonly total: Gradient;
  readonly base: Omit<Completed, "estimates" | "changes">;
  readonly changesOf: (linear: readonly LinearFraction[]) => RelativeChanges;
}

/** Fractions moved to add up to 1 within their errors, or the smallest set of entries that does not allow it. */
function adjusted(conflict: Conflict): Completed | { conflict: string } {
  const { entries, fractions, gradients, breaking, plain, space, total, base, changesOf } = conflict;
  const together = (i: number, j: number) => i === j || groupOf(entries[i]!) === groupOf(entries[j]!);
  const broken = breaking.map((a, i) => breaking.map((b, j) => (together(i, j) ? a * b : 0)));
  const covariance = gradients.map((a, i) =>
    gradients.map((b, j) => space.covarianceOf(a, b) + broken[i]![j]!),
  );
  const { fractions: moved, chi2, projection } = constrainedFractions(fractions, covariance);
  if (!(chi2 <= CONSTRAINED_SIGMAS ** 2)) return { conflict: beyondText(conflict, covariance, chi2) };
  const linear = projection.map((row, k) => ({
    value: moved[k]!,
    gradient: space.combination(row, gradients),
    broken: row,
  }));
  const estimates = entries.map((_, k): CompletedRow => {
    const row = projection[k]!;
    const variance = sumOf(row.map((a, i) => sumOf(row.map((b, j) => a * b * broken[i]![j]!))));
    const { gradient } = linear[k]!;
    const unknown = brokenAt(Math.sqrt(Math.max(0, variance)), base.totalMeV);
    const now = space.estimates(moved[k]!, gradient, unknown, base.totalMeV, total);
    const hasMoved = Math.abs(moved[k]! - fractions[k]!) > ROUNDING * fractions[k]!;
    return hasMoved ? { ...now, unadjusted: plain[k]! } : plain[k]!;
  });
  return { ...base, estimates, movedBy: covariance, changes: changesOf(linear) };
}

function beyondText(
  { parent, entries, fractions, base }: Conflict,
  covariance: readonly (readonly number[])[],
  chi2: number,
): string {
  const names = [...new Set(entries.map(groupOf))];
  const groups = names.map((name) => entries.flatMap((entry, k) => (groupOf(entry) === name ? [k] : [])));
  const listed = smallestConflict(groups, fractions, covariance, CONSTRAINED_SIGMAS).map((g) => {
    const members = groups[g]!;
    const value = sumOf(members.map((k) => fractions[k]!));
    const error = Math.sqrt(sumOf(members.map((i) => sumOf(members.map((j) => covariance[i]![j]!)))));
    const ids = members.map((k) => entries[k]!.id).join(", ");
    return `  ${value.toFixed(4)} +- ${error.toFixed(4)}  ${ids}  (${originText(entries[members[0]!]!, base.values)})`;
  });
  const { plusMeV, minusMeV } = parent.total;
  const sigmas = Number.isFinite(chi2)
    ? `${Math.sqrt(chi2).toFixed(1)} standard deviations`
    : "without errors";
  return [
    `${parent.hadron.name}: expected fractions that come to 1 within ${CONSTRAINED_SIGMAS} standard deviations, got ${sumOf(fractions).toFixed(4)} of the total width ${base.totalMeV} +- ${((plusMeV + minusMeV) / 2).toFixed(1)} MeV, ${sigmas} too much. The smallest set that conflicts by itself:`,
    ...listed,
    "  Mend a value, give the member `width: sum`, or keep a measurement out of the table with `use: fit`.",
  ].join("\n");
}

function originText(entry: Entry, values: readonly TableValue[]): string {
  if (entry.kind === "predicted") return "predicted";
  const { label, position } = values[entry.observable]!;
  return `${label}, line ${position.line}`;
}

function conflictText(
  parent: Parent,
  entries: readonly Entry[],
  fractions: readonly number[],
  values: readonly TableValue[],
  totalMeV: number,
): string {
  const listed = entries
    .map((entry, k) => ({ entry, fraction: fractions[k]! }))
    .filter(({ fraction }) => fraction > 0)
    .sort((a, b) => b.fraction - a.fraction)
    .map(({ entry, fraction }) => `  ${fraction.toFixed(4)}  ${entry.id}  (${originText(entry, values)})`);
  const { name } = parent.hadron;
  if (parent.total.kind === "sum") {
    return `${name}: the rows leave no total width to sum to. Give the member a total width, or measure one of its partial widths.`;
  }
  const total = sumOf(fractions).toFixed(4);
  return [
    `${name}: expected fractions that add up to at most 1, got ${total} of the total width ${totalMeV} MeV:`,
    ...listed,
    `  Mend a value, give the member \`width: sum\`, keep a measurement out of the table with \`use: fit\`, or have all of them moved within their errors: \`tables: { conflicts: constrained }\`.`,
  ].join("\n");
}
