import { Evaluation, evaluator } from "../model/evaluate.js";
import { type Fit, LISTED_DELTA_CHI2 } from "../model/fit-model.js";
import { widthBreakingMeV } from "../model/width-breaking.js";
import { type ModelSpread, modelErrorsMeV } from "./model-spread.js";
import { profileQuantities } from "./profile.js";
import { channelWidths, linearError } from "./quantities.js";

/** The parts of the error of one channel's predicted width, in MeV; they answer different questions and are not added. */
export interface ErrorParts {
  /** Of the data at this minimum. */
  readonly statistical: number;
  /** Largest difference to another minimum that the data do not exclude; 0 if there is none. */
  readonly branch: number;
  /** Half the range over width models; undefined if they were not compared. */
  readonly model: number | undefined;
  /** Of breaking of the symmetry, as large as the study says. */
  readonly breaking: number;
}

/** Choices for error parts. */
export interface ErrorPartsOptions {
  /** Minima at most this far above the best count as branches. Default 9. */
  readonly branchDeltaChi2?: number;
  readonly models?: ModelSpread;
}

/**
 * The error of every channel's predicted width in its parts, by index of `model.channels`.
 *
 * The statistical part is the linear error; where it is as large as the width itself the amplitude is near its zero,
 * linear errors mean little, and half of the 68.3 % profile interval takes its place.
 * @param minimum - index of the minimum that predicts
 */
export function errorParts(fit: Fit, minimum = 0, options: ErrorPartsOptions = {}): ErrorParts[] {
  const { model, minima } = fit;
  const ready = evaluator(model);
  const chosen = minima[minimum]!;
  const at = new Evaluation(ready, chosen.vector);
  const limit = minima[0]!.chi2 + (options.branchDeltaChi2 ?? LISTED_DELTA_CHI2);
  const branches = minima
    .filter(({ chi2 }, index) => index !== minimum && chi2 < limit)
    .map(({ vector }) => new Evaluation(ready, vector));
  const quantities = channelWidths(model);
  const ofModels = options.models === undefined ? undefined : modelErrorsMeV(options.models);
  return quantities.map((quantity, channel): ErrorParts => {
    const graded = quantity.of(at);
    const linear = linearError(graded, chosen.covariance);
    const nearZero = isOpen(fit, channel) && linear >= graded.value;
    const differences = branches.map((branch) => Math.abs(quantity.of(branch).value - graded.value));
    return {
      statistical: nearZero ? halfInterval(fit, minimum, channel, linear) : linear,
      branch: Math.max(0, ...differences),
      model: ofModels?.[channel],
      breaking: widthBreakingMeV(at, channel),
    };
  });
}

function isOpen({ model }: Fit, channel: number): boolean {
  return model.channels[channel]!.waves.some(({ kinematicFactor }) => kinematicFactor > 0);
}

/** Half the length of the 68.3 % interval; the linear error where no end was found. */
function halfInterval(fit: Fit, minimum: number, channel: number, linear: number): number {
  const [profile] = profileQuantities(fit, [channelWidths(fit.model)[channel]!], { minimum });
  const { lower, upper } = profile!.intervals[0]!;
  if (lower.value === undefined || upper.value === undefined) return linear;
  return (upper.value - lower.value) / 2;
}
