import { isDetermined } from "../fit/determined.js";
import type { FitVerdicts } from "../fit/levenberg-marquardt.js";
import { minimumNear } from "../fit/minima.js";
import { chiSquareProblem } from "../model/chi-square-problem.js";
import { Evaluation, evaluator } from "../model/evaluate.js";
import { degreesOfFreedom, type Fit, fittedObservables, LISTED_DELTA_CHI2 } from "../model/fit-model.js";
import type { Observable } from "../model/model.js";
import { comparisons } from "../model/residuals.js";
import { linearError, parameterQuantities, type StudyQuantity } from "./quantities.js";

/** A parameter, or what is derived from parameters, in a fit without one observable. */
export interface ShiftedParameter {
  readonly name: string;
  readonly unit: string;
  readonly kind: StudyQuantity["kind"];
  readonly value: number;
  readonly error: number;
  /** False where the other observables leave it free: value, error and shift mean nothing. */
  readonly determined: boolean;
  /** Value without the observable minus value with it. */
  readonly shift: number;
}

/** A fit without one of its observables. */
export interface LeftOut {
  readonly observable: Observable;
  /** What the other observables predict for it. */
  readonly predicted: number;
  /** False where they leave it free: prediction and pull mean nothing. */
  readonly determined: boolean;
  /** (predicted - measured) / error of the measurement. */
  readonly pull: number;
  readonly chi2: number;
  readonly ndf: number;
  /** Of a fit that did not converge, or in which the other observables no longer fix every parameter. */
  readonly verdicts: FitVerdicts;
  readonly parameters: readonly ShiftedParameter[];
}

/** Choices for leave-one-out fits. */
export interface LeaveOneOutOptions {
  /** Index of the minimum that shifts refer to; default the best. */
  readonly minimum?: number;
  readonly signal?: AbortSignal;
  readonly onProgress?: (done: number, total: number) => void;
}

/**
 * Fits without each fitted observable in turn, from the minima that deserve attention; the best result counts.
 *
 * Priors of parameters stay: they are not left out.
 */
export function leaveOneOut(fit: Fit, options: LeaveOneOutOptions = {}): LeftOut[] {
  const ready = evaluator(fit.model);
  const fitted = fittedObservables(fit.model);
  const quantities = parameterQuantities(fit.model);
  const { vector } = fit.minima[options.minimum ?? 0]!;
  const full = new Evaluation(ready, vector);
  const limit = fit.minima[0]!.chi2 + LISTED_DELTA_CHI2;
  const starts = [vector, ...fit.minima.filter(({ chi2 }) => chi2 < limit).map((minimum) => minimum.vector)];
  return fitted.map((observable, index): LeftOut => {
    options.signal?.throwIfAborted();
    const others = fitted.filter((_, k) => k !== index);
    const problem = chiSquareProblem(ready, others);
    const minima = [...new Set(starts)].map((start) => minimumNear(problem, start));
    const best = minima.reduce((a, b) => (b.chi2 < a.chi2 * (1 - 1e-6) ? b : a));
    const evaluation = new Evaluation(ready, best.parameters);
    const comparison = comparisons(evaluation, fitted)[index]!;
    const { degenerateDirections } = best.verdicts;
    const isFixed = (gradient: readonly number[], size: number) =>
      degenerateDirections.every((direction) => {
        const change = direction.reduce((sum, d, k) => sum + d * gradient[k]!, 0);
        return isDetermined(change, size, best.parameters);
      });
    options.onProgress?.(index + 1, fitted.length);
    return {
      observable,
      predicted: comparison.fitted,
      determined: isFixed(comparison.gradient, 1),
      pull: comparison.residual,
      chi2: best.chi2,
      ndf: degreesOfFreedom(best, others),
      verdicts: best.verdicts,
      parameters: quantities.map((quantity) => {
        const { name, unit, kind } = quantity;
        const graded = quantity.of(evaluation);
        const shift = graded.value - quantity.of(full).value;
        const error = linearError(graded, best.covariance);
        const determined = isFixed(graded.gradient, graded.value);
        return { name, unit, kind, value: graded.value, error, determined, shift };
      }),
    };
  });
}
