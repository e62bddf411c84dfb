import { levenbergMarquardt } from "../fit/levenberg-marquardt.js";
import { normalNumbers } from "../fit/random-normal.js";
import { chiSquareProblem } from "../model/chi-square-problem.js";
import { Evaluation, type Evaluator, evaluator } from "../model/evaluate.js";
import type { Model, Observable } from "../model/model.js";
import { drawPseudoData, type Truth, truthAt } from "./pseudo-data.js";
import { isospinWidths, linearError, parameterQuantities, type StudyQuantity } from "./quantities.js";
import type { SharedRows } from "./shared-rows.js";

/** Data scatter by their errors: a fit good to 1e-5 of the residuals is far better than needed. */
export const QUICK = {
  refine: false,
  initialRadius: 1,
  maximumIterations: 300,
  offsetTolerance: 1e-5,
} as const;

/** What pseudo-experiments are made from, as plain data that can go to another thread. */
export interface PseudoExperimentTask {
  readonly model: Model;
  /** Observables that enter the fit. */
  readonly fitted: readonly Observable[];
  /** Parameter vectors of the minima to start from; data are drawn around the first. */
  readonly starts: readonly (readonly number[])[];
  readonly seed: number;
}

/** What a thread is given: the experiments and the rows to fill. */
export interface RefitThreadData {
  readonly task: PseudoExperimentTask;
  readonly rows: SharedRows;
}

/** The quantities of which every experiment reports value and error. */
export function reportedQuantities(model: Model): StudyQuantity[] {
  return [...parameterQuantities(model), ...isospinWidths(model)];
}

/** Numbers in one experiment's row: chi2, branch, converged (1 or 0), then value and error of each quantity. */
export function rowLength(quantities: number): number {
  return 3 + 2 * quantities;
}

/** Fits of pseudo-data, one after the other; experiment number k is the same whoever makes it. */
export class Refitter {
  private readonly ready: Evaluator;
  private readonly truth: Truth;
  readonly quantities: readonly StudyQuantity[];

  constructor(private readonly task: PseudoExperimentTask) {
    this.ready = evaluator(task.model);
    this.truth = truthAt(this.ready, task.fitted, task.starts[0]!);
    this.quantities = reportedQuantities(task.model);
  }

  /**
   * Experiment number `index` written into `row`.
   *
   * A fit begins at each start. The numbers reported are those of the fit from the first, the minimum whose errors are
   * wanted; the branch is the start whose fit has the least chi2, the first of them where several agree.
   */
  write(index: number, row: Float64Array): void {
    const data = drawPseudoData(this.truth, normalNumbers(this.task.seed, index));
    const ready = { ...this.ready, model: { ...this.ready.model, parameters: data.parameters } };
    const problem = chiSquareProblem(ready, data.observables);
    const fits = this.task.starts.map((start) => levenbergMarquardt(problem, start, QUICK));
    const first = fits[0]!;
    const least = Math.min(...fits.map(({ chi2 }) => chi2));
    row[0] = first.chi2;
    row[1] = fits.findIndex(({ chi2 }) => chi2 <= least + 1e-6 * (1 + least));
    row[2] = first.verdicts.converged ? 1 : 0;
    const evaluation = new Evaluation(ready, first.parameters);
    for (const [k, quantity] of this.quantities.entries()) {
      const graded = quantity.of(evaluation);
      row[3 + 2 * k] = graded.value;
      row[4 + 2 * k] = linearError(graded, first.covariance);
    }
  }
}
