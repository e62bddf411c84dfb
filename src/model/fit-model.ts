import { fAndD, hasFAndD } from "../couplings/f-and-d.js";
import { STRONG } from "../couplings/operator.js";
import { InputError } from "../errors.js";
import type { FitVerdicts } from "../fit/levenberg-marquardt.js";
import { asymmetricSigma } from "../fit/measurement-errors.js";
import { findMinima, type MinimaProblem, type Minimum } from "../fit/minima.js";
import { type Evaluator, evaluator, type Graded, observableValue } from "./evaluate.js";
import { signProblem } from "./linear-forms.js";
import type { Model, Observable } from "./model.js";

/** A parameter after the fit, or a number computed from fitted ones. */
export interface FittedParameter {
  readonly name: string;
  readonly value: number;
  /** Standard deviation from the covariance matrix, not scaled by chi2. */
  readonly error: number;
  readonly unit: string;
  /** True for F, D and the like. */
  readonly derived: boolean;
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
  readonly ndf: number;
  /** Chance of a chi2 at least as large; undefined when ndf is 0. */
  readonly probability: number | undefined;
  readonly parameters: readonly FittedParameter[];
  /** The model's parameter vector, and its covariance matrix. */
  readonly vector: readonly number[];
  readonly covariance: readonly (readonly number[])[];
  readonly pulls: readonly Pull[];
  readonly verdicts: FitVerdicts;
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

/**
 * The fit of a model to its observables: every minimum, however far above the best.
 *
 * @param options - progress and a way to stop
 * @throws InputError if the observables cannot determine the couplings
 */
export function fitModel(
  model: Model,
  options: { signal?: AbortSignal; onProgress?: (done: number, total: number) => void } = {},
): Fit {
  const evaluation = evaluator(model);
  const fitted = model.observables.filter((observable) => observable.use !== "table");
  requireConstrained(evaluation, fitted);
  const { minima } = findMinima(minimaProblem(evaluation, fitted), {
    deltaChi2: Number.POSITIVE_INFINITY,
    ...options,
  });
  return { model, minima: minima.map((minimum) => studyMinimum(evaluation, fitted, minimum)) };
}

function minimaProblem(evaluation: Evaluator, fitted: readonly Observable[]): MinimaProblem {
  const { model } = evaluation;
  const nuisance = model.parameters.slice(model.couplingCount);
  const terms = (parameters: readonly number[]) => [
    ...fitted.map((observable) =>
      residual(observableValue(evaluation, observable, parameters), observable.measured),
    ),
    ...nuisance.map((parameter, k) => {
      const index = model.couplingCount + k;
      const gradient = parameters.map((_, j) => (j === index ? 1 : 0));
      return residual({ value: parameters[index]!, gradient }, parameter.prior!);
    }),
  ];
  return {
    parameterNames: model.parameters.map((parameter) => parameter.name),
    couplingCount: model.couplingCount,
    ...signProblem(evaluation, fitted),
    nuisanceStarts: nuisance.map((parameter) => parameter.start),
    bounds: model.parameters.map((parameter) => ({
      lower: parameter.kind === "coupling" ? Number.NEGATIVE_INFINITY : 1e-3 * parameter.start,
      upper: Number.POSITIVE_INFINITY,
    })),
    residuals: (parameters) => terms(parameters).map((term) => term.residual),
    jacobian: (parameters) => terms(parameters).map((term) => term.gradient),
  };
}

/**
 * (predicted - measured) / error and its gradient. The error slides from one side's to the other's between them, so
 * its slope belongs to the derivative.
 */
function residual(
  predicted: Graded,
  { value, plus, minus }: { readonly value: number; readonly plus: number; readonly minus: number },
): { residual: number; gradient: number[] } {
  const sigma = asymmetricSigma(value, minus, plus, predicted.value);
  const distance = predicted.value - value;
  const between = distance > -minus && distance < plus;
  const slope = between ? (plus - minus) / (plus + minus) : 0;
  const derivative = (1 - (distance * slope) / sigma) / sigma;
  return { residual: distance / sigma, gradient: predicted.gradient.map((d) => d * derivative) };
}

/** Every coupling must enter some observable that is fitted, else the data say nothing about it. */
function requireConstrained({ model, rows }: Evaluator, fitted: readonly Observable[]): void {
  const touched = new Set<number>();
  for (const { numerator, denominator } of fitted) {
    const sums = denominator.kind === "sum" ? [...numerator, ...denominator.sum] : numerator;
    for (const { channel } of sums) {
      for (const row of rows[channel]!) for (const [k, c] of row.entries()) if (c !== 0) touched.add(k);
    }
  }
  const free = model.parameters.slice(0, model.couplingCount).filter((_, k) => !touched.has(k));
  if (free.length === 0) return;
  const names = free.map((parameter) => parameter.name).join(", ");
  throw new InputError(
    `${model.study.file}: no measurement depends on ${names}. Add a measurement of a channel it couples to, or take its decay out of the study.`,
  );
}

function studyMinimum(evaluation: Evaluator, fitted: readonly Observable[], minimum: Minimum): StudyMinimum {
  const { model } = evaluation;
  const error = (index: number) => Math.sqrt(Math.max(0, minimum.covariance[index]?.[index] ?? 0));
  const direct = model.parameters.map(
    (parameter, k): FittedParameter => ({
      name: parameter.name,
      value: minimum.parameters[k]!,
      error: error(k),
      unit: parameter.unit,
      derived: false,
    }),
  );
  const pulls = fitted.map((observable): Pull => {
    const { value } = observableValue(evaluation, observable, minimum.parameters);
    return {
      observable,
      fitted: value,
      pull: residual({ value, gradient: [] }, observable.measured).residual,
    };
  });
  return {
    chi2: minimum.chi2,
    ndf: minimum.ndf,
    probability: minimum.ndf > 0 ? minimum.probability : undefined,
    parameters: [...direct, ...model.decays.flatMap((_, index) => derivedParameters(model, index, minimum))],
    vector: minimum.parameters,
    covariance: minimum.covariance,
    pulls,
    verdicts: minimum.verdicts,
  };
}

/** F, D and what is made of them, for a strong decay of an octet into two octets. */
function derivedParameters(model: Model, index: number, minimum: Minimum): FittedParameter[] {
  const decay = model.decays[index]!;
  if (decay.reduced.length !== 2 || !hasFAndD({ ...decay, operator: STRONG })) return [];
  const [s, a] = [decay.firstParameter, decay.firstParameter + 1];
  const block = [s, a].map((i) => [s, a].map((j) => minimum.covariance[i]![j]!));
  const { D, F, fOverD, alphaF, alphaD } = fAndD(minimum.parameters[s]!, minimum.parameters[a]!, block);
  const { unit } = model.parameters[s]!;
  const prefix = decay.name === "" ? "" : `${decay.name}.`;
  const named = {
    D: [D, unit],
    F: [F, unit],
    "F/D": [fOverD, "1"],
    alpha_F: [alphaF, "1"],
    alpha_D: [alphaD, "1"],
  } as const;
  return Object.entries(named).flatMap(([name, [estimate, ofUnit]]) =>
    estimate === null ? [] : [{ name: `${prefix}${name}`, ...estimate, unit: ofUnit, derived: true }],
  );
}
