import type { IsospinMultiplet } from "../su3/irrep.js";
import { findParticle } from "./catalogue.js";
import { stateCharge } from "./hadron.js";
import type { MultipletQuantumNumbers } from "./multiplet.js";
import type { AsymmetricError, Particle } from "./particle.js";

/** Measured values that hold for every charge state of an isospin multiplet. */
export interface MemberValues {
  readonly massMeV: number;
  readonly massErrorMeV: AsymmetricError;
  readonly widthMeV: number | null;
  readonly widthErrorMeV: AsymmetricError | null;
}

/**
 * The charge states of an isospin multiplet with one mass and width, by I3 descending.
 *
 * Monte Carlo numbers come from the catalogue where it knows the name, and are null elsewhere: numbers of excited baryons
 * cannot be computed, since two generations of codes are in use.
 * @param name - of the isospin multiplet, e.g. `Sigma(1775)`
 */
export function chargeStates(
  name: string,
  place: IsospinMultiplet,
  quantum: MultipletQuantumNumbers,
  values: MemberValues,
): Particle[] {
  const { baryonNumber, charm, twoJ, parity } = quantum;
  return Array.from({ length: place.twoI + 1 }, (_, index) => {
    const charge = stateCharge({ threeY: place.threeY, twoI3: place.twoI - 2 * index }, charm);
    const chargedName = chargeStateName(name, place.twoI, charge);
    const known = findParticle(chargedName);
    return {
      name: chargedName,
      mcNumber: known?.mcNumber ?? null,
      mcAliases: known?.mcAliases ?? [],
      massMeV: values.massMeV,
      massErrorMeV: values.massErrorMeV,
      widthMeV: values.widthMeV,
      widthErrorMeV: values.widthErrorMeV,
      twoI: place.twoI,
      twoJ,
      parity,
      cParity: known?.cParity ?? null,
      gParity: known?.gParity ?? null,
      charge,
      strangeness: (place.threeY - 3 * baryonNumber + charm) / 3,
      charm,
      baryonNumber,
      chargeAveraged: true,
    };
  });
}

/**
 * Name of one charge state: the name of the isospin multiplet and the charge; a neutral isosinglet keeps its bare name.
 *
 * The nucleons are `p` and `n`. Of a multiplet of antikaons (`Kbar`, `Kbar*(892)`) the neutral one keeps the bar, at the
 * end (`K0bar`), and the charged one needs none (`K-`).
 * @example chargeStateName("Sigma(1775)", 2, -1) // "Sigma(1775)-"
 */
export function chargeStateName(name: string, twoI: number, charge: number): string {
  if (name === "N" && charge === 1) return "p";
  if (name === "N" && charge === 0) return "n";
  if (twoI === 0 && charge === 0) return name;
  const bare = name.replace(/^([A-Z])bar/, "$1");
  const isBarred = bare !== name;
  const sign = charge === 0 ? "0" : (charge > 0 ? "+" : "-").repeat(Math.abs(charge));
  return isBarred && charge === 0 ? `${bare}${sign}bar` : `${bare}${sign}`;
}
