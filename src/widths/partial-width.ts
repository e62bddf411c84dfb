import { refuse } from "../require.js";
import type { WidthModel } from "./width-model.js";
import type { Vertex } from "./width-model-definition.js";

/** Masses of one two-body decay, in MeV, and whether its daughters are one and the same particle. */
export interface TwoBodyDecay {
  readonly parentMeV: number;
  readonly firstMeV: number;
  readonly secondMeV: number;
  readonly identicalDaughters: boolean;
}

/**
 * Partial width of a two-body decay: Gamma = s |A|^2 K, s = 1/2 for identical daughters and 1 otherwise.
 *
 * With identical daughters A holds both contractions (it is twice the amplitude of one), which is why s is needed.
 * @param amplitudeSquared - |A|^2, in the square of the model's amplitude unit, >= 0
 * @returns in MeV, >= 0; 0 at and below threshold
 * @throws InputError for a negative or not finite |A|^2, or what the model refuses
 */
export function partialWidthMeV(
  model: WidthModel,
  amplitudeSquared: number,
  decay: TwoBodyDecay,
  vertex: Vertex,
): number {
  if (!Number.isFinite(amplitudeSquared) || amplitudeSquared < 0) {
    refuse("partialWidthMeV: amplitudeSquared", "a finite number >= 0", amplitudeSquared, "Give |A|^2.");
  }
  const factorMeV = model.kinematicFactorMeV(decay.parentMeV, decay.firstMeV, decay.secondMeV, vertex);
  return identicalFactor(decay.identicalDaughters) * amplitudeSquared * factorMeV;
}

/** The factor s of a two-body width: 1/2 if both daughters are one and the same particle, 1 otherwise. */
export function identicalFactor(identicalDaughters: boolean): number {
  return identicalDaughters ? 0.5 : 1;
}
