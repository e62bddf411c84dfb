import { asymmetricKink } from "../fit/asymmetric-sigma.js";
import type { MinimaProblem } from "../fit/minima-problem.js";
import { Evaluation, type Evaluator } from "./evaluate.js";
import type { Observable, Parameter } from "./model.js";
import { comparisons, type GradedResidual, priorResidual } from "./residuals.js";

/** Residuals of a model with their derivatives and the parameters' bounds, as a fit takes them. */
export type ChiSquareProblem = Required<Pick<MinimaProblem, "residuals" | "jacobian" | "bounds" | "kinks">>;

/**
 * Chi-square of a model: every fitted observable against its measurement, then every parameter against its prior.
 *
 * @param fitted - the observables that enter; `fittedObservables` of the model unless some are left out or changed
 */
export function chiSquareProblem(ready: Evaluator, fitted: readonly Observable[]): ChiSquareProblem {
  const { parameters } = ready.model;
  const constrained = parameters.flatMap((parameter, index) =>
    parameter.prior === undefined ? [] : [{ parameter, index }],
  );
  const computed = (at: readonly number[]): readonly GradedResidual[] => [
    ...comparisons(new Evaluation(ready, at), fitted),
    ...constrained.map(({ parameter, index }) => priorResidual(parameter, index, at)),
  ];
  // A fit asks for residuals and for their derivatives at one point after the other: both come from one evaluation.
  let last: { at: readonly number[]; terms: readonly GradedResidual[] } | undefined;
  const terms = (at: readonly number[]): readonly GradedResidual[] => {
    if (last === undefined || !last.at.every((value, k) => value === at[k]))
      last = { at: [...at], terms: computed(at) };
    return last.terms;
  };
  const measured = [
    ...fitted.map(({ measured, signOnly }) => (signOnly ? undefined : measured)),
    ...constrained.map(({ parameter }) => parameter.prior),
  ];
  const kinks = measured.flatMap((value, residual) => {
    const kink = value && asymmetricKink(value.minus, value.plus);
    return kink === undefined ? [] : [{ residual, ...kink }];
  });
  return {
    kinks,
    bounds: parameters.map(boundsOf),
    residuals: (at) => terms(at).map((term) => term.residual),
    jacobian: (at) => terms(at).map((term) => [...term.gradient]),
  };
}

function boundsOf({ kind, start }: Parameter): { lower: number; upper: number } {
  const isPositive = kind === "total width" || kind === "mass";
  return { lower: isPositive ? 1e-3 * start : Number.NEGATIVE_INFINITY, upper: Number.POSITIVE_INFINITY };
}
