import type { Parent, TableValue } from "../model/model.js";
import type { CommonNormalisation } from "./common-normalisations.js";
import type { Estimate } from "./tables.js";
import type { Entry } from "./total-width.js";

/** A gradient over model parameters, then measured values (by their index), then the total width, then common normalisations. */
export type Gradient = readonly number[];

type MeasuredEntry = Exclude<Entry, { readonly kind: "predicted" }>;

/** Linear error propagation for one parent: fitted parameters with their covariance, all else independent. */
export class ErrorSpace {
  private readonly size: number;
  /** Index of the total width. */
  private readonly totalIndex: number;
  private readonly normalisationNames: readonly string[];

  constructor(
    private readonly parent: Parent,
    private readonly covariance: readonly (readonly number[])[],
    private readonly values: readonly TableValue[],
    private readonly parameterCount: number,
    /** Of each value. */
    private readonly normalisations: readonly (CommonNormalisation | undefined)[],
  ) {
    this.normalisationNames = [...new Set(normalisations.flatMap((common) => common?.name ?? []))];
    this.totalIndex = parameterCount + values.length;
    this.size = this.totalIndex + 1 + this.normalisationNames.length;
  }

  private zero(): number[] {
    return new Array<number>(this.size).fill(0);
  }

  /** A gradient over the model's parameters alone. */
  ofParameters(gradient: readonly number[]): Gradient {
    return [...gradient, ...this.zero().slice(this.parameterCount)];
  }

  /** Gradient of the part of an entry's width that does not scale with the total. */
  private width(entry: Entry): number[] {
    const gradient = this.zero();
    if (entry.kind === "predicted") for (const [k, d] of entry.gradient.entries()) gradient[k] = d;
    else if (entry.kind === "measured width") this.addMeasured(gradient, entry);
    return gradient;
  }

  private fixedFraction(entry: Entry): number[] {
    const gradient = this.zero();
    if (entry.kind === "measured fraction") this.addMeasured(gradient, entry);
    return gradient;
  }

  /** A row's part of a measured value moves with the value, and with the normalisation it shares with others. */
  private addMeasured(gradient: number[], entry: MeasuredEntry): void {
    gradient[this.parameterCount + entry.observable] = entry.share;
    const common = this.normalisations[entry.observable];
    if (common === undefined) return;
    gradient[this.totalIndex + 1 + this.normalisationNames.indexOf(common.name)] = entry.value * common.error;
  }

  /** Gradient of a total width that is given. */
  givenTotal(): Gradient {
    const gradient = this.zero();
    gradient[this.totalIndex] = 1;
    return gradient;
  }

  /** Gradient of a total width that is the sum of the rows. */
  summedTotal(entries: readonly Entry[], fractionTotal: number, totalMeV: number): Gradient {
    const sum = this.zero();
    for (const entry of entries) {
      const [width, fixed] = [this.width(entry), this.fixedFraction(entry)];
      for (let k = 0; k < this.size; k++) sum[k]! += width[k]! + totalMeV * fixed[k]!;
    }
    return sum.map((d) => d / (1 - fractionTotal));
  }

  /** Gradient of an entry's fraction. */
  fraction(entry: Entry, fraction: number, totalMeV: number, total: Gradient): Gradient {
    const widthPart = entry.kind === "measured fraction" ? 0 : fraction;
    const [width, fixed] = [this.width(entry), this.fixedFraction(entry)];
    return width.map((d, k) => fixed[k]! + (d - widthPart * total[k]!) / totalMeV);
  }

  /** A linear combination of gradients. */
  combination(weights: readonly number[], gradients: readonly Gradient[]): Gradient {
    const sum = this.zero();
    for (const [i, gradient] of gradients.entries()) {
      if (weights[i] !== 0) for (let k = 0; k < this.size; k++) sum[k]! += weights[i]! * gradient[k]!;
    }
    return sum;
  }

  /** A fraction and its width from the fraction's gradient and their errors from breaking. */
  estimates(
    fraction: number,
    gradient: Gradient,
    breaking: { readonly fraction: number; readonly widthMeV: number },
    totalMeV: number,
    total: Gradient,
  ): { fraction: Estimate; widthMeV: Estimate } {
    const width = gradient.map((d, k) => d * totalMeV + fraction * total[k]!);
    return {
      fraction: this.estimate(fraction, gradient, breaking.fraction),
      widthMeV: this.estimate(fraction * totalMeV, width, breaking.widthMeV),
    };
  }

  private estimate(value: number, gradient: Gradient, breaking: number): Estimate {
    return { value, ...this.errors(gradient), breaking };
  }

  /** Standard deviations upwards and downwards of what has this gradient. */
  errors(gradient: Gradient): { plus: number; minus: number } {
    return { plus: this.side(gradient, 1), minus: this.side(gradient, -1) };
  }

  /** Covariance of two quantities; of errors with two sides the one counts that lowers a fraction. */
  covarianceOf(a: Gradient, b: Gradient): number {
    let sum = this.fitted(a, b);
    for (const [k, { plus, minus }] of this.sides().entries()) {
      const [da, db] = [a[this.parameterCount + k]!, b[this.parameterCount + k]!];
      // A fraction falls with its measured value, and with a rising total width.
      sum += da * db * (k === this.values.length ? plus : minus) ** 2;
    }
    return sum;
  }

  private fitted(a: Gradient, b: Gradient): number {
    let sum = 0;
    for (let i = 0; i < this.parameterCount; i++) {
      if (a[i] === 0) continue;
      for (let j = 0; j < this.parameterCount; j++) sum += a[i]! * this.covariance[i]![j]! * b[j]!;
    }
    return sum;
  }

  private sides(): { plus: number; minus: number }[] {
    const { plusMeV, minusMeV } = this.parent.total;
    const normalisations = this.normalisationNames.map(() => ({ plus: 1, minus: 1 }));
    return [
      ...this.values.map(({ measured }) => measured),
      { plus: plusMeV, minus: minusMeV },
      ...normalisations,
    ];
  }

  /** Standard deviation upwards (+1) or downwards (-1): measured values and the total may have different sides. */
  private side(gradient: Gradient, direction: 1 | -1): number {
    let variance = this.fitted(gradient, gradient);
    for (const [k, { plus, minus }] of this.sides().entries()) {
      const d = gradient[this.parameterCount + k]!;
      variance += (d * (d * direction > 0 ? plus : minus)) ** 2;
    }
    return Math.sqrt(Math.max(0, variance));
  }
}
