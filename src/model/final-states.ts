import { rootToNumber } from "../exact/signed-root.js";
import type { Hadron } from "../hadrons/hadron.js";
import { refuse } from "../require.js";
import { clebschGordan } from "../su2/clebsch-gordan.js";
import type { KnownParticle, KnownParticles } from "./known-particles.js";

/** A final state in charge states, with its part of what was measured. */
export interface FinalState {
  readonly daughters: readonly Hadron[];
  /** Parts of one parent's final states add up to 1. */
  readonly share: number;
}

/**
 * The charge states that a written final state means, for one parent.
 *
 * Names of charge states mean themselves. Two daughters of which one is a whole isospin multiplet are split by the squares
 * of SU(2) coefficients times `phaseSpace`, 0 where closed. With `withConjugate` each state and its charge conjugate count
 * alike, each written once.
 * @param phaseSpace - relative phase space of daughters, >= 0
 * @throws InputError for an isospin multiplet beside anything but one hadron, for `+ c.c.` of a parent that is not its own
 * antiparticle, or if nothing is left
 */
export function finalStates(
  parent: KnownParticle,
  names: readonly string[],
  particles: KnownParticles,
  withConjugate: boolean,
  phaseSpace: (daughters: readonly Hadron[]) => number,
): FinalState[] {
  const sets = names.map((name) => particles.states(name));
  const split = sets.some((set) => set.length > 1);
  if (split && sets.length !== 2)
    refuse("mode", "charge states of each of three or more daughters", names, "Write one mode for each.");
  const states = split ? isospinStates(parent, sets, phaseSpace) : [{ daughters: onlyOf(sets), weight: 1 }];
  if (!withConjugate) return normalised(states, names);
  if (parent.hadron.antiparticle !== null) {
    refuse("mode", "a parent that is its own antiparticle, for `+ c.c.`", parent.hadron.name);
  }
  const images = states.map(({ daughters, weight }) => ({
    daughters: daughters.map((daughter) => antiparticleOf(daughter, particles)),
    weight,
  }));
  return normalised([...states, ...images], names);
}

interface Weighted {
  readonly daughters: readonly Hadron[];
  readonly weight: number;
}

function onlyOf(sets: readonly (readonly KnownParticle[])[]): Hadron[] {
  return sets.map(([first]) => first!.hadron);
}

function isospinStates(
  parent: KnownParticle,
  sets: readonly (readonly KnownParticle[])[],
  phaseSpace: (daughters: readonly Hadron[]) => number,
): Weighted[] {
  const [first, second] = sets as [readonly KnownParticle[], readonly KnownParticle[]];
  return first.flatMap((a) =>
    second.flatMap((b) => {
      const weight = isospinSquare(parent, a, b) * phaseSpace([a.hadron, b.hadron]);
      return weight > 0 ? [{ daughters: [a.hadron, b.hadron], weight }] : [];
    }),
  );
}

/** Square of the SU(2) coefficient; 0 where charge is not conserved. */
function isospinSquare(parent: KnownParticle, a: KnownParticle, b: KnownParticle): number {
  for (const { twoI, hadron } of [parent, a, b]) {
    if (twoI === null)
      refuse("mode", "charge states, since one of the particles has no isospin", hadron.name);
  }
  const [r, m, n] = [parent, a, b].map(twoI3) as [number, number, number];
  if (m + n !== r || parent.twoI! < Math.abs(a.twoI! - b.twoI!) || parent.twoI! > a.twoI! + b.twoI!) return 0;
  if ((a.twoI! + b.twoI! - parent.twoI!) % 2 !== 0) return 0;
  return rootToNumber(clebschGordan(a.twoI!, m, b.twoI!, n, parent.twoI!, r)) ** 2;
}

/** Twice I3 = Q - (B + S + C)/2. */
function twoI3({ hadron }: KnownParticle): number {
  const { charge, baryonNumber, strangeness, charm } = hadron;
  return 2 * charge - baryonNumber - strangeness - charm;
}

/** The antiparticle of a hadron, or the hadron if it is its own. */
export function antiparticleOf({ antiparticle, name }: Hadron, particles: KnownParticles): Hadron {
  return particles.states(antiparticle ?? name)[0]!.hadron;
}

/** Equal final states brought together, and their weights divided by the sum. */
function normalised(states: readonly Weighted[], names: readonly string[]): FinalState[] {
  const merged = new Map<string, { daughters: readonly Hadron[]; weight: number }>();
  for (const { daughters, weight } of states) {
    const key = finalStateKey(daughters);
    const known = merged.get(key);
    if (known === undefined) merged.set(key, { daughters, weight });
    else known.weight += weight;
  }
  const total = [...merged.values()].reduce((sum, { weight }) => sum + weight, 0);
  if (total === 0)
    refuse("mode", "a final state that conserves charge and isospin and is open", names.join(" "));
  return [...merged.values()].map(({ daughters, weight }) => ({ daughters, share: weight / total }));
}

/** The same text for the same daughters in any order. */
export function finalStateKey(daughters: readonly Pick<Hadron, "name">[]): string {
  return daughters
    .map(({ name }) => name)
    .sort()
    .join(" ");
}
