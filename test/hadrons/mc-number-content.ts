import { refuse } from "../../src/require.js";

/** Charges in units of e/3 of the quarks d u s c b t, numbered 1 to 6 in Monte Carlo numbers. */
const THREE_CHARGE = [0, -1, 2, -1, 2, -1, 2];

/** What the digits of a Monte Carlo number say about a hadron. */
export interface McNumberContent {
  readonly charge: number;
  readonly strangeness: number;
  readonly charm: number;
  readonly baryonNumber: number;
  /** Twice the spin; null for K_S0 and K_L0, whose last digit is 0, and for spins above 4. */
  readonly twoJ: number | null;
}

/**
 * Charge, flavour and spin of a hadron from the digits +-n nr nL nq1 nq2 nq3 nJ of its Monte Carlo number.
 *
 * nJ = 2J + 1. Baryons have three quarks; mesons nq1 = 0 and, in the positive number, the heavier of the two is a quark
 * if it is up-type and an antiquark if it is down-type. Radial and orbital digits are not read: two generations of
 * codes for excited baryons are in use. K_S0 and K_L0 carry the flavour of neither K0 nor K0bar.
 * Source: S. Navas et al. (Particle Data Group), Phys. Rev. D 110, 030001 (2024), review "Monte Carlo particle
 * numbering scheme" (provenance: memory).
 * @throws InputError for a number that is no hadron of this scheme
 * @example mcNumberContent(-321).charge // -1
 */
export function mcNumberContent(mcNumber: number): McNumberContent {
  const sign = mcNumber < 0 ? -1 : 1;
  const digits = String(Math.abs(mcNumber)).padStart(7, "0");
  const [first, second, third, nJ] = [...digits.slice(-4)].map(Number) as [number, number, number, number];
  const isInteger = Number.isSafeInteger(mcNumber) && digits.length === 7;
  if (isInteger && first === 0 && second >= third && third > 0) return mesonContent(second, third, nJ, sign);
  if (isInteger && first > 0 && second > 0 && third > 0)
    return baryonContent([first, second, third], nJ, sign);
  if (mcNumber === K_LONG_MC_NUMBER)
    return { charge: 0, strangeness: 0, charm: 0, baryonNumber: 0, twoJ: null };
  refuse("mcNumberContent: mcNumber", "the Monte Carlo number of a meson or baryon", mcNumber);
}

/** Monte Carlo number of the long-lived neutral kaon, K_L0. */
const K_LONG_MC_NUMBER = 130;

function mesonContent(heavier: number, lighter: number, nJ: number, sign: number): McNumberContent {
  const flip = sign * (heavier % 2 === 0 ? 1 : -1);
  const isMixture = nJ === 0 && heavier === 3 && lighter === 1;
  const count = (flavour: number) =>
    isMixture ? 0 : flip * ((heavier === flavour ? 1 : 0) - (lighter === flavour ? 1 : 0)) || 0;
  return {
    charge: (flip * (THREE_CHARGE[heavier]! - THREE_CHARGE[lighter]!)) / 3 || 0,
    strangeness: -count(3) || 0,
    charm: count(4),
    baryonNumber: 0,
    twoJ: nJ === 0 ? null : nJ - 1,
  };
}

function baryonContent(quarks: readonly number[], nJ: number, sign: number): McNumberContent {
  const count = (flavour: number) => sign * quarks.filter((quark) => quark === flavour).length || 0;
  return {
    charge: (sign * quarks.reduce((sum, quark) => sum + THREE_CHARGE[quark]!, 0)) / 3 || 0,
    strangeness: -count(3) || 0,
    charm: count(4),
    baryonNumber: sign,
    twoJ: nJ === 0 ? null : nJ - 1,
  };
}
