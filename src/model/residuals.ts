import { asymmetricSigma } from "../fit/asymmetric-sigma.js";
import type { Evaluation, Graded } from "./evaluate.js";
import type { Observable, Parameter } from "./model.js";

/** A residual with its derivatives with respect to all parameters. */
export interface GradedResidual {
  readonly residual: number;
  readonly gradient: readonly number[];
}

/** A fitted observable at a parameter vector: the model's value, with the fitted sign of its reaction, and the residual. */
export interface Comparison extends GradedResidual {
  readonly observable: Observable;
  readonly fitted: number;
}

/** Amplitude that counts as one standard deviation when only the sign is known and comes out wrong. */
export const WRONG_SIGN = 0.01;

/**
 * Every fitted observable against its measurement.
 *
 * The unknown sign of a reaction is the one that fits its amplitudes better, taken together.
 */
export function comparisons(evaluation: Evaluation, fitted: readonly Observable[]): Comparison[] {
  const signs = reactionSigns(evaluation, fitted);
  return fitted.map((observable) => {
    const sign = signs.get(reactionOf(observable) ?? "") ?? 1;
    const value = signed(evaluation.observable(observable), sign);
    return { observable, fitted: value.value, ...observableResidual(value, observable) };
  });
}

/** The fitted sign of each reaction whose sign is free, by its key. */
export function reactionSigns(evaluation: Evaluation, fitted: readonly Observable[]): Map<string, 1 | -1> {
  const chi2 = new Map<string, [number, number]>();
  for (const observable of fitted) {
    const reaction = reactionOf(observable);
    if (reaction === undefined) continue;
    const value = evaluation.observable(observable);
    const [plus, minus] = chi2.get(reaction) ?? [0, 0];
    const square = (sign: 1 | -1) => observableResidual(signed(value, sign), observable).residual ** 2;
    chi2.set(reaction, [plus + square(1), minus + square(-1)]);
  }
  return new Map([...chi2].map(([reaction, [plus, minus]]) => [reaction, plus <= minus ? 1 : -1]));
}

/** The residual of a parameter's prior. */
export function priorResidual(
  parameter: Parameter,
  index: number,
  parameters: readonly number[],
): GradedResidual {
  const gradient = parameters.map((_, k) => (k === index ? 1 : 0));
  return pull({ value: parameters[index]!, gradient }, parameter.prior!);
}

function reactionOf({ quantum }: Observable): string | undefined {
  return "reaction" in quantum ? quantum.reaction : undefined;
}

function signed(graded: Graded, sign: 1 | -1): Graded {
  return sign === 1 ? graded : { value: -graded.value, gradient: graded.gradient.map((d) => -d) };
}

function observableResidual(predicted: Graded, { measured, signOnly }: Observable): GradedResidual {
  if (!signOnly) return pull(predicted, measured);
  const wrong = -measured.value * predicted.value;
  if (wrong <= 0) return { residual: 0, gradient: predicted.gradient.map(() => 0) };
  return {
    residual: wrong / WRONG_SIGN,
    gradient: predicted.gradient.map((d) => (-measured.value * d) / WRONG_SIGN),
  };
}

/**
 * (predicted - measured) / error and its gradient. The error slides from one side's to the other's between them, so
 * its slope belongs to the derivative.
 */
function pull(
  predicted: Graded,
  { value, plus, minus }: { readonly value: number; readonly plus: number; readonly minus: number },
): GradedResidual {
  const sigma = asymmetricSigma(value, minus, plus, predicted.value);
  const distance = predicted.value - value;
  const between = distance > -minus && distance < plus;
  const slope = between ? (plus - minus) / (plus + minus) : 0;
  const derivative = (1 - (distance * slope) / sigma) / sigma;
  return { residual: distance / sigma, gradient: predicted.gradient.map((d) => d * derivative) };
}
