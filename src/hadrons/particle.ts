/** Upward and downward error of a value, both >= 0. */
export interface AsymmetricError {
  readonly plus: number;
  readonly minus: number;
}

/**
 * One particle of definite charge: its measured values and quantum numbers, nothing of how it is built.
 *
 * `null` means: not known, or not defined for this particle. Strangeness is +1 for K+ and D_s+, charm +1 for D+.
 */
export interface Particle {
  readonly name: string;
  readonly mcNumber: number | null;
  /** Other numbers in use for it, in another edition of the scheme or in a framework; read, never written. */
  readonly mcAliases: readonly number[];
  readonly massMeV: number;
  readonly massErrorMeV: AsymmetricError;
  readonly widthMeV: number | null;
  readonly widthErrorMeV: AsymmetricError | null;
  readonly twoI: number;
  readonly twoJ: number | null;
  readonly parity: 1 | -1 | null;
  readonly cParity: 1 | -1 | null;
  readonly gParity: 1 | -1 | null;
  readonly charge: number;
  readonly strangeness: number;
  readonly charm: number;
  readonly baryonNumber: number;
  /** Mass and width are the ones of the isospin multiplet, not of this charge state. */
  readonly chargeAveraged: boolean;
}

/**
 * Name of the antiparticle, or null for a particle that is its own.
 *
 * Charged mesons change the sign at the end (`pi+`, `pi-`); everything else gains or loses a `bar` at the end
 * (`K0bar`, `pbar`, `Sigma+bar`). A meson without charge, strangeness and charm is its own antiparticle.
 */
export function antiparticleName(particle: Particle): string | null {
  const { name, charge, strangeness, charm, baryonNumber } = particle;
  if (baryonNumber === 0 && charge === 0 && strangeness === 0 && charm === 0) return null;
  if (baryonNumber === 0 && charge !== 0) {
    return name.replace(/[+-]+$/, (signs) => signs.replace(/./g, (sign) => (sign === "+" ? "-" : "+")));
  }
  return name.endsWith("bar") ? name.slice(0, -"bar".length) : `${name}bar`;
}

/**
 * The antiparticle: same mass, width, spin and isospin, opposite charges and Monte Carlo number; null if it is its own.
 *
 * The parity of an antifermion is the opposite one.
 */
export function antiparticle(particle: Particle): Particle | null {
  const name = antiparticleName(particle);
  if (name === null) return null;
  const { mcNumber, parity, baryonNumber } = particle;
  return {
    ...particle,
    name,
    mcNumber: mcNumber === null ? null : -mcNumber,
    mcAliases: particle.mcAliases.map((alias) => -alias),
    parity: parity !== null && baryonNumber % 2 !== 0 ? (-parity as 1 | -1) : parity,
    charge: opposite(particle.charge),
    strangeness: opposite(particle.strangeness),
    charm: opposite(particle.charm),
    baryonNumber: opposite(baryonNumber),
  };
}

/** -n without the negative zero. */
function opposite(n: number): number {
  return n === 0 ? 0 : -n;
}
