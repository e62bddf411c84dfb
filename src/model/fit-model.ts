import { InputError } from "../errors.js";
import { chiSquareProbability } from "../fit/chi-square.js";
import type { FitVerdicts } from "../fit/levenberg-marquardt.js";
import { findMinima, type MinimaProblem, type Minimum, minimumNear } from "../fit/minima.js";
import { sumsOf } from "./breaking.js";
import { chiSquareProblem } from "./chi-square-problem.js";
import { derivedNumbers } from "./derived-numbers.js";
import { type DistinctMinimum, distinctPhysics } from "./distinct-physics.js";
import { Evaluation, type Evaluator, evaluator } from "./evaluate.js";
import { signProblem } from "./linear-forms.js";
import type { Model, Observable, Parameter } from "./model.js";
import { comparisons, priorResidual, reactionSigns } from "./residuals.js";

/** A parameter after the fit, or a number computed from fitted ones. */
export interface FittedParameter {
  readonly name: string;
  readonly value: number;
  /** Standard deviation from the covariance matrix, not scaled by chi2. */
  readonly error: number;
  /** False where the data leave a combination of parameters free that it depends on: value and error mean nothing. */
  readonly determined: boolean;
  readonly unit: string;
  readonly kind: Parameter["kind"] | "derived";
  /** What was given of it beforehand, with the pull of the fit against that; absent for what the data alone fix. */
  readonly given?: {
    readonly value: number;
    readonly plus: number;
    readonly minus: number;
    readonly pull: number;
    /** Whether any fitted measurement depends on it; else the fit leaves it as it was given. */
    readonly measured: boolean;
  };
}

/** A measurement against the fit. */
export interface Pull {
  readonly observable: Observable;
  readonly fitted: number;
  /** (fitted - measured) / error, with the error of the side the fit lies on. */
  readonly pull: number;
}

/** One minimum of chi2. */
export interface StudyMinimum {
  readonly chi2: number;
  /** Number of data and priors, but for signs alone, less number of free parameters. */
  readonly ndf: number;
  /** Chance of a chi2 at least as large; undefined when ndf is 0. */
  readonly probability: number | undefined;
  readonly parameters: readonly FittedParameter[];
  /** The model's parameter vector, and its covariance matrix. */
  readonly vector: readonly number[];
  readonly covariance: readonly (readonly number[])[];
  readonly pulls: readonly Pull[];
  readonly verdicts: FitVerdicts;
  /** Fitted sign of each reaction whose sign the study leaves free. */
  readonly reactionSigns: Readonly<Record<string, 1 | -1>>;
  /** Other parameter values with the same predictions for every channel, counted and not listed. */
  readonly equivalents: number;
}

/** Every minimum of a study's chi2, best first. */
export interface Fit {
  readonly model: Model;
  readonly minima: readonly StudyMinimum[];
}

/** Largest chi2 above the best at which another minimum still deserves attention; tables list those. */
export const LISTED_DELTA_CHI2 = 9;

/** Below this chi2 above the best, a second minimum is not excluded by the data. */
export const MIRROR_DELTA_CHI2 = 4;

/** Free mixing angles are searched from starts this far apart, over half a turn; the other half only changes signs. */
const ANGLE_STEP = Math.PI / 6;

/** Choices for a fit. */
export interface FitModelOptions {
  readonly signal?: AbortSignal;
  readonly onProgress?: (done: number, total: number) => void;
}

/**
 * The fit of a model to its observables: every minimum, however far above the best.
 *
 * At given mixing angles amplitudes are linear in the couplings, and all sign patterns are enumerated; free angles are
 * searched from a grid of starts, each with its own enumeration. Minima with equal predictions are one.
 *
 * @throws InputError if a coupling enters no fitted observable
 * @throws LimitError if there are too many sign patterns
 */
export function fitModel(model: Model, options: FitModelOptions = {}): Fit {
  const ready = evaluator(model);
  const fitted = fittedObservables(model);
  requireConstrained(ready, fitted);
  const minima = distinctMinima(ready, fitted, options).map(({ minimum, equivalents }) =>
    studyMinimum(ready, fitted, minimum, equivalents),
  );
  return { model, minima };
}

function distinctMinima(
  ready: Evaluator,
  fitted: readonly Observable[],
  options: FitModelOptions,
): DistinctMinimum[] {
  const { model } = ready;
  const starts = nuisanceStarts(model);
  const everything = { deltaChi2: Number.POSITIVE_INFINITY };
  if (starts.length === 1) {
    const { minima } = findMinima(minimaProblem(ready, fitted, starts[0]!), { ...everything, ...options });
    return distinctPhysics(ready, minima);
  }
  // With free angles the search runs over many starts, so what is held tightly by priors rests until the end, and the
  // starts beside walls are spared: a grid of angles comes into every cell from several sides.
  const resting = model.parameters.map(
    ({ kind }) => kind === "mass" || kind === "total width" || kind === "normalisation",
  );
  const found = starts.flatMap((nuisance, k) => {
    const problem = withResting(minimaProblem(ready, fitted, nuisance), resting, model);
    const onProgress = (done: number, total: number) =>
      options.onProgress?.(k * total + done, starts.length * total);
    return findMinima(problem, { ...everything, ...options, walls: false, onProgress }).minima;
  });
  const full = minimaProblem(ready, fitted, starts[0]!);
  const complete = found.map((minimum) => ({
    ...minimum,
    parameters: awake(minimum.parameters, resting, model),
  }));
  return distinctPhysics(ready, complete)
    .map(({ minimum, equivalents }) => ({ minimum: minimumNear(full, minimum.parameters), equivalents }))
    .filter(({ minimum }, k) => minimum.verdicts.converged || k === 0)
    .sort((a, b) => a.minimum.chi2 - b.minimum.chi2);
}

