import { refuse, requirePositive } from "../require.js";
import type { WidthModel } from "./width-model.js";
import type { Vertex } from "./width-model-definition.js";

/**
 * A partial or total width as a function of the mass of what decays: closed form, grid or folded, all look like this.
 *
 * `widthMeV` is 0 at and below the first threshold, never negative and never NaN.
 */
export interface RunningWidth {
  /** Masses in MeV where a channel opens, ascending; quadratures put their breakpoints there. */
  readonly thresholdsMeV: readonly number[];
  /** Width of the sharpest rise besides the thresholds, if there is one: that of the narrowest unstable daughter. */
  readonly sharpestMeV?: number;
  widthMeV(massMeV: number): number;
}

/** A two-body channel with daughters of fixed mass. */
export interface StableChannel {
  readonly model: WidthModel;
  readonly vertex: Vertex;
  readonly firstMeV: number;
  readonly secondMeV: number;
}

/** The barrier radius for line shapes, 5/GeV in fm; without a barrier a P-wave line shape falls too slowly. */
export const LINE_SHAPE_RADIUS_FM = 0.9866349;

/**
 * Gamma(w) = strength K(w): the width of a channel whose coupling is known, also where it is closed at the nominal mass.
 *
 * @param strength - s |A|^2, in the square of the model's amplitude unit, >= 0
 * @throws InputError for a negative strength, or a vertex or mass the model refuses
 */
export function couplingWidth(channel: StableChannel, strength: number): RunningWidth {
  requireStrength("couplingWidth: strength", strength);
  const { model, vertex, firstMeV, secondMeV } = channel;
  // Refuses an impossible channel here rather than at the first use.
  model.kinematicFactorMeV(firstMeV + secondMeV + 1, firstMeV, secondMeV, vertex);
  return {
    thresholdsMeV: [firstMeV + secondMeV],
    widthMeV: (massMeV) => strength * model.kinematicFactorMeV(massMeV, firstMeV, secondMeV, vertex),
  };
}

/**
 * Gamma(w) = Gamma(m0) K(w)/K(m0): the width of a channel that is open and known at one mass.
 *
 * With model `c` this is Gamma(m0) (k/k0)^(2l+1) (m0/w) P_l(R^2 k0^2)/P_l(R^2 k^2); model `a`, n = 1, is its limit R = 0.
 * Source: S. Navas et al. (Particle Data Group), Phys. Rev. D 110, 030001 (2024), review "Resonances"; provenance memory.
 * @param widthMeV - Gamma(m0), in MeV, >= 0
 * @param atMassMeV - m0, in MeV, above the channel's threshold
 * @throws InputError for a channel closed at m0, or what `couplingWidth` refuses
 */
export function widthThrough(channel: StableChannel, widthMeV: number, atMassMeV: number): RunningWidth {
  const { model, vertex, firstMeV, secondMeV } = channel;
  const factor = model.kinematicFactorMeV(atMassMeV, firstMeV, secondMeV, vertex);
  if (factor === 0) {
    const mend = "Give the coupling of a channel that is closed at the nominal mass.";
    refuse("widthThrough: atMassMeV", `a mass above the threshold ${firstMeV + secondMeV}`, atMassMeV, mend);
  }
  return couplingWidth(channel, widthMeV / factor);
}

/**
 * A width that grows with a power of the distance from its threshold, Gamma(w) = Gamma(m0) ((w - t)/(m0 - t))^power.
 *
 * For what has no two-body law: power 0 is a constant remainder, power 2 the phase space of three particles just above
 * threshold (power (3n - 5)/2 for n particles).
 * @param widthMeV - Gamma(m0), in MeV, >= 0
 * @param atMassMeV - m0, in MeV, above the threshold
 * @param thresholdMeV - t, in MeV, >= 0
 * @throws InputError for a mass or width out of range, or a negative power
 */
export function powerWidth(
  widthMeV: number,
  atMassMeV: number,
  thresholdMeV: number,
  power: number,
): RunningWidth {
  for (const [name, value] of Object.entries({ widthMeV, thresholdMeV, power })) {
    if (!Number.isFinite(value) || value < 0) refuse(`powerWidth: ${name}`, "a finite number >= 0", value);
  }
  requirePositive("powerWidth: atMassMeV - thresholdMeV", atMassMeV - thresholdMeV, "The channel is closed.");
  return {
    thresholdsMeV: [thresholdMeV],
    widthMeV: (massMeV) =>
      massMeV > thresholdMeV
        ? widthMeV * ((massMeV - thresholdMeV) / (atMassMeV - thresholdMeV)) ** power
        : 0,
  };
}

/** The sum of widths; its thresholds are those of all parts, its sharpest rise the sharpest of them. */
export function totalWidth(parts: readonly RunningWidth[]): RunningWidth {
  const thresholds = new Set(parts.flatMap(({ thresholdsMeV }) => thresholdsMeV));
  const rises = parts.flatMap(({ sharpestMeV }) => (sharpestMeV === undefined ? [] : [sharpestMeV]));
  return {
    thresholdsMeV: [...thresholds].sort((a, b) => a - b),
    ...(rises.length > 0 && { sharpestMeV: Math.min(...rises) }),
    widthMeV: (massMeV) => parts.reduce((sum, part) => sum + part.widthMeV(massMeV), 0),
  };
}

/** Checks s |A|^2 for a finite number >= 0; throws InputError otherwise. */
export function requireStrength(where: string, strength: number): void {
  if (Number.isFinite(strength) && strength >= 0) return;
  refuse(where, "a finite number >= 0", strength, "Give s |A|^2.");
}
