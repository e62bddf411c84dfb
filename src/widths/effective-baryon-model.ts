import { refuse } from "../require.js";
import { integerPower } from "./integer-power.js";
import type { Vertex, WidthModelDefinition } from "./width-model-definition.js";

const WHERE = "width model d";

/**
 * Model `d`: effective Lagrangian for a baryon of spin J = n + 1/2 into a spin-1/2 baryon (first) and a spinless meson.
 *
 * K = n!/((2n+1)!! 4 pi) q (q/m_s)^2n (E +- m)/M, with + for L = n and - for L = n + 1; m and E are mass and energy of
 * the daughter baryon. The coupling has no derivative for J = 1/2 and n of them above, each divided by m_s.
 *
 * With `derivativeForm` 1 the coupling of J = 1/2 has one derivative, that of the meson field, too:
 * (f/m_s) Bbar gamma^mu Gamma R d_mu phi in place of g Bbar Gamma R phi, with Gamma = 1 for L = 0 and gamma_5 for L = 1.
 * The meson's momentum is P - p, and Dirac's equations of R (momentum P, mass M) and B (p, m) turn its slash into
 * M - m for Gamma = 1 and, since gamma_5 and slash P anticommute, -(M + m) for gamma_5. So g = f (M -+ m)/m_s, up to a
 * sign that all channels have in common; L alone chooses the sign of m, whatever the three parities are. M is the mass
 * at which R decays, so that at another mass than the nominal one the two forms differ.
 */
export const effectiveBaryonModel: WidthModelDefinition = {
  id: "d",
  title: "effective Lagrangian, baryon to spin-1/2 baryon and spinless meson",
  formula:
    "K = n!/((2n+1)!! 4 pi) q (q/m_s)^2n (E +- m)/M, J = n + 1/2, + for L = n, - for L = n + 1; " +
    "times ((M -+ m)/m_s)^2 for J = 1/2 with derivativeForm = 1",
  source: "sum over the spins of Dirac and Rarita-Schwinger spinors, done again numerically in the tests",
  provenance: "derived",
  options: [
    {
      name: "scaleMeV",
      unit: "MeV",
      default: 139.57,
      minimum: 1,
      maximum: 10_000,
      integer: false,
      meaning: "m_s, the scale of each derivative; the mass of the charged pion by custom",
    },
    {
      name: "derivativeForm",
      unit: "1",
      default: 0,
      minimum: 0,
      maximum: 1,
      integer: true,
      meaning:
        "1 for a derivative in the coupling of a parent of spin 1/2, 0 for none; " +
        "without effect for higher spins, whose couplings have derivatives in any case",
      absent: 0,
      concerns: ({ parent, daughters }) =>
        parent?.twoJ === 1 && daughters?.[0].twoJ === 1 && daughters[1].twoJ === 0,
    },
  ],
  requireVertex(vertex) {
    const n = derivatives(vertex);
    if (vertex.L === n || vertex.L === n + 1) return;
    refuse(
      `${WHERE}: L`,
      `${n} or ${n + 1} for a parent of spin ${2 * n + 1}/2`,
      vertex.L,
      "Check the spins.",
    );
  },
  amplitudeUnit: () => "1",
  factorMeV(vertex, options) {
    const n = derivatives(vertex);
    const isLowerWave = vertex.L === n;
    const scale = options["scaleMeV"]!;
    const addsDerivative = n === 0 && options["derivativeForm"] === 1;
    let prefactor = 1 / (4 * Math.PI);
    for (let k = 1; k <= n; k++) prefactor *= k / (2 * k + 1);
    return ({ parentMeV, firstMeV, momentumMeV }) => {
      const energyMeV = Math.hypot(firstMeV, momentumMeV);
      const sum = energyMeV + firstMeV;
      // E - m without the cancellation of the plain difference.
      const energyFactorMeV = isLowerWave ? sum : (momentumMeV / sum) * momentumMeV;
      const factor =
        prefactor * momentumMeV * integerPower(momentumMeV / scale, 2 * n) * (energyFactorMeV / parentMeV);
      if (!addsDerivative) return factor;
      const ratio = (isLowerWave ? parentMeV - firstMeV : parentMeV + firstMeV) / scale;
      return factor * ratio * ratio;
    };
  },
};

/** n = J - 1/2 of the parent; refuses spins this Lagrangian does not describe. */
function derivatives({ parent, daughters }: Vertex): number {
  if (parent === undefined || daughters === undefined) {
    refuse(`${WHERE}: vertex`, "spins of parent and daughters", "none", "Give spin and parity of all three.");
  }
  if (parent.twoJ % 2 !== 1 || daughters[0].twoJ !== 1 || daughters[1].twoJ !== 0) {
    const spins = [parent, ...daughters].map(({ twoJ }) => twoJ);
    const mend = "The baryon comes first. Use models a to c for other spins.";
    refuse(`${WHERE}: twice the spins`, "a half-integer spin into 1/2 and 0", spins, mend);
  }
  return (parent.twoJ - 1) / 2;
}
