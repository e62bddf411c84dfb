import { drawnMeasurement } from "../fit/asymmetric-sigma.js";
import { Evaluation, type Evaluator } from "../model/evaluate.js";
import type { Observable, Parameter } from "../model/model.js";
import { comparisons, WRONG_SIGN } from "../model/residuals.js";

/** What takes the place of the measurements and the priors in one pseudo-experiment. */
export interface PseudoData {
  readonly observables: readonly Observable[];
  readonly parameters: readonly Parameter[];
}

/**
 * Where pseudo-data are drawn around: every fitted observable as a minimum predicts it (with the fitted signs of the
 * reactions), and every parameter at its fitted value.
 */
export interface Truth {
  readonly observables: readonly { readonly observable: Observable; readonly predicted: number }[];
  readonly parameters: readonly { readonly parameter: Parameter; readonly value: number }[];
}

/** The truth of pseudo-experiments: the predictions of a minimum for the observables that enter its fit. */
export function truthAt(ready: Evaluator, fitted: readonly Observable[], vector: readonly number[]): Truth {
  const evaluation = new Evaluation(ready, vector);
  return {
    observables: comparisons(evaluation, fitted).map(({ observable, fitted: predicted }) => ({
      observable,
      predicted,
    })),
    parameters: ready.model.parameters.map((parameter, k) => ({ parameter, value: vector[k]! })),
  };
}

/**
 * Measurements and priors drawn around the truth with their own errors.
 *
 * Asymmetric errors draw from two half-Gaussians (`drawnMeasurement`); an upper limit is a measurement of 0 with its
 * Gaussian error, and moves like one; a sign alone is that of the amplitude with the error that counts for signs.
 * @param normal - standard normal numbers; one is used for each observable, then one for each prior
 */
export function drawPseudoData(truth: Truth, normal: () => number): PseudoData {
  return {
    observables: truth.observables.map(({ observable, predicted }) => {
      const { measured, signOnly } = observable;
      const z = normal();
      const value = signOnly
        ? Math.sign(predicted + WRONG_SIGN * z) || 1
        : drawnMeasurement(predicted, measured.minus, measured.plus, z);
      return { ...observable, measured: { ...measured, value } };
    }),
    parameters: truth.parameters.map(({ parameter, value }) => {
      const { prior } = parameter;
      if (prior === undefined) return parameter;
      const drawn = drawnMeasurement(value, prior.minus, prior.plus, normal());
      return { ...parameter, prior: { ...prior, value: drawn } };
    }),
  };
}
