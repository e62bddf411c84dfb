import { refuse } from "../require.js";
import type { State } from "../su3/state.js";
import { type AsymmetricError, antiparticleName, type Particle } from "./particle.js";

/** A pure flavour state of one multiplet. */
export interface Leg {
  readonly multiplet: string;
  readonly state: State;
}

/** One pure state in a hadron, with its real weight. */
export interface ContentTerm {
  readonly leg: Leg;
  readonly weight: number;
}

/**
 * A hadron of definite charge and what it is made of: always a superposition of pure flavour states, even of one term.
 *
 * Weights are real, their squares sum to 1, and their signs refer to the phases of convention `deswart-v1`. `null`
 * means: not known or, for `cParity`, not defined; for `antiparticle`, that the hadron is its own.
 */
export interface Hadron {
  readonly name: string;
  readonly mcNumber: number | null;
  readonly mcAliases: readonly number[];
  readonly massMeV: number;
  readonly massErrorMeV: AsymmetricError;
  readonly widthMeV: number | null;
  readonly widthErrorMeV: AsymmetricError | null;
  readonly chargeAveraged: boolean;
  readonly twoJ: number;
  readonly parity: 1 | -1;
  readonly cParity: 1 | -1 | null;
  readonly charge: number;
  readonly baryonNumber: number;
  readonly strangeness: number;
  readonly charm: number;
  readonly antiparticle: string | null;
  readonly content: readonly ContentTerm[];
  readonly notes: readonly string[];
}

/**
 * A hadron from a particle and the superposition it is taken to be.
 *
 * @param content - at least one term; squares of the weights sum to 1
 * @throws InputError if spin or parity is not known, the weights are not normalised, or a pure state in the content has
 * another charge, strangeness or isospin projection than the particle
 */
export function makeHadron(
  particle: Particle,
  content: readonly ContentTerm[],
  notes: readonly string[] = [],
): Hadron {
  const { twoI, gParity, twoJ, parity, ...rest } = particle;
  if (twoJ === null || parity === null) {
    refuse(`${particle.name}: spin and parity`, "both known", [twoJ, parity], "State them in the study.");
  }
  const norm = content.reduce((sum, { weight }) => sum + weight * weight, 0);
  if (!(Math.abs(norm - 1) < 1e-9)) {
    refuse(
      `${particle.name}: sum of squared weights`,
      "1",
      norm,
      "Divide the weights by the root of their sum.",
    );
  }
  for (const { leg } of content) requireSameCharges(particle, leg);
  return { ...rest, twoJ, parity, antiparticle: antiparticleName(particle), content, notes };
}

/**
 * Three times the hypercharge of SU(3), 3Y = 3B + 3S - C: the charm quark is a singlet but carries baryon number 1/3.
 *
 * @example threeHypercharge({ baryonNumber: 0, strangeness: 0, charm: 1 }) // -1, for D+ and D0
 */
export function threeHypercharge(of: Pick<Particle, "baryonNumber" | "strangeness" | "charm">): number {
  return 3 * of.baryonNumber + 3 * of.strangeness - of.charm;
}

/**
 * Electric charge of a state in a multiplet of given charm, Q = I3 + Y/2 + 2C/3.
 *
 * @example stateCharge({ threeY: -1, twoI3: 1 }, 1) // 1, for D+
 */
export function stateCharge(state: Pick<State, "threeY" | "twoI3">, charm: number): number {
  return (3 * state.twoI3 + state.threeY + 4 * charm) / 6;
}

function requireSameCharges(particle: Particle, { multiplet, state }: Leg): void {
  const charge = stateCharge(state, particle.charm);
  const threeY = threeHypercharge(particle);
  if (charge === particle.charge && threeY === state.threeY) return;
  refuse(
    `${particle.name} in ${multiplet}: [charge, 3Y]`,
    JSON.stringify([charge, state.threeY]),
    [particle.charge, threeY],
    "Check the place of the particle in the multiplet.",
  );
}
