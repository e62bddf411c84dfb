import { refuse } from "../require.js";
import { integerPower } from "./integer-power.js";
import type { Vertex, WidthModelDefinition } from "./width-model-definition.js";

const WHERE = "width model d";

/**
 * Model `d`: effective Lagrangian for a baryon of spin J = n + 1/2 into a spin-1/2 baryon (first) and a spinless meson.
 *
 * K = n!/((2n+1)!! 4 pi) q (q/m_s)^2n (E +- m)/M, with + for L = n and - for L = n + 1; m and E are mass and energy of
 * the daughter baryon. The coupling has no derivative for J = 1/2 and n of them above, each divided by m_s.
 */
export const effectiveBaryonModel: WidthModelDefinition = {
  id: "d",
  title: "effective Lagrangian, baryon to spin-1/2 baryon and spinless meson",
  formula: "K = n!/((2n+1)!! 4 pi) q (q/m_s)^2n (E +- m)/M, J = n + 1/2, + for L = n, - for L = n + 1",
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
    let prefactor = 1 / (4 * Math.PI);
    for (let k = 1; k <= n; k++) prefactor *= k / (2 * k + 1);
    return ({ parentMeV, firstMeV, momentumMeV }) => {
      const energyMeV = Math.hypot(firstMeV, momentumMeV);
      const sum = energyMeV + firstMeV;
      // E - m without the cancellation of the plain difference.
      const energyFactorMeV = isLowerWave ? sum : (momentumMeV / sum) * momentumMeV;
      return (
        prefactor * momentumMeV * integerPower(momentumMeV / scale, 2 * n) * (energyFactorMeV / parentMeV)
      );
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
