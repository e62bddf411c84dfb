import { Evaluation, evaluator } from "../model/evaluate.js";
import type { Fit, StudyMinimum } from "../model/fit-model.js";

/** What one minimum of a fit says about one channel. */
export interface Prediction {
  /** Partial width in MeV at nominal masses; 0 if closed. */
  readonly widthMeV: number;
  /** Derivatives of the width with respect to the model's parameters. */
  readonly gradient: readonly number[];
  /** Standard deviation in MeV that breaking of the symmetry adds. */
  readonly breakingMeV: number;
  /** Flavour amplitude of each wave, in the coupling's unit. */
  readonly amplitudes: readonly number[];
  /** Largest |amplitude| over its wave's coupling strength, in the isospin channel; small means near a zero. */
  readonly relativeStrength: number;
}

/** Predictions of all channels of a fit's model, in the order of `model.channels`. */
export interface Predictions {
  readonly fit: Fit;
  readonly minimum: StudyMinimum;
  /** The model at the minimum. */
  readonly evaluation: Evaluation;
  readonly channels: readonly Prediction[];
}

/**
 * Amplitude and partial width of every charge channel at one minimum.
 *
 * Breaking adds amplitude: A -> A + breaking |g| z in each isospin channel, |g| the length of the decay's vector of
 * reduced couplings and z a standard normal number common to the channel's charge states; the width's standard
 * deviation is then K sqrt(4 A^2 s^2 + 2 s^4), s the amplitude's.
 */
export function predict(fit: Fit, minimumIndex: number): Predictions {
  const minimum = fit.minima[minimumIndex]!;
  const evaluation = new Evaluation(evaluator(fit.model), minimum.vector);
  return {
    fit,
    minimum,
    evaluation,
    channels: fit.model.channels.map((_, index) => predictChannel(evaluation, index)),
  };
}

function predictChannel(evaluation: Evaluation, index: number): Prediction {
  const { model } = evaluation;
  const channel = model.channels[index]!;
  const amplitudes = channel.waves.map((_, w) => evaluation.amplitude(index, w).value);
  const { value, gradient } = evaluation.width(index);
  let variance = 0;
  let relativeStrength = 0;
  for (const w of channel.waves.keys()) {
    const isospinLength = Math.abs(channel.isospinCoefficient) * evaluation.couplingStrength(index, w).value;
    const sigma = model.study.breaking * isospinLength;
    const scale = channel.identicalFactor * evaluation.kinematicFactor(index, w);
    variance += scale * scale * (4 * amplitudes[w]! ** 2 * sigma ** 2 + 2 * sigma ** 4);
    if (isospinLength > 0)
      relativeStrength = Math.max(relativeStrength, Math.abs(amplitudes[w]!) / isospinLength);
  }
  return { widthMeV: value, gradient, breakingMeV: Math.sqrt(variance), amplitudes, relativeStrength };
}
