import { barrierFactorSquared } from "./barrier.js";
import type { WidthModelDefinition } from "./width-model-definition.js";

/** hbar c in MeV fm, which turns a radius in fm into one in 1/MeV; fixed by the SI of 2019, here to ten digits. */
const HBAR_C_MEV_FM = 197.3269804;

/** Model `c`: phase space with a centrifugal barrier, K = F_L^2(R q) q M_ref/M, F normalised to 1 at large R q. */
export const barrierModel: WidthModelDefinition = {
  id: "c",
  title: "centrifugal barrier",
  formula: "K = F_L^2(R q) q M_ref/M, F_L^2 = z^L/P_L(z), z = (R q/hbar c)^2",
  source:
    "F. von Hippel and C. Quigg, Phys. Rev. D 5 (1972) 624; " +
    'S. Navas et al. (Particle Data Group), Phys. Rev. D 110, 030001 (2024), review "Resonances"',
  provenance: "memory",
  options: [
    {
      name: "radiusFm",
      unit: "fm",
      default: 1,
      minimum: 0.01,
      maximum: 10,
      integer: false,
      meaning: "R, the radius of the barrier; 0.2 to 1 fm is usual",
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
    const radius = options["radiusFm"]! / HBAR_C_MEV_FM;
    const referenceMass = options["referenceMassMeV"]!;
    return ({ parentMeV, momentumMeV }) => {
      const rootZ = radius * momentumMeV;
      return momentumMeV * (referenceMass / parentMeV) * barrierFactorSquared(L, rootZ * rootZ);
    };
  },
};
