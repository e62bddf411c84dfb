import { CoupletError, InputError } from "../errors.js";
import { Evaluation, evaluator } from "../model/evaluate.js";
import {
  type Fit,
  type FitModelOptions,
  type FittedParameter,
  fitModel,
  LISTED_DELTA_CHI2,
  type StudyMinimum,
} from "../model/fit-model.js";
import type { Decay, Model, WidthModelChoice } from "../model/model.js";
import { resolveStudy } from "../model/resolve-study.js";
import { isSameModel, widthModel } from "../widths/width-model.js";

/** 1/GeV as a radius in fm: hbar c / 1 GeV, fixed by the SI of 2019. */
const INVERSE_GEV_FM = 0.1973269804;

/** The width models a fit is repeated with, where they are defined: every id, with the options that are in use. */
const CHOICES: readonly WidthModelChoice[] = [
  { id: "a", options: { n: 1 } },
  { id: "a", options: { n: 2 } },
  { id: "b", options: {} },
  { id: "c", options: { radiusFm: INVERSE_GEV_FM } },
  { id: "c", options: { radiusFm: 5 * INVERSE_GEV_FM } },
  { id: "d", options: {} },
  { id: "d", options: { derivativeForm: 1 } },
  { id: "e", options: {} },
];

/** A study fitted again with one width model for all its decays, and the minimum of it that is meant. */
export interface ModelRefit {
  readonly model: WidthModelChoice;
  readonly fit: Fit;
  /** Index of the minimum whose amplitudes are nearest to those of the study's own. */
  readonly minimum: number;
}

/** A width model that does not apply to a study, with the reason in words. */
export interface SkippedModel {
  readonly model: WidthModelChoice;
  readonly reason: string;
}

/** A fit of a study with one width model for all its decays. */
export interface ModelFit {
  readonly model: WidthModelChoice;
  readonly chi2: number;
  readonly ndf: number;
  /** How much lower the best minimum of this model is; 0 if it is this one. */
  readonly aboveBest: number;
  readonly parameters: readonly FittedParameter[];
  /** By channel of the study's own model. */
  readonly widthsMeV: readonly number[];
}

/** A study's fit repeated with other width models, on the same branch. */
export interface ModelSpread {
  /** With the models that the study writes. */
  readonly own: Pick<ModelFit, "parameters" | "widthsMeV" | "chi2" | "ndf">;
  readonly fits: readonly ModelFit[];
  readonly skipped: readonly SkippedModel[];
}

/**
 * The fit of a study repeated with every other width model that is defined for its decays, in numbers to compare.
 *
 * Couplings of different models cannot be compared, ratios and angles can.
 * @param minimum - index of the minimum of the study's own fit
 */
export function modelSpread(fit: Fit, minimum = 0, options: FitModelOptions = {}): ModelSpread {
  const { parameters, chi2, ndf } = fit.minima[minimum]!;
  const { fits, skipped } = modelRefits(fit, minimum, options);
  return {
    own: { parameters, chi2, ndf, widthsMeV: widths(fit.model, fit.minima[minimum]!) },
    fits: fits.map(modelFit),
    skipped,
  };
}

function modelFit({ model, fit, minimum }: ModelRefit): ModelFit {
  const chosen = fit.minima[minimum]!;
  const { chi2, ndf, parameters } = chosen;
  const widthsMeV = widths(fit.model, chosen);
  return { model, chi2, ndf, aboveBest: chi2 - fit.minima[0]!.chi2, parameters, widthsMeV };
}

/**
 * The fit of a study repeated with every other width model that is defined for its decays.
 *
 * In each, all minima are searched, and the one is taken whose amplitudes are nearest to those of the study's own: the
 * spread is that of the model, not of the branch.
 * @param minimum - index of the minimum of the study's own fit
 */
export function modelRefits(
  fit: Fit,
  minimum = 0,
  options: FitModelOptions = {},
): { readonly fits: readonly ModelRefit[]; readonly skipped: readonly SkippedModel[] } {
  const reference = amplitudes(fit.model, fit.minima[minimum]!);
  const fits: ModelRefit[] = [];
  const skipped: SkippedModel[] = [];
  const others = otherModels(fit.model);
  for (const [done, choice] of others.entries()) {
    const reason = couplingsAreFixed(fit.model) ?? missingFormula(choice, fit.model);
    const result = reason === undefined ? refitted(fit.model, choice, options) : reason;
    if (typeof result === "string") skipped.push({ model: choice, reason: result });
    else fits.push({ model: choice, fit: result, minimum: onSameBranch(result, reference) });
    options.onProgress?.(done + 1, others.length);
  }
  return { fits, skipped };
}

