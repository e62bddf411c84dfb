import { couplet } from "../../src/gen/couplet.js";

import v1 = couplet.v1;

const { KINEMATICS_OPEN, KINEMATICS_CLOSED, KINEMATICS_FOLDED } = v1.Kinematics;

/** Hadrons of the made table: name, number, mass in MeV, antiparticle. */
const HADRONS: readonly (readonly [string, number | null, number, string | null])[] = [
  ["p", 2212, 938.3, "pbar"],
  ["n", 2112, 939.6, "nbar"],
  ["pi+", 211, 139.6, "pi-"],
  ["pi-", -211, 139.6, "pi+"],
  ["pi0", 111, 135, null],
  ["K-", -321, 493.7, "K+"],
  ["K+", 321, 493.7, "K-"],
  ["K0", 311, 497.6, "K0bar"],
  ["K*(892)-", -323, 892, "K*(892)+"],
  ["Sigma0", 3212, 1192.6, "Sigma0bar"],
];

/** An invented parent as plain values: hadron, total width in MeV, rows of daughters, parts per 10^9 and kinematics. */
export interface MadeParent {
  readonly hadron: readonly [string, number | null, number, string | null];
  readonly widthMeV: number;
  readonly rows: readonly (readonly [string, number, v1.Kinematics?])[];
}

export const DELTA: MadeParent = {
  hadron: ["Delta(1232)+", 2214, 1232, "Delta(1232)+bar"],
  widthMeV: 117,
  rows: [
    ["p pi0", 666_666_667],
    ["n pi+", 333_333_333],
    ["Sigma0 K+", 0, KINEMATICS_CLOSED],
  ],
};

export const K_STAR: MadeParent = {
  hadron: ["K*(892)+", 323, 892, "K*(892)-"],
  widthMeV: 50,
  rows: [
    ["K0 pi+", 666_666_666],
    ["K+ pi0", 333_333_334],
  ],
};

/** Too light for Delta pi at nominal masses: its decay goes through the width of the Delta. */
export const FOLDED: MadeParent = {
  hadron: ["X(1300)0", 9_900_001, 1300, "X(1300)0bar"],
  widthMeV: 80,
  rows: [
    ["p pi-", 400_000_000],
    ["Delta(1232)+ pi-", 600_000_000, KINEMATICS_FOLDED],
  ],
};

/** Decays through the width of an antiparticle whose particle has the table. */
export const CONJUGATE: MadeParent = {
  hadron: ["Y(1800)0", 9_900_002, 1800, "Y(1800)0bar"],
  widthMeV: 90,
  rows: [["p K*(892)-", 1_000_000_000, KINEMATICS_FOLDED]],
};

/** Half of its width has no daughters. */
export const HALF: MadeParent = {
  hadron: ["Z(1500)+", null, 1500, "Z(1500)+bar"],
  widthMeV: 100,
  rows: [
    ["p pi0", 200_000_000],
    ["n pi+", 300_000_000],
    ["", 500_000_000],
  ],
};

/** Decay tables of invented parents, as they come out of a file. */
export function madeDecays(parents: readonly MadeParent[]): v1.DecayTables {
  const message: v1.DecayTables.$Properties = {
    kind: "couplet.v1.DecayTables",
    header: { schemaMinor: 0, producer: "couplet 9.9.9", title: "made\nup", convention: "deswart-v1" },
    parents: parents.map(parentMessage),
    externals: HADRONS.map(hadronMessage),
  };
  return v1.DecayTables.decode(v1.DecayTables.encode(message).finish());
}

function hadronMessage([name, mcNumber, mass, antiparticle]: (typeof HADRONS)[number]) {
  return { name, mcNumber, mass, antiparticle };
}

function parentMessage({ hadron, widthMeV, rows }: MadeParent): v1.Parent.$Properties {
  const name = hadron[0];
  return {
    hadron: hadronMessage(hadron),
    totalWidth: widthMeV,
    rows: rows.map(([daughters, partsPerBillion, kinematics]) => ({
      id: `${name} -> ${daughters === "" ? "(remainder)" : daughters}`,
      daughters: daughters === "" ? [] : daughters.split(" ").map((daughter) => ({ name: daughter })),
      partsPerBillion,
      kinematics: kinematics ?? KINEMATICS_OPEN,
    })),
  };
}
