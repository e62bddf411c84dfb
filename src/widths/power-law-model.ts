import { integerPower } from "./integer-power.js";
import type { WidthModelDefinition } from "./width-model-definition.js";

/**
 * Model `a`: the bare threshold law, K = q_ref (q/q_ref)^(2L+1) (M_ref/M)^n.
 *
 * n = 1 is the two-body phase space q/M times q^2L; n = 2 has one more power of the mass.
 */
export const powerLawModel: WidthModelDefinition = {
  id: "a",
  title: "power of the momentum",
  formula: "K = q_ref (q/q_ref)^(2L+1) (M_ref/M)^n",
  source: "textbook threshold law Gamma ~ q^(2L+1)",
  provenance: "common practice",
  options: [
    {
      name: "n",
      unit: "1",
      default: 2,
      minimum: 0,
      maximum: 2,
      integer: true,
      meaning: "power of M_ref/M",
    },
    {
      name: "referenceMomentumMeV",
      unit: "MeV",
      default: 1000,
      minimum: 1,
      maximum: 10_000,
      integer: false,
      meaning: "q_ref, the scale of the momentum",
    },
    {
      name: "referenceMassMeV",
      unit: "MeV",
      default: 1000,
      minimum: 1,
      maximum: 10_000,
      integer: false,
      meaning: "M_ref, the scale of the parent mass",
    },
  ],
  requireVertex: () => {},
  amplitudeUnit: () => "1",
  factorMeV({ L }, options) {
    const reference = options["referenceMomentumMeV"]!;
    const referenceMass = options["referenceMassMeV"]!;
    const massPower = options["n"]!;
    const order = 2 * L + 1;
    const perReference = 1 / reference;
    return ({ parentMeV, momentumMeV }) =>
      reference *
      integerPower(momentumMeV * perReference, order) *
      integerPower(referenceMass / parentMeV, massPower);
  },
};
