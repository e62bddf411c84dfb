import { refuse } from "../require.js";
import { cumulativeAt, type DrawGrid, drawMass } from "./draw-mass.js";
import { lowestMassMeV, type TwoBodyChannel } from "./folded-width.js";
import { channelFractions } from "./parent-line-shape.js";
import type { RunningWidth } from "./running-width.js";

/**
 * A channel drawn at a mass that has been drawn before; a channel is never drawn again for another mass.
 *
 * The widths at that mass are added up in the order of the channels until they pass u times their sum.
 * @param u - uniform in [0, 1)
 * @returns the index of the channel, one with a width > 0
 * @throws InputError for a mass at which no channel is open
 */
export function drawChannel(channels: readonly RunningWidth[], massMeV: number, u: number): number {
  const fractions = channelFractions(channels, massMeV);
  let sum = 0;
  let last = -1;
  for (const [k, fraction] of fractions.entries()) {
    if (fraction === 0) continue;
    sum += fraction;
    last = k;
    if (u < sum) return k;
  }
  if (last < 0) refuse("drawChannel: massMeV", "a mass at which a channel is open", massMeV);
  // Rounding may leave the sum just below 1.
  return last;
}

/** What a daughter's mass is drawn from: its only mass in MeV, or the draw grid of its line shape. */
export type MassSource = number | DrawGrid;

/** Lowest mass in MeV that a daughter can be drawn with. */
export function lowestDrawnMeV(source: MassSource): number {
  return typeof source === "number" ? source : source.originMeV;
}

/** Tries after which a draw takes the one that came nearest; the least efficient channels need thousands. */
const MOST_TRIES = 100_000;

/**
 * Masses of a decay's daughters, drawn jointly: chance ~ rho(w1) ... rho(wn) K(w1, ..., wn) where they fit into the parent.
 *
 * By rejection, with random numbers used in this order: for each unstable daughter, first to last, a mass from the part
 * of its grid below what the others leave at their lowest masses (u times that part's chance, through `drawMass`);
 * masses that do not fit are thrown away; one more number v accepts the others if v K(lowest masses) < K(w), and otherwise
 * all is drawn again. Stable daughters take no number; with none but them none is drawn.
 *
 * After 100 000 tries the one with the largest K/v is taken. That is the one accepted first if the bound is lowered
 * step by step, so that its chance is the right one but for terms of order 1/tries.
 * @param K - not larger than at the lowest masses; a common factor does not matter
 * @param parentMeV - above the sum of the lowest masses
 * @param uniform - independent numbers in [0, 1)
 * @returns in MeV, in the order of the daughters; their sum is below the parent's mass
 */
export function drawMassesJointly(
  sources: readonly MassSource[],
  K: (massesMeV: readonly number[]) => number,
  parentMeV: number,
  uniform: () => number,
): number[] {
  const lowest = sources.map(lowestDrawnMeV);
  if (sources.every((source) => typeof source === "number")) return lowest;
  const part = sources.map((source, k) =>
    typeof source === "number" ? 0 : cumulativeAt(source, parentMeV - sum(lowest.filter((_, i) => i !== k))),
  );
  const bound = K(lowest);
  let nearest = { masses: lowest, ratio: 0 };
  for (let tries = 0; tries < MOST_TRIES; tries++) {
    const masses = sources.map((source, k) =>
      typeof source === "number" ? source : drawMass(source, uniform() * part[k]!),
    );
    if (!(sum(masses) < parentMeV)) continue;
    const v = uniform();
    const factor = K(masses);
    if (v * bound < factor) return masses;
    if (factor > nearest.ratio * v) nearest = { masses, ratio: factor / v };
  }
  return nearest.masses;
}

function sum(numbers: readonly number[]): number {
  return numbers.reduce((total, number) => total + number, 0);
}

/**
 * Masses of both daughters of a channel, drawn jointly at a mass of the parent: chance ~ rho(w1) rho(w2) K(M, w1, w2), by
 * `drawMassesJointly`.
 *
 * K falls as a daughter gets heavier, in every model, so K at the lowest masses bounds it. The one exception, model d
 * in an S wave with a baryon lighter than half the parent, passes the bound by less than 1 % for baryons above 0.45 M.
 * @param grids - the draw grid of each unstable daughter's line shape; undefined for a stable one
 * @param uniform - independent numbers in [0, 1)
 * @returns in MeV, in the order of the daughters; their sum is below the parent's mass
 * @throws InputError for a channel closed at this mass, or an unstable daughter without a grid
 */
export function drawDaughterMasses(
  { model, vertex, daughters }: TwoBodyChannel,
  grids: readonly [DrawGrid | undefined, DrawGrid | undefined],
  parentMeV: number,
  uniform: () => number,
): [number, number] {
  const lowest = daughters.map(lowestMassMeV);
  const factor = ([first, second]: readonly number[]) =>
    model.kinematicFactorMeV(parentMeV, first!, second!, vertex);
  if (factor(lowest) === 0) {
    refuse("drawDaughterMasses: parentMeV", `a mass above ${sum(lowest)}`, parentMeV);
  }
  const sources = daughters.map((daughter, k): MassSource => {
    const source = typeof daughter === "number" ? daughter : grids[k];
    if (source === undefined) refuse(`drawDaughterMasses: grid of daughter ${k + 1}`, "a draw grid", "none");
    return source;
  });
  return drawMassesJointly(sources, factor, parentMeV, uniform) as [number, number];
}