/** Half the range of each channel's width over the models, the study's own among them, in MeV. */
export function modelErrorsMeV({ own, fits }: ModelSpread): number[] {
  return own.widthsMeV.map((width, channel) => {
    const all = [width, ...fits.map(({ widthsMeV }) => widthsMeV[channel]!)];
    return (Math.max(...all) - Math.min(...all)) / 2;
  });
}

/** The choices that differ from the study's own models and from each other in the decays of the study. */
function otherModels({ decays }: Model): WidthModelChoice[] {
  const isSame = (of: (decay: Decay) => WidthModelChoice, choice: WidthModelChoice) =>
    decays.every((decay) => {
      const { id, options } = of(decay);
      const vertex = { L: decay.L, parent: decay.from, daughters: decay.to };
      return isSameModel(widthModel(id, options), widthModel(choice.id, choice.options), vertex);
    });
  return CHOICES.filter((choice, k) => {
    const isOwn = isSame(({ model }) => model, choice);
    return !isOwn && !CHOICES.slice(0, k).some((earlier) => isSame(() => earlier, choice));
  });
}

/** Why another model's couplings would contradict what the study says of their size; undefined if it says nothing. */
function couplingsAreFixed({ observables, parameters, decays }: Model): string | undefined {
  const sized = observables.find(({ quantum }) => {
    if (quantum.kind === "axial") return decays.length > 0;
    if (quantum.kind !== "parameter") return false;
    const target = quantum.parameter;
    return "parameter" in target
      ? parameters[target.parameter]!.kind === "coupling"
      : target.name === "D" || target.name === "F";
  });
  return sized && `"${sized.label}" fixes the size of couplings, which belongs to the study's own model`;
}

/** The first decay that a model has no formula for, in words; undefined if there is none. */
function missingFormula({ id, options }: WidthModelChoice, { decays }: Model): string | undefined {
  const model = widthModel(id, options);
  for (const { from, to, L } of decays) {
    try {
      model.amplitudeUnit({ L, parent: from, daughters: to });
    } catch (error) {
      if (!(error instanceof InputError)) throw error;
      return `it has no formula for ${from.id} -> ${to.map((multiplet) => multiplet.id).join(" ")} with L = ${L}`;
    }
  }
  return undefined;
}

function refitted({ study }: Model, choice: WidthModelChoice, options: FitModelOptions): Fit | string {
  try {
    const decays = study.decays.map((decay) => ({ ...decay, model: choice }));
    const { signal } = options;
    return fitModel(resolveStudy({ ...study, decays }), signal === undefined ? {} : { signal });
  } catch (error) {
    if (error instanceof CoupletError) return error.message;
    throw error;
  }
}

function onSameBranch(fit: Fit, reference: readonly (readonly number[])[]): number {
  const limit = fit.minima[0]!.chi2 + LISTED_DELTA_CHI2;
  const near = fit.minima.filter(({ chi2 }) => chi2 < limit);
  const distances = near.map((minimum) => distance(amplitudes(fit.model, minimum), reference));
  return distances.indexOf(Math.min(...distances));
}

function widths(model: Model, { vector }: StudyMinimum): number[] {
  const evaluation = new Evaluation(evaluator(model), vector);
  return model.channels.map((_, channel) => evaluation.width(channel).value);
}

/** By parent: the amplitudes of all its waves in sqrt(MeV), which have the same meaning in every model. */
function amplitudes(model: Model, { vector }: StudyMinimum): number[][] {
  const evaluation = new Evaluation(evaluator(model), vector);
  return model.parents.map(({ channels }) =>
    channels.flatMap((channel) =>
      model.channels[channel]!.waves.map(
        (_, wave) =>
          evaluation.amplitude(channel, wave).value * Math.sqrt(evaluation.kinematicFactor(channel, wave)),
      ),
    ),
  );
}

/** Square of the distance, each parent in the sign in which it is nearer. */
function distance(a: readonly (readonly number[])[], b: readonly (readonly number[])[]): number {
  const apart = (x: readonly number[], y: readonly number[], sign: number) =>
    x.reduce((sum, value, k) => sum + (value - sign * y[k]!) ** 2, 0);
  return a.reduce((sum, x, p) => sum + Math.min(apart(x, b[p]!, 1), apart(x, b[p]!, -1)), 0);
}
