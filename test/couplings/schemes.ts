import { FormMaker } from "../../src/couplings/form.js";
import { type Operator, STRONG } from "../../src/couplings/operator.js";
import { type DecayScheme, reducedCouplings } from "../../src/couplings/reduced-coupling.js";
import { catalogueMultiplet } from "../../src/hadrons/catalogue-multiplet.js";
import type { Multiplet } from "../../src/hadrons/multiplet.js";
import { parseIrrep } from "../../src/su3/irrep.js";
import type { State } from "../../src/su3/state.js";

/** A scheme between irreps given by name, each standing for a multiplet of that name. */
export function schemeOf(from: string, to: readonly string[], operator: Operator = STRONG): DecayScheme {
  const multiplet = (name: string) => ({ id: name, irrep: parseIrrep(name) });
  return { from: multiplet(from), to: to.map(multiplet), operator, L: 1, twoS: 1 };
}

/** The form maker of a scheme with all its reduced couplings. */
export function makerOf(from: string, to: readonly string[], operator: Operator = STRONG): FormMaker {
  const scheme = schemeOf(from, to, operator);
  return new FormMaker(scheme, reducedCouplings(scheme));
}

export const BARYONS = catalogueMultiplet("baryon-octet");
export const DECUPLET = catalogueMultiplet("baryon-decuplet");
export const MESONS = catalogueMultiplet("pseudoscalar-octet");

/** The pure state of a hadron of a multiplet. */
export function stateOf(multiplet: Multiplet, name: string): State {
  const hadron = multiplet.members
    .flatMap(({ hadrons }) => hadrons)
    .find((candidate) => candidate.name === name);
  if (hadron === undefined) throw new Error(`no ${name} in ${multiplet.id}`);
  return hadron.content[0]!.leg.state;
}

/** The isospin multiplet of a member of a multiplet. */
export function placeOfMember(multiplet: Multiplet, name: string): { threeY: number; twoI: number } {
  const { threeY, twoI } = multiplet.members.find((member) => member.name === name)!;
  return { threeY, twoI };
}

/**
 * First-order breaking by the mass of the strange quark: the component Y = 0, I = 0 of an octet.
 *
 * Source: M. Muraskin and S. L. Glashow, Phys. Rev. 132 (1963) 482 (provenance: memory).
 */
export const MASS_BREAKING: Operator = {
  name: "mass-breaking",
  parts: [{ state: { irrep: { p: 1, q: 1 }, threeY: 0, twoI: 0, twoI3: 0 }, weight: 1 }],
  complex: false,
};
