import { multiplyRoots, rootToNumber, type SignedRoot, signedRoot, ZERO_ROOT } from "../exact/signed-root.js";
import { refuse } from "../require.js";
import { irrepName } from "../su3/irrep.js";
import type { FormTerm } from "./form.js";
import type { DecayScheme } from "./reduced-coupling.js";

/**
 * F and D in place of the two reduced couplings of a decay 8 -> 8 x 8: g_S = sqrt(20/3) D, g_A = sqrt(12) F.
 *
 * They are the constants of L = sqrt2 { D Tr(Bbar {M, B}) + F Tr(Bbar [M, B]) }, with A^2 the square of its vertices
 * summed over charges; then N -> N pi has A^2 = 3 (D + F)^2. The two factors follow from completeness of the traceless
 * N x N matrices, N = 3: summed over an orthonormal basis of B and M, |Tr(E {E_B, E_M})|^2 is 2 (N - 4/N) and
 * |Tr(E [E_M, E_B])|^2 is 2N. The common sign of F and D is free; it is such that D + F > 0 gives N -> N pi a positive
 * isospin amplitude. Exchanging baryon and meson changes the sign of F, and of F/D; so does Tr(Bbar [B, M]).
 *
 * In the Review of Particle Physics D = (sqrt30/40) g1 and F = (sqrt6/24) g2, with g1 and g2 = sqrt8 g_S and sqrt8 g_A.
 * Source: S. Navas et al. (Particle Data Group), Phys. Rev. D 110, 030001 (2024), review "SU(3) isoscalar factors and
 * representation matrices" (provenance: memory).
 */
export interface FAndDForm {
  readonly D: SignedRoot;
  readonly F: SignedRoot;
}

/** A value with its standard deviation. */
export interface Estimate {
  readonly value: number;
  readonly error: number;
}

/** F, D and their ratios from fitted couplings. The ratios are null where their denominator is 0. */
export interface FAndD {
  readonly D: Estimate;
  readonly F: Estimate;
  /** Covariance matrix of (D, F). */
  readonly covariance: readonly [readonly [number, number], readonly [number, number]];
  readonly fOverD: Estimate | null;
  /** F/(F+D). */
  readonly alphaF: Estimate | null;
  /** D/(F+D) = 1 - alphaF. */
  readonly alphaD: Estimate | null;
}

const N = 3;

/** g_S for D = 1, sqrt(20/3): the exact factor between symmetric coupling and D. */
export function symmetricCouplingOfD(): SignedRoot {
  return signedRoot(1, 2 * 2 * (N * N - 4), N);
}

/** g_A for F = 1, sqrt(12): the exact factor between antisymmetric coupling and F. */
export function antisymmetricCouplingOfF(): SignedRoot {
  return signedRoot(1, 2 * 2 * N, 1);
}

/** Whether F and D are defined for a decay: the strong interaction (a singlet) and an octet into two octets. */
export function hasFAndD({ from, to, operator }: DecayScheme): boolean {
  const isOctet = ({ irrep }: DecayScheme["from"]) => irrep.p === 1 && irrep.q === 1;
  const isSinglet = operator.parts.every(({ state }) => state.irrep.p === 0 && state.irrep.q === 0);
  return isSinglet && to.length === 2 && [from, ...to].every(isOctet);
}

/**
 * The terms of a form of a decay 8 -> 8 x 8 as coefficients of D and F: A = D's times D plus F's times F.
 *
 * @param terms - of a charge or isospin form; they count in the list g(8_1), g(8_2)
 * @throws InputError if the scheme is not a strong decay 8 -> 8 x 8
 * @example fAndDForm(maker.isospinForm(nucleon, [nucleon, pion]).terms, maker.scheme) // { D: sqrt(3), F: sqrt(3) }
 */
export function fAndDForm(terms: readonly FormTerm[], scheme: DecayScheme): FAndDForm {
  if (!hasFAndD(scheme)) {
    const irreps = [scheme.from, ...scheme.to].map(({ irrep }) => irrepName(irrep));
    refuse("fAndDForm: scheme", "a strong decay of an octet into two octets", irreps);
  }
  const coefficient = (index: number) => terms.find(({ reduced }) => reduced === index)?.c ?? ZERO_ROOT;
  return {
    D: multiplyRoots(symmetricCouplingOfD(), coefficient(0)),
    F: multiplyRoots(antisymmetricCouplingOfF(), coefficient(1)),
  };
}

/**
 * F, D, F/D and alpha from the couplings g_S = g(8_1) and g_A = g(8_2), with linear propagation of their errors.
 *
 * F/D = (sqrt5/3) g_A/g_S. The schools differ in alpha: `alphaF` = F/(F+D) is that of de Swart, `alphaD` = 1 - alphaF.
 * @param covariance - 2 x 2, of (g_S, g_A), in the square of their unit
 * @throws InputError for numbers that are not finite or a matrix that is not 2 x 2
 */
export function fAndD(gS: number, gA: number, covariance: readonly (readonly number[])[]): FAndD {
  const entries = covariance.flat();
  if (covariance.length !== 2 || entries.length !== 4 || ![gS, gA, ...entries].every(Number.isFinite)) {
    refuse("fAndD", "two finite couplings and their 2 x 2 covariance", [gS, gA, covariance]);
  }
  const scaleS = rootToNumber(symmetricCouplingOfD());
  const scaleA = rootToNumber(antisymmetricCouplingOfF());
  const D = gS / scaleS;
  const F = gA / scaleA;
  const [[ss, sa], [as, aa]] = covariance as [[number, number], [number, number]];
  const ofDF = [
    [ss / scaleS ** 2, sa / (scaleS * scaleA)],
    [as / (scaleS * scaleA), aa / scaleA ** 2],
  ] as const;
  const estimate = (value: number, byD: number, byF: number): Estimate => {
    const variance = byD * byD * ofDF[0][0] + byD * byF * (ofDF[0][1] + ofDF[1][0]) + byF * byF * ofDF[1][1];
    return { value, error: Math.sqrt(Math.max(0, variance)) };
  };
  const sum = F + D;
  return {
    D: estimate(D, 1, 0),
    F: estimate(F, 0, 1),
    covariance: ofDF,
    fOverD: D === 0 ? null : estimate(F / D, -F / D ** 2, 1 / D),
    alphaF: sum === 0 ? null : estimate(F / sum, -F / sum ** 2, D / sum ** 2),
    alphaD: sum === 0 ? null : estimate(D / sum, F / sum ** 2, -D / sum ** 2),
  };
}
