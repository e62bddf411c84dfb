import type { Evaluation } from "./evaluate.js";

/**
 * Standard deviation of a channel's partial width in MeV that breaking of the symmetry adds.
 *
 * Breaking adds amplitude: A -> A + breaking |g| z in each isospin channel, |g| the length of the decay's vector of
 * reduced couplings and z a standard normal number common to the channel's charge states; the width's standard
 * deviation is then K sqrt(4 A^2 s^2 + 2 s^4), s the amplitude's.
 */
export function widthBreakingMeV(evaluation: Evaluation, channel: number): number {
  const { model } = evaluation;
  const { waves, isospinCoefficient, identicalFactor } = model.channels[channel]!;
  let variance = 0;
  for (const w of waves.keys()) {
    const amplitude = evaluation.amplitude(channel, w).value;
    const strength = evaluation.couplingStrength(channel, w).value;
    const sigma = model.study.breaking * Math.abs(isospinCoefficient) * strength;
    const scale = identicalFactor * evaluation.kinematicFactor(channel, w);
    variance += scale * scale * (4 * amplitude ** 2 * sigma ** 2 + 2 * sigma ** 4);
  }
  return Math.sqrt(variance);
}
