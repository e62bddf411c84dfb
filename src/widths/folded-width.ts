import { integrateOverLineShape, type LineShape } from "./line-shape.js";
import type { Quadrature, QuadratureOptions } from "./quadrature.js";
import { type RunningWidth, requireStrength } from "./running-width.js";
import type { WidthModel } from "./width-model.js";
import type { Vertex } from "./width-model-definition.js";

/** A daughter of a two-body decay: its mass in MeV if it is stable, or its line shape. */
export type Daughter = number | LineShape;

/** A two-body channel either of whose daughters may be unstable; they do not interfere with other channels. */
export interface TwoBodyChannel {
  readonly model: WidthModel;
  readonly vertex: Vertex;
  readonly daughters: readonly [Daughter, Daughter];
}

/** Relative error of a folded factor unless another is asked for. */
const RELATIVE_ERROR = 1e-8;

/** The inner of two integrals is asked for this much more accuracy, so that the outer one sees a smooth function. */
const INNER = 0.1;

/**
 * Lowest mass in MeV at which a channel opens: a stable daughter counts with its mass, an unstable one with the lowest
 * mass of its window, which is where it can decay itself.
 */
export function channelThresholdMeV({ daughters }: TwoBodyChannel): number {
  return lowestMassMeV(daughters[0]) + lowestMassMeV(daughters[1]);
}

/** Lowest mass a daughter can have, in MeV. */
export function lowestMassMeV(daughter: Daughter): number {
  return typeof daughter === "number" ? daughter : daughter.windowMeV[0];
}

/**
 * Kinematic factor K of a channel, averaged over the line shapes of its unstable daughters up to the mass there is.
 *
 * <K>(M) = integral dw rho(w)/N K(M, w, m2) from the daughter's threshold to M - m2, and the double integral for two.
 * It takes the place of K in Gamma = s |A|^2 K and holds no coupling: one value serves a whole fit. It is positive also
 * where the decay is closed at nominal masses.
 * Two resonances in one final state interfere; adding folded widths leaves that out.
 * Source: the width of a sequential decay integrated over the invariant mass of the unstable daughter; derived, compared
 * with an independent program in the tests.
 * @param parentMeV - M, in MeV
 * @param options - `relativeError` 1e-8 unless given; the result carries its own estimate
 * @returns K in MeV times the inverse square of the amplitude's unit; exactly 0 at and below `channelThresholdMeV`
 * @throws InputError for a mass or a vertex the model refuses
 */
export function foldedFactor(
  channel: TwoBodyChannel,
  parentMeV: number,
  options: QuadratureOptions = {},
): Quadrature {
  const { model, vertex, daughters } = channel;
  const [first, second] = daughters;
  const relativeError = options.relativeError ?? RELATIVE_ERROR;
  const factor = (firstMeV: number, secondMeV: number) =>
    model.kinematicFactorMeV(parentMeV, firstMeV, secondMeV, vertex);
  const over = (shape: LineShape, otherMeV: number, f: (w: number) => number, error: number): Quadrature =>
    integrateOverLineShape(shape, f, { toMeV: parentMeV - otherMeV }, { ...options, relativeError: error });
  if (typeof first === "number" && typeof second === "number") {
    return { value: factor(first, second), error: 0, evaluations: 1 };
  }
  if (typeof second === "number") {
    return over(first as LineShape, second, (w) => factor(w, second), relativeError);
  }
  if (typeof first === "number") {
    return over(second, first, (w) => factor(first, w), relativeError);
  }
  let evaluations = 0;
  const inner = (firstMeV: number): number => {
    const f = (w: number) => factor(firstMeV, w);
    const part = over(second, firstMeV, f, INNER * relativeError);
    evaluations += part.evaluations;
    return part.value;
  };
  // The inner integral is not smooth where its upper end meets a threshold, the peak or the end of the second window.
  const edges = [...second.running.thresholdsMeV, second.massMeV, second.windowMeV[1]];
  const range = {
    toMeV: parentMeV - second.windowMeV[0],
    breakpointsMeV: edges.map((edge) => parentMeV - edge),
  };
  const outer = integrateOverLineShape(first, inner, range, { ...options, relativeError });
  return {
    value: outer.value,
    error: outer.error + INNER * relativeError * Math.abs(outer.value),
    evaluations,
  };
}

/**
 * Gamma(w) = strength <K>(w): the width of a channel with unstable daughters against the mass of the parent.
 *
 * Each call is an integral; make a `massGrid` of it for many.
 * @param strength - s |A|^2, in the square of the model's amplitude unit, >= 0
 * @throws InputError for a negative strength
 */
export function foldedWidth(
  channel: TwoBodyChannel,
  strength: number,
  options: QuadratureOptions = {},
): RunningWidth {
  requireStrength("foldedWidth: strength", strength);
  const widths = channel.daughters.flatMap((d) => (typeof d === "number" ? [] : [d.widthMeV]));
  return {
    thresholdsMeV: [channelThresholdMeV(channel)],
    ...(widths.length > 0 && { sharpestMeV: Math.min(...widths) }),
    widthMeV: (massMeV) => strength * foldedFactor(channel, massMeV, options).value,
  };
}
