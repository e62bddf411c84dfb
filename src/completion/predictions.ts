import { Evaluation, evaluator } from "../model/evaluate.js";
import type { Fit, StudyMinimum } from "../model/fit-model.js";
import type { Channel } from "../model/model.js";
import { wavePhasesKnown } from "../model/wave-phases.js";
import { widthBreakingMeV } from "../model/width-breaking.js";
import { breakingGroups } from "./breaking-groups.js";

/** What one minimum of a fit says about one channel. */
export interface Prediction {
  /** Partial width in MeV at nominal masses; 0 if closed. */
  readonly widthMeV: number;
  /** Derivatives of the width with respect to the model's parameters. */
  readonly gradient: readonly number[];
  /** Standard deviation in MeV that breaking of the symmetry adds. */
  readonly breakingMeV: number;
  /** Of a closed channel with an amplitude: relative change of the square of that of its least L. */
  readonly closed?: { readonly gradient: readonly number[]; readonly breaking: number };
  /** Flavour amplitude of each wave, in the coupling's unit. */
  readonly amplitudes: readonly number[];
  /** Whether the data fix the signs of the waves against each other; see `wavePhasesKnown`. */
  readonly phasesKnown: boolean;
  /** Largest |amplitude| over its wave's coupling strength, in the isospin channel; small means near a zero. */
  readonly relativeStrength: number;
  /** What breaking of the symmetry moves together; see `breakingGroups`. */
  readonly group: string;
}

/** Predictions of all channels of a fit's model, in the order of `model.channels`. */
export interface Predictions {
  readonly fit: Fit;
  readonly minimum: StudyMinimum;
  /** The model at the minimum. */
  readonly evaluation: Evaluation;
  readonly channels: readonly Prediction[];
}

/** Amplitude and partial width of every charge channel at one minimum, with the error of breaking (`widthBreakingMeV`). */
export function predict(fit: Fit, minimumIndex: number): Predictions {
  const minimum = fit.minima[minimumIndex]!;
  const evaluation = new Evaluation(evaluator(fit.model), minimum.vector);
  const groups = breakingGroups(fit.model);
  const known = wavePhasesKnown(fit, minimum);
  return {
    fit,
    minimum,
    evaluation,
    channels: fit.model.channels.map((_, index) => ({
      ...predictChannel(evaluation, index, groups[index]!),
      phasesKnown: known[index]!,
    })),
  };
}

function predictChannel(
  evaluation: Evaluation,
  index: number,
  group: string,
): Omit<Prediction, "phasesKnown"> {
  const channel = evaluation.model.channels[index]!;
  const amplitudes = channel.waves.map((_, w) => evaluation.amplitude(index, w).value);
  const { value, gradient } = evaluation.width(index);
  let relativeStrength = 0;
  for (const w of channel.waves.keys()) {
    const isospinLength = Math.abs(channel.isospinCoefficient) * evaluation.couplingStrength(index, w).value;
    if (isospinLength > 0)
      relativeStrength = Math.max(relativeStrength, Math.abs(amplitudes[w]!) / isospinLength);
  }
  const breakingMeV = widthBreakingMeV(evaluation, index);
  const closed = value === 0 ? closedChange(evaluation, index, amplitudes) : undefined;
  return {
    widthMeV: value,
    gradient,
    breakingMeV,
    ...(closed === undefined ? {} : { closed }),
    amplitudes,
    relativeStrength,
    group,
  };
}

/** As `widthBreakingMeV` has it, for A^2 alone: with r = s/|A| the relative error from breaking is sqrt(4 r^2 + 2 r^4). */
function closedChange(
  evaluation: Evaluation,
  index: number,
  amplitudes: readonly number[],
): Prediction["closed"] {
  const { model } = evaluation;
  const { waves, isospinCoefficient } = model.channels[index]!;
  const wave = leadingWave(waves, amplitudes);
  const { value, gradient } = evaluation.amplitude(index, wave);
  if (value === 0) return undefined;
  const strength = evaluation.couplingStrength(index, wave).value;
  const r = (model.study.breaking * Math.abs(isospinCoefficient) * strength) / Math.abs(value);
  return { gradient: gradient.map((d) => (2 * d) / value), breaking: Math.sqrt(4 * r ** 2 + 2 * r ** 4) };
}

/** The wave of least L that has an amplitude, which is the largest near threshold. */
export function leadingWave(waves: Channel["waves"], amplitudes: readonly number[]): number {
  return [...waves.keys()].reduce((best, w) => {
    if (amplitudes[w] === 0) return best;
    return amplitudes[best] === 0 || waves[w]!.L < waves[best]!.L ? w : best;
  }, 0);
}
