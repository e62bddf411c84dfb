import { refuse } from "../require.js";
import type { Kinematics, Vertex, WidthModelDefinition } from "./width-model-definition.js";

/** One coupling of mesons: which spins and wave it is for, the unit of its amplitude, and its K. */
interface MesonCoupling {
  readonly twoJ: readonly [number, number, number];
  readonly L: number;
  readonly unit: "1" | "MeV" | "1/MeV";
  readonly text: string;
  readonly factor: (kinematics: Kinematics, vectorMeV: number) => number;
}

const COUPLINGS: readonly MesonCoupling[] = [
  {
    twoJ: [2, 0, 0],
    L: 1,
    unit: "1",
    text: "vector to two spinless, A = g eps.(p1-p2)",
    factor: ({ parentMeV, momentumMeV: q }) => (q / (6 * Math.PI)) * (q / parentMeV) ** 2,
  },
  {
    twoJ: [4, 0, 0],
    L: 2,
    unit: "1/MeV",
    text: "tensor to two spinless, A = g eps_mn q^m q^n with q = (p1-p2)/2",
    factor: ({ parentMeV, momentumMeV: q }) => (q ** 3 / (60 * Math.PI)) * (q / parentMeV) ** 2,
  },
  {
    twoJ: [2, 2, 0],
    L: 1,
    unit: "1/MeV",
    text: "vector to vector or photon and spinless, antisymmetric tensor",
    factor: ({ momentumMeV: q }) => q ** 3 / (12 * Math.PI),
  },
  {
    twoJ: [0, 0, 0],
    L: 0,
    unit: "MeV",
    text: "scalar to two spinless, A = g",
    factor: ({ parentMeV, momentumMeV: q }) => q / (8 * Math.PI * parentMeV ** 2),
  },
  {
    twoJ: [2, 2, 0],
    L: 0,
    unit: "MeV",
    text: "axial vector to massive vector and spinless, A = g eps.eps'",
    factor: ({ parentMeV, momentumMeV: q }, vectorMeV) =>
      (q * (1 + (q / vectorMeV) ** 2 / 3)) / (8 * Math.PI * parentMeV ** 2),
  },
  {
    twoJ: [0, 2, 2],
    L: 1,
    unit: "1/MeV",
    text: "spinless to two vectors or photons, antisymmetric tensor",
    factor: ({ momentumMeV: q }) => q ** 3 / (4 * Math.PI),
  },
];

/**
 * Model `e`: effective Lagrangians for mesons; the spins and the wave of the vertex choose the coupling.
 *
 * The S wave of an axial vector needs a massive vector daughter, and contains the D wave that this coupling implies.
 */
export const effectiveMesonModel: WidthModelDefinition = {
  id: "e",
  title: "effective Lagrangian, mesons",
  formula: COUPLINGS.map(({ text }) => text).join("; "),
  source: "sum over the polarisations of one vertex each, done again numerically in the tests",
  provenance: "derived",
  options: [],
  requireVertex(vertex) {
    couplingOf(vertex);
  },
  amplitudeUnit: (vertex) => couplingOf(vertex).unit,
  factorMeV(vertex) {
    const { factor, L } = couplingOf(vertex);
    const isFirst = vertex.daughters![0].twoJ === 2;
    const needsMass = L === 0 && vertex.parent!.twoJ === 2;
    return (kinematics) => {
      const vectorMeV = isFirst ? kinematics.firstMeV : kinematics.secondMeV;
      if (vectorMeV === 0 && needsMass) {
        const mend = "This coupling is not gauge invariant; there is none for a photon here.";
        refuse("width model e: mass of the vector daughter in MeV", "a number > 0", vectorMeV, mend);
      }
      return factor(kinematics, vectorMeV);
    };
  },
};

function couplingOf({ L, parent, daughters }: Vertex): MesonCoupling {
  if (parent === undefined || daughters === undefined) {
    const mend = "Give spin and parity of all three.";
    refuse("width model e: vertex", "spins of parent and daughters", "none", mend);
  }
  const spins = daughters.map(({ twoJ }) => twoJ).sort((a, b) => b - a);
  const wanted = [parent.twoJ, ...spins];
  const found = COUPLINGS.find(
    (coupling) => coupling.L === L && coupling.twoJ.every((twoJ, k) => twoJ === wanted[k]),
  );
  if (found !== undefined) return found;
  const known = COUPLINGS.map((coupling) => coupling.text.split(",")[0]).join("; ");
  refuse(
    "width model e: [twice the spins, L]",
    `one of: ${known}`,
    [...wanted, L],
    "Use models a to c for others.",
  );
}
