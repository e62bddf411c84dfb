import { refuse, requirePositive } from "../require.js";
import { integrateAcross, type Quadrature, type QuadratureOptions } from "./quadrature.js";
import type { RunningWidth } from "./running-width.js";

/** The distribution of a resonance's mass, with everything it was made from. */
export interface LineShape {
  /** Nominal mass m0. */
  readonly massMeV: number;
  /** Nominal width, the running width at m0. */
  readonly widthMeV: number;
  readonly running: RunningWidth;
  /** Lowest and highest mass; the density is 0 outside. */
  readonly windowMeV: readonly [low: number, high: number];
  /** N, by which the density is divided; 1 where the line shape was asked for as it is. */
  readonly normalisation: number;
  /** rho(w)/N in 1/MeV. */
  densityPerMeV(massMeV: number): number;
}

/** How to normalise a line shape and where to end it. */
export interface LineShapeOptions {
  /** Divide by the integral over the window (default), or take N = 1. */
  readonly normalised?: boolean;
  /** Upper end of the window in nominal widths above m0; default 10. */
  readonly windowWidths?: number;
}

/**
 * Relativistic line shape of a resonance with a running width, from its lowest threshold to m0 + 10 Gamma(m0).
 *
 * rho(w) = (2w/pi) w Gamma(w)/[(m0^2 - w^2)^2 + w^2 Gamma(w)^2], divided by N, its integral over the window (relative
 * error 1e-10). N differs from 1: the window cuts a tail off, and a running width changes the tails. N and window are
 * part of the result and belong into any table made with it.
 * Source: S. Navas et al. (Particle Data Group), Phys. Rev. D 110, 030001 (2024), review "Resonances"; provenance memory.
 * @param massMeV - m0, in MeV, > 0
 * @param running - total width against mass; positive at m0
 * @throws InputError for a state that does not decay at its nominal mass, or a window that is not positive
 */
export function lineShape(massMeV: number, running: RunningWidth, options: LineShapeOptions = {}): LineShape {
  const { normalised = true, windowWidths = 10 } = options;
  requirePositive("lineShape: massMeV", massMeV, "Give the nominal mass in MeV.");
  requirePositive("lineShape: windowWidths", windowWidths, "10 is usual.");
  const widthMeV = running.widthMeV(massMeV);
  if (!(widthMeV > 0)) {
    const mend = "At least one channel must be open at the nominal mass.";
    refuse("lineShape: width in MeV at the nominal mass", "a number > 0", widthMeV, mend);
  }
  const low = running.thresholdsMeV[0]!;
  const high = massMeV + windowWidths * widthMeV;
  const withNorm = (normalisation: number): LineShape => ({
    massMeV,
    widthMeV,
    running,
    windowMeV: [low, high],
    normalisation,
    densityPerMeV(w) {
      if (!(w > low && w <= high)) return 0;
      const wGamma = w * running.widthMeV(w);
      const offShell = (massMeV - w) * (massMeV + w);
      return ((2 * w) / (Math.PI * normalisation)) * (wGamma / (offShell * offShell + wGamma * wGamma));
    },
  });
  const plain = withNorm(1);
  return normalised ? withNorm(integrateOverLineShape(plain, () => 1).value) : plain;
}

/** A part of a line shape's window, for an integral. */
export interface LineShapeRange {
  readonly fromMeV?: number;
  readonly toMeV?: number;
  /** More masses where the integrand is not smooth. */
  readonly breakpointsMeV?: readonly number[];
}

/**
 * Integral of a function times the density of a line shape, over its window or the part of it in a range.
 *
 * Thresholds inside the range are breakpoints and the peak is straightened, so that a state of any width is integrated
 * to the accuracy asked for. An empty range gives 0.
 */
export function integrateOverLineShape(
  shape: LineShape,
  f: (massMeV: number) => number,
  range: LineShapeRange = {},
  options: QuadratureOptions = {},
): Quadrature {
  const low = Math.max(shape.windowMeV[0], range.fromMeV ?? 0);
  const high = Math.min(shape.windowMeV[1], range.toMeV ?? Number.POSITIVE_INFINITY);
  if (!(high > low)) return { value: 0, error: 0, evaluations: 0 };
  const inside = [...shape.running.thresholdsMeV, ...(range.breakpointsMeV ?? [])]
    .filter((w) => w > low && w < high)
    .sort((a, b) => a - b);
  const peak = { at: shape.massMeV, halfWidth: shape.widthMeV / 2 };
  return integrateAcross((w) => shape.densityPerMeV(w) * f(w), [low, ...inside, high], peak, options);
}
