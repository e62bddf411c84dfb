import { integerPower } from "./integer-power.js";
import type { WidthModelDefinition } from "./width-model-definition.js";

/** Model `b`: threshold law cut off at a range, K = (q^2/(q^2 + X^2))^L q M_N/M. */
export const rangeModel: WidthModelDefinition = {
  id: "b",
  title: "momentum with a range",
  formula: "K = (q^2/(q^2 + X^2))^L q M_N/M",
  source:
    "S. L. Glashow and A. H. Rosenfeld, Phys. Rev. Lett. 10 (1963) 192; R. D. Tripp et al., Nucl. Phys. B3 (1967) 10; " +
    "N. P. Samios, M. Goldberg and B. T. Meadows, Rev. Mod. Phys. 46 (1974) 49",
  provenance: "memory",
  options: [
    {
      name: "rangeMeV",
      unit: "MeV",
      default: 350,
      minimum: 1,
      maximum: 10_000,
      integer: false,
      meaning: "X, the momentum where the growth with q^2L ends",
    },
    {
      name: "nucleonMassMeV",
      unit: "MeV",
      default: 938.9,
      minimum: 1,
      maximum: 10_000,
      integer: false,
      meaning: "M_N, the scale of the parent mass",
    },
  ],
  requireVertex: () => {},
  amplitudeUnit: () => "1",
  factorMeV({ L }, options) {
    const range = options["rangeMeV"]!;
    const nucleonMass = options["nucleonMassMeV"]!;
    return ({ parentMeV, momentumMeV }) => {
      const ratio = range / momentumMeV;
      return (momentumMeV * (nucleonMass / parentMeV)) / integerPower(1 + ratio * ratio, L);
    };
  },
};
