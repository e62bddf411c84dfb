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

/** Tries before a draw of daughter masses gives up; the least efficient channel needs thousands near its threshold. */
const MOST_TRIES = 10_000_000;

/**
 * Masses of both daughters of a channel, drawn jointly at a mass of the parent: chance ~ rho(w1) rho(w2) K(M, w1, w2).
 *
 * By rejection, with random numbers used in this order: for each unstable daughter, first to second, a mass from the
 * part of its grid below what the other leaves at its lowest mass (u times that part's chance, through `drawMass`);
 * pairs heavier than the parent are thrown away; one more number v accepts a pair if v K(lowest masses) < K(w1, w2),
 * and otherwise all is drawn again. Stable daughters take no number; with two of them none is drawn.
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
  const lowest = daughters.map(lowestMassMeV) as [number, number];
  const factor = (masses: readonly [number, number]) =>
    model.kinematicFactorMeV(parentMeV, masses[0], masses[1], vertex);
  const bound = factor(lowest);
  if (bound === 0) {
    refuse("drawDaughterMasses: parentMeV", `a mass above ${lowest[0] + lowest[1]}`, parentMeV);
  }
  if (typeof daughters[0] === "number" && typeof daughters[1] === "number") return lowest;
  const part = daughters.map((daughter, k) => {
    if (typeof daughter === "number") return 0;
    const grid = grids[k];
    if (grid === undefined) refuse(`drawDaughterMasses: grid of daughter ${k + 1}`, "a draw grid", "none");
    return cumulativeAt(grid, parentMeV - lowest[1 - k]!);
  });
  const draw = (k: 0 | 1) =>
    typeof daughters[k] === "number" ? daughters[k] : drawMass(grids[k]!, uniform() * part[k]!);
  for (let tries = 0; tries < MOST_TRIES; tries++) {
    const masses: [number, number] = [draw(0), draw(1)];
    if (masses[0] + masses[1] < parentMeV && uniform() * bound < factor(masses)) return masses;
  }
  return refuse(
    "drawDaughterMasses: parentMeV",
    "a mass at which the channel is not all but closed",
    parentMeV,
  );
}
