import { availableParallelism } from "node:os";
import { InputError } from "../errors.js";
import type { Fit } from "../model/fit-model.js";
import { type ErrorParts, errorParts } from "../uncertainty/error-parts.js";
import { type LeftOut, leaveOneOut } from "../uncertainty/leave-one-out.js";
import { type ModelSpread, modelSpread } from "../uncertainty/model-spread.js";
import { profileQuantities, type QuantityProfile } from "../uncertainty/profile.js";
import { type PseudoExperiments, pseudoExperiments } from "../uncertainty/pseudo-experiments.js";
import { isospinWidths, parameterQuantities } from "../uncertainty/quantities.js";
import { integerOption } from "./integer-option.js";
import { type Progress, progressBar } from "./progress.js";

/** What `couplet fit` was asked for beyond the fit itself, as written on the command line. */
export interface UncertaintyOptions {
  readonly profile?: true;
  readonly toys?: string;
  readonly seed?: string;
  readonly workers?: string;
  readonly leaveOneOut?: true;
  readonly models?: true;
}

/** Further errors of a fit's best minimum; what was not asked for is absent. */
export interface Uncertainties {
  readonly profiles?: readonly QuantityProfile[];
  readonly pseudoExperiments?: PseudoExperiments;
  readonly leaveOneOut?: readonly LeftOut[];
  readonly models?: ModelSpread;
  /** By channel; with `models`. */
  readonly errorParts?: readonly ErrorParts[];
}

/**
 * The options for pseudo-experiments as numbers; undefined where none were asked for.
 *
 * @throws InputError for a number that is none, or a seed without experiments
 */
export function toyOptions({ toys, seed, workers }: UncertaintyOptions) {
  if (toys === undefined) {
    const [lonely] = Object.entries({ seed, workers }).filter(([, value]) => value !== undefined);
    if (lonely === undefined) return undefined;
    throw new InputError(
      `couplet fit: --${lonely[0]} belongs to --toys, which is not there. Add --toys <n>, or leave it out.`,
    );
  }
  return {
    count: integerOption("couplet fit: --toys", toys, 1, 1e8),
    seed: integerOption("couplet fit: --seed", seed ?? "1", 0, 2 ** 32 - 1),
    workers: integerOption("couplet fit: --workers", workers ?? String(availableParallelism()), 1, 256),
  };
}

/** Everything that was asked for, one thing after the other, each with a bar on a terminal. */
export async function uncertaintiesOf(fit: Fit, options: UncertaintyOptions): Promise<Uncertainties> {
  const toys = toyOptions(options);
  const models =
    options.models && (await barred("models", (onProgress) => modelSpread(fit, 0, { onProgress })));
  const quantities = [...parameterQuantities(fit.model), ...isospinWidths(fit.model)];
  return {
    ...(options.profile && {
      profiles: await barred("profiles", (onProgress) => profileQuantities(fit, quantities, { onProgress })),
    }),
    ...(toys && {
      pseudoExperiments: await barred("pseudo-experiments", (onProgress) =>
        pseudoExperiments(fit, { ...toys, onProgress }),
      ),
    }),
    ...(options.leaveOneOut && {
      leaveOneOut: await barred("leave one out", (onProgress) => leaveOneOut(fit, { onProgress })),
    }),
    ...(models && { models, errorParts: errorParts(fit, 0, { models }) }),
  };
}

async function barred<T>(what: string, work: (onProgress: Progress) => T | Promise<T>): Promise<T> {
  const bar = progressBar(what, true);
  try {
    return await work(bar.report);
  } finally {
    bar.end();
  }
}

/** The same as plain data for JSON, in which an open end is null. */
export function uncertaintiesJson(
  fit: Fit,
  { leaveOneOut: left, errorParts: parts, ...rest }: Uncertainties,
) {
  return {
    ...rest,
    ...(left && {
      leaveOneOut: left.map(({ observable, ...result }) => ({ quantity: observable.label, ...result })),
    }),
    ...(parts && {
      errorParts: parts.map((part, channel) => ({ channel: fit.model.channels[channel]!.id, ...part })),
    }),
  };
}
