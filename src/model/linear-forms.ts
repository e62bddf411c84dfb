import type { MinimaProblem } from "../fit/minima.js";
import { sumsOf } from "./breaking.js";
import type { Evaluation } from "./evaluate.js";
import type { Observable, WidthSum } from "./model.js";

/** Two linear forms count as one when their unit vectors agree to this. */
const SAME_DIRECTION = 1e-9;

type Target = MinimaProblem["amplitudeTargets"][number];

/**
 * The linear forms whose signs tell the minima apart, and the amplitudes that single widths and fractions fix, at the
 * mixing angles of an evaluation.
 *
 * Every wave of every channel that enters a fitted observable gives one form; parallel ones count once.
 */
export function signProblem(
  evaluation: Evaluation,
  fitted: readonly Observable[],
): Pick<MinimaProblem, "forms" | "amplitudeTargets"> {
  const forms: number[][] = [];
  const formOf = (row: readonly number[]): { form: number; square: number } | undefined => {
    const norm = Math.hypot(...row);
    if (norm === 0) return undefined;
    const lead = row.find((c) => Math.abs(c) > SAME_DIRECTION * norm)!;
    const unit = row.map((c) => c / (Math.sign(lead) * norm));
    let form = forms.findIndex((other) => other.every((c, k) => Math.abs(c - unit[k]!) < SAME_DIRECTION));
    if (form < 0) form = forms.push(unit) - 1;
    return { form, square: norm * norm };
  };
  /** The form and the factor of its square, if the sum of widths is the square of a single form. */
  const asSquare = (sum: WidthSum): { form: number; factor: number } | undefined => {
    const squares = new Map<number, number>();
    for (const { channel, weight, waves } of sum) {
      const { identicalFactor, waves: all } = evaluation.model.channels[channel]!;
      for (const w of waves ?? all.keys()) {
        const found = formOf(evaluation.amplitudeRow(channel, w));
        if (found === undefined) continue;
        const factor = weight * identicalFactor * evaluation.kinematicFactor(channel, w) * found.square;
        squares.set(found.form, (squares.get(found.form) ?? 0) + factor);
      }
    }
    const [first, ...others] = [...squares].map(([form, factor]) => ({ form, factor }));
    return others.length === 0 && first !== undefined && first.factor > 0 ? first : undefined;
  };
  const amplitudeTargets: Target[] = [];
  for (const { quantum, measured } of fitted) {
    const squares = sumsOf(quantum).map(asSquare);
    const total =
      quantum.kind === "width"
        ? 1
        : quantum.kind === "fraction" && quantum.total.kind !== "sum"
          ? evaluation.total(quantum.total).value
          : 0;
    const [square] = squares;
    if (square === undefined || total === 0) continue;
    const amplitude = Math.sqrt(Math.max(0, measured.value * total) / square.factor);
    const error = ((measured.plus + measured.minus) / 2) * (total / square.factor);
    // d(a^2) = 2 a da; near zero the error of the square itself limits the amplitude.
    amplitudeTargets.push({
      form: square.form,
      amplitude,
      sigma: error / Math.max(2 * amplitude, Math.sqrt(error)),
    });
  }
  connect(forms, evaluation);
  return { forms, amplitudeTargets };
}

/**
 * Adds forms of channels that no observable is about where they tie together couplings that would else stand apart:
 * the relative sign of those couplings is free in the data, but not in the predictions.
 */
function connect(forms: number[][], evaluation: Evaluation): void {
  const label = Array.from({ length: evaluation.model.couplingCount }, (_, k) => k);
  const join = (form: readonly number[]): boolean => {
    const labels = new Set(form.flatMap((c, k) => (c === 0 ? [] : [label[k]!])));
    const least = Math.min(...labels);
    for (const [k, old] of label.entries()) if (labels.has(old)) label[k] = least;
    return labels.size > 1;
  };
  forms.forEach(join);
  for (const [index, { waves }] of evaluation.model.channels.entries()) {
    for (const w of waves.keys()) {
      const row = evaluation.amplitudeRow(index, w);
      if (join(row)) forms.push(row);
    }
  }
}
