import { describe, expect, test } from "vitest";
import type { Tables } from "../../src/completion/tables.js";
import { octetStudy, rowOf, tablesOf } from "./whole-study.js";

/** The octet, of whose N pi one charge state alone is measured, at a third of what the others want. */
const text = octetStudy("tables: { replicas: 40, seed: 2, widthModels: compared }\n").replace(
  "width: N(1675) -> N pi, value: 58 +- 3 MeV",
  "width: N(1675)+ -> p pi0, value: 6 +- 2 MeV",
);

/** An invented phi, with one charge state of its only isospin channel measured, above the threshold of the other. */
const PHI = (charge: string) => `couplet: 1
title: an invented phi
multiplets:
  v: { irrep: 8, spinParity: 1--, members: [{ name: w(1100), place: eta, mass: 1100 MeV, width: 20 +- 1 MeV }] }
decays:
  - { from: v, to: [pseudoscalar-octet, pseudoscalar-octet], L: 1, model: e }
measurements:
  - { fraction: w(1100) -> ${charge}, value: 0.3 +- 0.01, source: invented }
`;

function replicasOf({ replicas }: Tables, part: string): number[] {
  return replicas.flatMap((replica, k) => (replica.part === part ? [k] : []));
}

describe("charge states of an isospin channel of which one is measured", () => {
  const tables = tablesOf(text);
  const measured = rowOf(tables, "N(1675)+ -> p pi0");
  const IDS = ["N(1675)+ -> n pi+", "N(1675)0 -> p pi-", "N(1675)0 -> n pi0"];

  test("follow it by SU(2) and phase space, whatever the fit has, with its relative error and none from breaking", () => {
    expect(measured.measurement!.fitted! / 6).toBeGreaterThan(1.5);
    for (const id of IDS) {
      const row = rowOf(tables, id);
      const isospin = (row.isospin!.coefficient / measured.isospin!.coefficient) ** 2;
      // The threshold law of model a, L = 2.
      const phaseSpace = (row.momentumMeV / measured.momentumMeV) ** 5;
      expect(row.widthMeV.value / (6 * isospin * phaseSpace)).toBeCloseTo(1, 9);
      expect(row.widthMeV.plus / row.widthMeV.value).toBeCloseTo(1 / 3, 9);
      expect([row.widthMeV.breaking, row.fraction.breaking, row.widthMeV.branch]).toEqual([0, 0, 0]);
      expect([row.origin, row.flags.includes("isospin-split"), row.sources]).toEqual([
        "measured",
        true,
        ["invented"],
      ]);
      expect(row.measurement!.share * 6).toBeCloseTo(row.widthMeV.value, 9);
    }
    expect([measured.widthMeV.value, measured.flags.includes("isospin-split")]).toEqual([6, false]);
    // Other isospin channels keep theirs.
    const other = rowOf(tables, "N(1675)+ -> p eta");
    expect(other.origin).toBe("predicted");
    expect(other.widthMeV.breaking).toBeGreaterThan(0);
  });

  test("move with it in every replica: not at all by breaking, and by the same draw of the data", () => {
    for (const part of ["data", "breaking"]) {
      const replicas = replicasOf(tables, part);
      expect(replicas).toHaveLength(40);
      for (const replica of replicas) {
        const own = measured.replicaRatios![replica]!;
        if (part === "breaking") expect(own).toBe(1);
        for (const id of IDS) expect(rowOf(tables, id).replicaRatios![replica]).toBeCloseTo(own, 6);
      }
    }
  });

  test("leave to breaking what is left: the remainder has no error of theirs", () => {
    const plain = tablesOf(octetStudy("").replace("N(1675) -> N pi,", "N(1675) -> N pi, use: fit,"));
    const remainder = (t: Tables) => rowOf(t, "N(1675)+ -> (remainder)").fraction.breaking;
    expect(remainder(tables)).toBeLessThan(remainder(plain) / 5);
  });
});

test("K0 K0bar follows K+ K-, and back, as the ratio of momenta cubed", () => {
  const given = tablesOf(PHI("K+ K-"));
  const row = rowOf(given, "w(1100) -> K0 K0bar");
  const back = tablesOf(PHI("K0 K0bar"));
  const other = rowOf(back, "w(1100) -> K+ K-");
  expect([row.origin, row.fraction.breaking, other.fraction.breaking]).toEqual(["measured", 0, 0]);
  const ratio = (row.momentumMeV / other.momentumMeV) ** 3;
  expect(row.fraction.value / (0.3 * ratio)).toBeCloseTo(1, 6);
  expect(other.fraction.value * ratio).toBeCloseTo(0.3, 6);
});

test("a fraction is carried over to another total width as a width", () => {
  const members = "chargeStates: { N(1675)+: { width: 145 MeV }, N(1675)0: { width: 290 MeV } }";
  const tables = tablesOf(
    octetStudy("")
      .replace("width: 145 +- 15 MeV }", `width: 145 +- 15 MeV, ${members} }`)
      .replace(
        "width: N(1675) -> N pi, value: 58 +- 3 MeV",
        "fraction: N(1675)+ -> n pi+, value: 0.3 +- 0.03",
      ),
  );
  const [plus, zero] = ["N(1675)+ -> n pi+", "N(1675)0 -> p pi-"].map((id) => rowOf(tables, id)) as [
    ReturnType<typeof rowOf>,
    ReturnType<typeof rowOf>,
  ];
  const phaseSpace = (zero.momentumMeV / plus.momentumMeV) ** 5;
  expect(zero.widthMeV.value / (0.3 * 145 * phaseSpace)).toBeCloseTo(1, 9);
  expect(zero.fraction.value).toBeCloseTo(zero.widthMeV.value / 290, 12);
});

test("what the study keeps out of the table settles nothing", () => {
  const tables = tablesOf(text.replace("value: 6 +- 2 MeV,", "value: 6 +- 2 MeV, use: fit,"));
  const row = rowOf(tables, "N(1675)0 -> p pi-");
  expect(row.origin).toBe("predicted");
  expect(row.widthMeV.breaking).toBeGreaterThan(0.1 * row.widthMeV.value);
});
