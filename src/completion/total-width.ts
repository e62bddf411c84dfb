import type { Model, Observable, Parent } from "../model/model.js";
import type { Estimate } from "./tables.js";

/** A row before its fraction is known. Gradients are with respect to the model's parameters. */
export type Entry =
  | {
      readonly id: string;
      readonly kind: "predicted";
      readonly widthMeV: number;
      readonly gradient: readonly number[];
      readonly breakingMeV: number;
    }
  | {
      readonly id: string;
      readonly kind: "measured width" | "measured fraction";
      /** Index into the list of table observables. */
      readonly observable: number;
      /** The row's part of the measured value. */
      readonly share: number;
      /** The part itself: a width in MeV or a fraction. */
      readonly value: number;
      readonly split: boolean;
    };

/** A parent's fractions and widths, with errors, and what is left of its total width. */
export interface Completed {
  readonly totalMeV: number;
  readonly totalErrorMeV: number;
  readonly estimates: readonly { readonly fraction: Estimate; readonly widthMeV: Estimate }[];
  readonly remainder?: { readonly fraction: Estimate; readonly widthMeV: Estimate };
  readonly observables: readonly Observable[];
}

/** Sums of fractions may pass 1 by this through rounding of doubles. */
const ROUNDING = 1e-9;

/**
 * Fractions of one parent from measured and predicted entries.
 *
 * A measured total width fixes the scale and leaves a remainder; `sum` makes the total the sum of the rows:
 * T = (sum of widths) / (1 - sum of measured fractions). Errors are linear, in the space of the model's parameters
 * (with the fit's covariance), the measured values and the total width (each independent).
 *
 * @returns the fractions, or a sentence naming the conflicting entries where they add up to more than 1
 */
export function completeParent(
  parent: Parent,
  entries: readonly Entry[],
  covariance: readonly (readonly number[])[],
  observables: readonly Observable[],
  model: Model,
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
  if (!(excess <= ROUNDING))
    return { conflict: conflictText(parent, entries, fractions, observables, totalMeV) };
  const space = new ErrorSpace(parent, entries, covariance, observables, model);
  const totalGradient = space.total(isSum, fractionTotal, totalMeV);
  const estimates = entries.map((entry, k) => space.estimates(entry, fractions[k]!, totalMeV, totalGradient));
  const totalErrorMeV = isSum
    ? space.sigma(totalGradient)
    : (parent.total.plusMeV + parent.total.minusMeV) / 2;
  const base = { totalMeV, totalErrorMeV, estimates, observables };
  const left = 1 - sumOf(fractions);
  if (isSum || left < ROUNDING / 2) return base;
  return { ...base, remainder: space.remainder(entries, left, fractions, totalMeV, totalGradient) };
}

function sumOf(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0);
}

/** A gradient over model parameters, then measured values (by observable), then the total width. */
type Gradient = readonly number[];

/** Linear error propagation for one parent. */
class ErrorSpace {
  private readonly parameterCount: number;
  private readonly size: number;

  constructor(
    private readonly parent: Parent,
    private readonly entries: readonly Entry[],
    private readonly covariance: readonly (readonly number[])[],
    private readonly observables: readonly Observable[],
    model: Model,
  ) {
    this.parameterCount = model.parameters.length;
    this.size = this.parameterCount + observables.length + 1;
  }

  private zero(): number[] {
    return new Array<number>(this.size).fill(0);
  }

  /** Gradient of the part of an entry's width that does not scale with the total. */
  private width(entry: Entry): number[] {
    const gradient = this.zero();
    if (entry.kind === "predicted") for (const [k, d] of entry.gradient.entries()) gradient[k] = d;
    else if (entry.kind === "measured width") gradient[this.parameterCount + entry.observable] = entry.share;
    return gradient;
  }

  private fixedFraction(entry: Entry): number[] {
    const gradient = this.zero();
    if (entry.kind === "measured fraction") gradient[this.parameterCount + entry.observable] = entry.share;
    return gradient;
  }

  /** Gradient of the total width. */
  total(isSum: boolean, fractionTotal: number, totalMeV: number): Gradient {
    if (!isSum) {
      const gradient = this.zero();
      gradient[this.size - 1] = 1;
      return gradient;
    }
    return this.zero().map(
      (_, k) =>
        sumOf(this.entries.map((entry) => this.width(entry)[k]! + totalMeV * this.fixedFraction(entry)[k]!)) /
        (1 - fractionTotal),
    );
  }

