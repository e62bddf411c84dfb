import data from "./data/light-particles.json";
import type { Hadron } from "./hadron.js";

/**
 * The photon, a lepton, K_S0 or K_L0 by its name, or undefined; what final states have beside hadrons of definite flavour.
 *
 * Such a particle has no flavour content. K_S0 and K_L0 have no strangeness either: half their weight is K0.
 * @example findLightParticle("gamma")!.massMeV // 0
 */
export function findLightParticle(name: string): Hadron | undefined {
  const found = data.particles.find((particle) => particle.name === name);
  if (found === undefined) return undefined;
  const { leptonNumber: _, ...particle } = found;
  return {
    ...particle,
    parity: particle.parity as 1 | -1,
    cParity: particle.cParity as 1 | -1 | null,
    massErrorMeV: { plus: 0, minus: 0 },
    widthErrorMeV: null,
    chargeAveraged: false,
    mcAliases: [],
    baryonNumber: 0,
    strangeness: 0,
    charm: 0,
    content: [],
    notes: [],
  };
}

/** Names of all particles that `findLightParticle` knows. */
export function lightParticleNames(): string[] {
  return data.particles.map(({ name }) => name);
}

/** Lepton number of a particle by its name; 0 for everything that is no lepton. */
export function leptonNumber(name: string): number {
  return data.particles.find((particle) => particle.name === name)?.leptonNumber ?? 0;
}
