import { canonicalName, catalogueParticles, findParticle } from "./catalogue.js";
import { chargeStateName } from "./charge-states.js";
import type { Particle } from "./particle.js";

/**
 * A particle of the catalogue whose isospin multiplet has a name, or undefined.
 *
 * Reads short names as `findParticle` does: `rho` is `rho(770)`. The name of a single charge state of several, such as `p`
 * or `Sigma+`, is that of no isospin multiplet.
 * @example namesake("Sigma")!.name // "Sigma+"
 */
export function namesake(name: string): Particle | undefined {
  return catalogueParticles().find(
    (particle) => canonicalName(chargeStateName(name, particle.twoI, particle.charge)) === particle.name,
  );
}

/** Whether a name is that of one charge state of several, such as `p` or `Sigma+`. */
export function isChargeStateName(name: string): boolean {
  return findParticle(name) !== undefined && namesake(name) === undefined;
}