  private fraction(entry: Entry, widthPart: number, totalMeV: number, total: Gradient): number[] {
    const width = this.width(entry);
    const fixed = this.fixedFraction(entry);
    return width.map((d, k) => fixed[k]! + (d - widthPart * total[k]!) / totalMeV);
  }

  estimates(
    entry: Entry,
    fraction: number,
    totalMeV: number,
    total: Gradient,
  ): { fraction: Estimate; widthMeV: Estimate } {
    const widthPart = entry.kind === "measured fraction" ? 0 : fraction;
    const fractionGradient = this.fraction(entry, widthPart, totalMeV, total);
    const widthGradient = fractionGradient.map((d, k) => d * totalMeV + fraction * total[k]!);
    const breakingMeV = entry.kind === "predicted" ? entry.breakingMeV : 0;
    return {
      fraction: this.estimate(fraction, fractionGradient, breakingMeV / totalMeV),
      widthMeV: this.estimate(fraction * totalMeV, widthGradient, breakingMeV),
    };
  }

  remainder(
    entries: readonly Entry[],
    left: number,
    fractions: readonly number[],
    totalMeV: number,
    total: Gradient,
  ): { fraction: Estimate; widthMeV: Estimate } {
    const gradient = this.zero();
    for (const [k, entry] of entries.entries()) {
      const part = this.fraction(
        entry,
        entry.kind === "measured fraction" ? 0 : fractions[k]!,
        totalMeV,
        total,
      );
      for (let j = 0; j < this.size; j++) gradient[j]! -= part[j]!;
    }
    const breaking = Math.hypot(
      ...entries.map((entry) => (entry.kind === "predicted" ? entry.breakingMeV : 0)),
    );
    return {
      fraction: this.estimate(left, gradient, breaking / totalMeV),
      widthMeV: this.estimate(
        left * totalMeV,
        gradient.map((d, k) => d * totalMeV + left * total[k]!),
        breaking,
      ),
    };
  }

  private estimate(value: number, gradient: Gradient, breaking: number): Estimate {
    return { value, plus: this.side(gradient, 1), minus: this.side(gradient, -1), breaking };
  }

  sigma(gradient: Gradient): number {
    return (this.side(gradient, 1) + this.side(gradient, -1)) / 2;
  }

  /** Standard deviation upwards (+1) or downwards (-1): measured values and the total may have different sides. */
  private side(gradient: Gradient, direction: 1 | -1): number {
    let variance = 0;
    for (let i = 0; i < this.parameterCount; i++) {
      for (let j = 0; j < this.parameterCount; j++)
        variance += gradient[i]! * this.covariance[i]![j]! * gradient[j]!;
    }
    const { plusMeV, minusMeV } = this.parent.total;
    const sides = this.observables.map(({ measured }) => measured);
    for (const [k, { plus, minus }] of [...sides, { plus: plusMeV, minus: minusMeV }].entries()) {
      const d = gradient[this.parameterCount + k]!;
      variance += (d * (d * direction > 0 ? plus : minus)) ** 2;
    }
    return Math.sqrt(Math.max(0, variance));
  }
}

function conflictText(
  parent: Parent,
  entries: readonly Entry[],
  fractions: readonly number[],
  observables: readonly Observable[],
  totalMeV: number,
): string {
  const listed = entries
    .map((entry, k) => ({ entry, fraction: fractions[k]! }))
    .filter(({ fraction }) => fraction > 0)
    .sort((a, b) => b.fraction - a.fraction)
    .map(({ entry, fraction }) => {
      const origin =
        entry.kind === "predicted"
          ? "predicted"
          : `${observables[entry.observable]!.label}, line ${observables[entry.observable]!.position.line}`;
      return `  ${fraction.toFixed(4)}  ${entry.id}  (${origin})`;
    });
  const { name } = parent.hadron;
  if (parent.total.kind === "sum") {
    return `${name}: the rows leave no total width to sum to. Give the member a total width, or measure one of its partial widths.`;
  }
  const total = sumOf(fractions).toFixed(4);
  return [
    `${name}: expected fractions that add up to at most 1, got ${total} of the total width ${totalMeV} MeV:`,
    ...listed,
    `  Mend a value, give the member \`width: sum\`, or keep a measurement out of the table with \`use: fit\`.`,
  ].join("\n");
}
