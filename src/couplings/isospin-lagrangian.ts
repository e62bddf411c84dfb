import type { IsospinMultiplet } from "../su3/irrep.js";
import type { State } from "../su3/state.js";
import { type FAndDForm, fAndDForm } from "./f-and-d.js";
import { FormMaker } from "./form.js";
import { MatrixConvention } from "./matrix-convention.js";
import { STRONG } from "./operator.js";
import { type DecayScheme, reducedCouplings } from "./reduced-coupling.js";

/**
 * One constant of the isospin Lagrangian of octet baryons and mesons, exactly in D and F of the matrix Lagrangian.
 *
 * The constant is D's coefficient times D plus F's times F; with g = g(N N pi) = D + F and alpha = F/(F+D) it is
 * g (D (1 - alpha) + F alpha).
 */
export interface IsospinConstant extends FAndDForm {
  /** e.g. `N Lambda K`. */
  readonly name: string;
  /** The vertex it multiplies, e.g. `Nbar K Lambda + h.c.` */
  readonly vertex: string;
}

const octet = { p: 1, q: 1 };
const state = (threeY: number, twoI: number, twoI3: number): State => ({
  irrep: octet,
  threeY,
  twoI,
  twoI3,
});

/** The neutral or doubly diagonal states that stand in the reference channels; every vertex holds one with weight 1. */
const P = state(3, 1, 1);
const SIGMA_PLUS = state(0, 2, 2);
const SIGMA_ZERO = state(0, 2, 0);
const LAMBDA = state(0, 0, 0);
const XI_ZERO = state(-3, 1, 1);
const PI_ZERO = SIGMA_ZERO;
const ETA = LAMBDA;
const K_PLUS = P;
const K_ZERO_BAR = XI_ZERO;

/** Constant, vertex, and a charge channel [R, B, M] whose term Rbar B M enters that vertex with coefficient +1. */
const VERTICES: readonly (readonly [string, string, readonly [State, State, State]])[] = [
  ["N N pi", "Nbar tau.pi N", [P, P, PI_ZERO]],
  ["Lambda Sigma pi", "(Lambdabar Sigma + h.c.).pi", [LAMBDA, SIGMA_ZERO, PI_ZERO]],
  ["Sigma Sigma pi", "-i (Sigmabar x Sigma).pi", [SIGMA_PLUS, SIGMA_PLUS, PI_ZERO]],
  ["Xi Xi pi", "Xibar tau.pi Xi", [XI_ZERO, XI_ZERO, PI_ZERO]],
  ["N N eta8", "Nbar N eta8", [P, P, ETA]],
  ["Lambda Lambda eta8", "Lambdabar Lambda eta8", [LAMBDA, LAMBDA, ETA]],
  ["Sigma Sigma eta8", "Sigmabar.Sigma eta8", [SIGMA_PLUS, SIGMA_PLUS, ETA]],
  ["Xi Xi eta8", "Xibar Xi eta8", [XI_ZERO, XI_ZERO, ETA]],
  ["N Lambda K", "Nbar K Lambda + h.c.", [P, LAMBDA, K_PLUS]],
  ["N Sigma K", "Nbar tau K.Sigma + h.c.", [P, SIGMA_ZERO, K_PLUS]],
  ["Xi Lambda K", "Xibar Kc Lambda + h.c.", [XI_ZERO, LAMBDA, K_ZERO_BAR]],
  ["Xi Sigma K", "Xibar tau Kc.Sigma + h.c.", [XI_ZERO, SIGMA_ZERO, K_ZERO_BAR]],
];

/** Id of the convention of the isospin Lagrangian's constants, as tables name it. */
export const ISOSPIN_LAGRANGIAN = "de-swart-isospin-lagrangian";

/** How its isospin multiplets are filled with the fields of the matrix convention. */
export const ISOSPIN_MULTIPLETS =
  "in the fields of couplet-matrix-v1: N = (p, n), Xi = (Xi0, -Xi-), K = (K+, K0), Kc = (K0bar, -K-), Sigma.pi = Sigma+ pi- + Sigma0 pi0 + Sigma- pi+";

/**
 * The 12 constants of the isospin Lagrangian, from the exact forms of 8 -> 8 x 8.
 *
 * Doublets N = (p, n), Xi = (Xi0, Xi-), K = (K+, K0), Kc = (K0bar, -K-); Sigma.pi = Sigma+ pi- + Sigma0 pi0 +
 * Sigma- pi+. Its fields are those of the matrix convention except for this Xi-, which is minus the one there, so that
 * Xi is a plain doublet. For decays of another octet the same constants hold, its members taken for the barred fields.
 * Source: J. J. de Swart, Rev. Mod. Phys. 35 (1963) 916, section on baryon-baryon-meson couplings; doublets as in
 * Th. A. Rijken, V. G. J. Stoks, Y. Yamamoto, Phys. Rev. C 59 (1999) 21, nucl-th/9807082 (provenance: memory).
 */
export function isospinConstants(): IsospinConstant[] {
  const scheme = octetScheme();
  const maker = new FormMaker(scheme, reducedCouplings(scheme));
  const matrices = new MatrixConvention();
  return VERTICES.map(([name, vertex, channel]) => {
    const [initial, ...finals] = channel;
    const { D, F } = fAndDForm(maker.chargeForm(initial, finals).terms, scheme);
    return {
      name,
      vertex,
      D: matrices.coefficient(D, channel)!,
      F: matrices.coefficient(F, channel)!,
    };
  });
}

/**
 * Name of the constant that an isospin channel of 8 -> 8 x 8 depends on: that of its vertex, or of the conjugate one.
 *
 * @param channel - parent, baryon and meson; or any three octets in their places
 * @returns undefined for a channel of no vertex
 */
export function isospinConstantName(
  channel: readonly [IsospinMultiplet, IsospinMultiplet, IsospinMultiplet],
): string | undefined {
  const [parent, baryon, { threeY, twoI }] = channel;
  const conjugated = [baryon, parent, { threeY: threeY === 0 ? 0 : -threeY, twoI }] as const;
  const found = VERTICES.find(([, , vertex]) =>
    [channel, conjugated].some((places) => places.every((place, k) => samePlace(place, vertex[k]!))),
  );
  return found?.[0];
}

function samePlace(a: IsospinMultiplet, b: IsospinMultiplet): boolean {
  return a.threeY === b.threeY && a.twoI === b.twoI;
}

function octetScheme(): DecayScheme {
  const multiplet = (id: string) => ({ id, irrep: octet });
  return { from: multiplet("R"), to: [multiplet("B"), multiplet("M")], operator: STRONG, L: 1, twoS: 1 };
}