/** The observables of a model that enter the fit. */
export function fittedObservables(model: Model): Observable[] {
  return model.observables.filter((observable) => observable.use !== "table");
}

/** Degrees of freedom of a minimum: a sign alone is right or wrong, and leaves nothing to scatter. */
export function degreesOfFreedom({ ndf }: Pick<Minimum, "ndf">, fitted: readonly Observable[]): number {
  return Math.max(0, ndf - fitted.filter(({ signOnly }) => signOnly).length);
}

/** Parameters after the couplings, at every combination of starts of the free mixing angles. */
function nuisanceStarts(model: Model): number[][] {
  const count = Math.round(Math.PI / ANGLE_STEP);
  return model.parameters.slice(model.couplingCount).reduce<number[][]>(
    (starts, { kind, start, prior }) => {
      const isFree = kind === "mixing angle" && prior === undefined;
      const values = isFree
        ? Array.from({ length: count }, (_, k) => (k - count / 2 + 0.5) * ANGLE_STEP)
        : [start];
      return starts.flatMap((rest) => values.map((value) => [...rest, value]));
    },
    [[]],
  );
}

/** Chi-square of a model as a problem for the search of minima, from given starts of all but the couplings. */
export function minimaProblem(
  ready: Evaluator,
  fitted: readonly Observable[],
  nuisance: readonly number[],
): MinimaProblem {
  const { model } = ready;
  const start = [...new Array<number>(model.couplingCount).fill(0), ...nuisance];
  return {
    parameterNames: model.parameters.map((parameter) => parameter.name),
    couplingCount: model.couplingCount,
    ...signProblem(new Evaluation(ready, start), fitted),
    nuisanceStarts: nuisance,
    ...chiSquareProblem(ready, fitted),
  };
}

/** The full parameter vector for one without the resting parameters, which stand at their starts. */
function awake(parameters: readonly number[], resting: readonly boolean[], model: Model): number[] {
  let next = 0;
  return model.parameters.map(({ start }, k) => (resting[k] ? start : parameters[next++]!));
}

/** A problem in which some nuisance parameters stand still. */
function withResting(problem: MinimaProblem, resting: readonly boolean[], model: Model): MinimaProblem {
  const moving = <T>(values: readonly T[]): T[] => values.filter((_, k) => !resting[k]);
  const { couplingCount } = problem;
  return {
    ...problem,
    parameterNames: moving(problem.parameterNames),
    nuisanceStarts: problem.nuisanceStarts.filter((_, k) => !resting[couplingCount + k]),
    ...(problem.bounds === undefined ? {} : { bounds: moving(problem.bounds) }),
    residuals: (parameters) => problem.residuals(awake(parameters, resting, model)),
    jacobian: (parameters) => problem.jacobian!(awake(parameters, resting, model)).map(moving),
  };
}

/** Every coupling must enter some observable that is fitted, else the data say nothing about it. */
function requireConstrained({ model, rows }: Evaluator, fitted: readonly Observable[]): void {
  const touched = new Set<number>();
  const touch = (row: readonly number[]) => {
    for (const [k, c] of row.entries()) if (c !== 0) touched.add(k);
  };
  for (const { quantum } of fitted) {
    for (const { channel } of sumsOf(quantum).flat()) rows[channel]!.flat().forEach(touch);
    if (quantum.kind === "axial") touch(quantum.row);
    if (quantum.kind === "parameter") {
      if ("parameter" in quantum.parameter) touched.add(quantum.parameter.parameter);
      else model.decays[quantum.parameter.decay]!.couplingRows.forEach(touch);
    }
  }
  const free = model.parameters.slice(0, model.couplingCount).filter((_, k) => !touched.has(k));
  if (free.length === 0) return;
  const names = free.map((parameter) => parameter.name).join(", ");
  throw new InputError(
    `${model.study.file}: no measurement depends on ${names}. Add a measurement of a channel it couples to, or take its decay out of the study.`,
  );
}

function studyMinimum(
  ready: Evaluator,
  fitted: readonly Observable[],
  minimum: Minimum,
  equivalents: number,
): StudyMinimum {
  const { model } = ready;
  const evaluation = new Evaluation(ready, minimum.parameters);
  const ndf = degreesOfFreedom(minimum, fitted);
  const compared = comparisons(evaluation, fitted);
  const direct = model.parameters.map((parameter, k): FittedParameter => {
    const { name, unit, kind, prior } = parameter;
    return {
      name,
      value: minimum.parameters[k]!,
      error: Math.sqrt(Math.max(0, minimum.covariance[k]?.[k] ?? 0)),
      determined: minimum.verdicts.degenerateDirections.every((direction) => Math.abs(direction[k]!) < 1e-6),
      unit,
      kind,
      ...(prior === undefined
        ? {}
        : {
            given: {
              ...prior,
              pull: priorResidual(parameter, k, minimum.parameters).residual,
              measured: compared.some(({ gradient }) => gradient[k] !== 0),
            },
          }),
    };
  });
  return {
    chi2: minimum.chi2,
    ndf,
    probability: ndf > 0 ? chiSquareProbability(minimum.chi2, ndf) : undefined,
    parameters: [
      ...direct,
      ...derivedNumbers(model, minimum).map((number) => ({ ...number, kind: "derived" as const })),
    ],
    vector: minimum.parameters,
    covariance: minimum.covariance,
    pulls: compared.map(({ observable, fitted: value, residual }) => ({
      observable,
      fitted: value,
      pull: residual,
    })),
    verdicts: minimum.verdicts,
    reactionSigns: Object.fromEntries(reactionSigns(evaluation, fitted)),
    equivalents,
  };
}
