import { integrateOverLineShape, type LineShape, type LineShapeOptions, lineShape } from "./line-shape.js";
import type { QuadratureOptions } from "./quadrature.js";
import { type RunningWidth, totalWidth } from "./running-width.js";

/** A resonance with its channels: the line shape of their sum, and their fractions of it in both meanings. */
export interface ParentLineShape {
  readonly shape: LineShape;
  readonly channels: readonly RunningWidth[];
  /** Gamma_i(m0)/Gamma(m0), in the order of the channels; they add up to 1. */
  readonly nominalFractions: readonly number[];
  /** Integral of rho(w)/N Gamma_i(w)/Gamma(w) over the window, in the order of the channels; they add up to 1. */
  readonly integratedFractions: readonly number[];
}

/**
 * Upper end of a parent's window in nominal widths above its mass. Its S-wave channels have no barrier, and their shares
 * keep drifting with the window far beyond where a Breit-Wigner form means anything.
 */
const WINDOW_WIDTHS = 3;

/**
 * The line shape of a parent whose total width is the sum of all its channels, each running in its own way.
 *
 * The window reaches from the lowest threshold of all channels to m0 + 3 Gamma(m0) by default, and
 * the integrated fractions depend on it. A remainder is a channel like any
 * other (`powerWidth`; power 0 for a constant one). The fraction integrated over the line shape is the chance of the
 * channel in a sample of decays; near a threshold it differs from the one at the nominal mass.
 * @param massMeV - m0
 * @param channels - at least one of them open at m0
 * @throws InputError for what `lineShape` refuses
 */
export function parentLineShape(
  massMeV: number,
  channels: readonly RunningWidth[],
  options: LineShapeOptions & QuadratureOptions = {},
): ParentLineShape {
  const shape = lineShape(massMeV, totalWidth(channels), { windowWidths: WINDOW_WIDTHS, ...options });
  const norm = integrateOverLineShape(shape, () => 1, {}, options).value;
  return {
    shape,
    channels,
    nominalFractions: channelFractions(channels, massMeV),
    integratedFractions: channels.map((channel) => {
      const fraction = (w: number) => channel.widthMeV(w) / shape.running.widthMeV(w);
      return integrateOverLineShape(shape, fraction, {}, options).value / norm;
    }),
  };
}

/** Fractions of the channels at one mass, Gamma_i(w)/Gamma(w); all 0 where no channel is open. */
export function channelFractions(channels: readonly RunningWidth[], massMeV: number): number[] {
  const widths = channels.map((channel) => channel.widthMeV(massMeV));
  const total = widths.reduce((sum, width) => sum + width, 0);
  return widths.map((width) => (total > 0 ? width / total : 0));
}
