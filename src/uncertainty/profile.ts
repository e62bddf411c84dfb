import { type ProfileInterval, profileInterval } from "../fit/profile-interval.js";
import { chiSquareProblem } from "../model/chi-square-problem.js";
import { Evaluation, evaluator } from "../model/evaluate.js";
import { type Fit, fittedObservables } from "../model/fit-model.js";
import { linearError, type StudyQuantity } from "./quantities.js";

/** Heights of the profile above the minimum, and the part of all experiments whose interval holds the truth. */
export const PROFILE_LEVELS = [
  { deltaChi2: 1, confidence: 0.683 },
  { deltaChi2: 4, confidence: 0.954 },
] as const;

/** A quantity at a minimum, with its linear error and the intervals that chi2 allows. */
export interface QuantityProfile {
  readonly name: string;
  readonly unit: string;
  readonly kind: StudyQuantity["kind"];
  readonly value: number;
  /** Standard deviation from the covariance; 0 where the quantity is stationary, and then without meaning. */
  readonly error: number;
  readonly intervals: readonly ({
    readonly deltaChi2: number;
    readonly confidence: number;
  } & ProfileInterval)[];
}

/** Choices for profiles. */
export interface ProfileFitOptions {
  /** Index of the minimum; default the best. */
  readonly minimum?: number;
  readonly signal?: AbortSignal;
  readonly onProgress?: (done: number, total: number) => void;
}

/** Profile-likelihood intervals of 68.3 % and 95.4 % for quantities of a fit, all other parameters refitted. */
export function profileQuantities(
  fit: Fit,
  quantities: readonly StudyQuantity[],
  options: ProfileFitOptions = {},
): QuantityProfile[] {
  const ready = evaluator(fit.model);
  const problem = chiSquareProblem(ready, fittedObservables(fit.model));
  const { vector, chi2, covariance, verdicts } = fit.minima[options.minimum ?? 0]!;
  const minimum = { parameters: [...vector], chi2, covariance: covariance.map((row) => [...row]), verdicts };
  const best = new Evaluation(ready, vector);
  return quantities.map((quantity, done): QuantityProfile => {
    options.signal?.throwIfAborted();
    const { name, unit, kind, least } = quantity;
    const graded = quantity.of(best);
    const f = (at: readonly number[]) => quantity.of(new Evaluation(ready, at));
    const intervals = PROFILE_LEVELS.map((level) => ({
      ...level,
      ...profileInterval(problem, minimum, f, level.deltaChi2, least === undefined ? {} : { least }),
    }));
    options.onProgress?.(done + 1, quantities.length);
    return { name, unit, kind, value: graded.value, error: linearError(graded, covariance), intervals };
  });
}
