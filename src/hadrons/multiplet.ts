import { refuse } from "../require.js";
import { hasMultiplet, type Irrep, irrepName } from "../su3/irrep.js";
import type { State } from "../su3/state.js";
import { type Hadron, makeHadron, threeHypercharge } from "./hadron.js";
import type { Particle } from "./particle.js";

/** One isospin multiplet of hadrons, by I3 descending. */
export interface Member {
  readonly name: string;
  readonly threeY: number;
  readonly twoI: number;
  readonly hadrons: readonly Hadron[];
}

/** Quantum numbers common to all states of an SU(3) multiplet. */
export interface MultipletQuantumNumbers {
  readonly irrep: Irrep;
  readonly twoJ: number;
  readonly parity: 1 | -1;
  readonly baryonNumber: number;
  readonly charm: number;
}

/** An SU(3) multiplet of hadrons. Members may be missing; there is never more than one at a place of the irrep. */
export interface Multiplet extends MultipletQuantumNumbers {
  readonly id: string;
  readonly members: readonly Member[];
}

/** What a member is made from: its particles by I3 descending, and what must be said about their content. */
export interface MemberParticles {
  readonly name: string;
  readonly particles: readonly Particle[];
  readonly notes?: readonly string[];
}

/**
 * A multiplet of pure states, from the particles of each member.
 *
 * Places follow from strangeness and the number of charge states. Every state has weight 1: the phase of a physical
 * hadron is the one of its state in convention `deswart-v1`.
 * @throws InputError if a member has no place in the irrep, or one that is taken; if its particles are not the whole
 * isospin multiplet by falling charge; or if their quantum numbers are not those of the multiplet
 */
export function assembleMultiplet(
  id: string,
  quantum: MultipletQuantumNumbers,
  members: readonly MemberParticles[],
): Multiplet {
  const assembled: Member[] = [];
  for (const member of members) {
    const next = assembleMember(id, quantum, member);
    const taken = assembled.find(({ threeY, twoI }) => threeY === next.threeY && twoI === next.twoI);
    if (taken !== undefined) {
      const mend = "An irrep has one isospin multiplet at each place.";
      refuse(`${id}: ${next.name}`, `a place that ${taken.name} has not taken`, placeText(next), mend);
    }
    assembled.push(next);
  }
  return { id, ...quantum, members: assembled };
}

function assembleMember(id: string, quantum: MultipletQuantumNumbers, member: MemberParticles): Member {
  const { name, particles, notes = [] } = member;
  const first = particles[0];
  if (first === undefined) refuse(`${id}: ${name}`, "at least one particle", particles);
  const place = { threeY: threeHypercharge(first), twoI: particles.length - 1 };
  if (!hasMultiplet(quantum.irrep, place)) {
    refuse(`${id}: ${name}`, `an isospin multiplet of the ${irrepName(quantum.irrep)}`, placeText(place));
  }
  const hadrons = particles.map((particle, index) => {
    requireQuantumNumbers(id, quantum, particle);
    const state: State = { irrep: quantum.irrep, ...place, twoI3: place.twoI - 2 * index };
    return makeHadron(particle, [{ leg: { multiplet: id, state }, weight: 1 }], notes);
  });
  return { name, ...place, hadrons };
}

function requireQuantumNumbers(id: string, quantum: MultipletQuantumNumbers, particle: Particle): void {
  for (const key of ["twoJ", "parity", "baryonNumber", "charm"] as const) {
    if (particle[key] === quantum[key]) continue;
    refuse(`${id}: ${particle.name}: ${key}`, `${quantum[key]}, that of the multiplet`, particle[key]);
  }
}

/** The place of an isospin multiplet in words, `Y=-1 I=1/2`. */
export function placeText({ threeY, twoI }: { readonly threeY: number; readonly twoI: number }): string {
  const fraction = (num: number, den: number) => (num % den === 0 ? `${num / den}` : `${num}/${den}`);
  return `Y=${fraction(threeY, 3)} I=${fraction(twoI, 2)}`;
}

/** The hadron of a multiplet in a pure state, or undefined if the member is missing. */
export function hadronOfState(multiplet: Multiplet, state: State): Hadron | undefined {
  const member = multiplet.members.find(({ threeY, twoI }) => threeY === state.threeY && twoI === state.twoI);
  return member?.hadrons[(state.twoI - state.twoI3) / 2];
}

/**
 * Mean mass of the charge states of a member, in MeV: each charge state counts once.
 *
 * For amplitudes per isospin channel; useless near threshold, where only the masses of the charge states will do.
 */
export function isospinAveragedMassMeV(member: Member): number {
  return member.hadrons.reduce((sum, { massMeV }) => sum + massMeV, 0) / member.hadrons.length;
}
