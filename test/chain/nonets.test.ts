import { describe, expect, test } from "vitest";
import { fitOf, parameterValue, rowWidthMeV, studyText, tablesOf } from "./run.js";

const relative = (value: number, wanted: number) => Math.abs(value / wanted - 1);

// Expected numbers: one coupling, closed forms for effective Lagrangians, masses of the Particle Data Group from memory;
// computed by an independent program with traces of flavour matrices.
describe("the vector nonet from the rho", () => {
  const tables = tablesOf(studyText("vector-nonet"));

  test("K* -> K pi comes out at 41.9 and 43.1 MeV, phi -> K+ K- at 1.85 MeV", () => {
    expect(relative(rowWidthMeV(tables, "K*(892)+", ["K+ pi0", "K0 pi+"]), 41.916)).toBeLessThan(1e-3);
    expect(relative(rowWidthMeV(tables, "K*(892)0", ["K+ pi-", "K0 pi0"]), 43.121)).toBeLessThan(1e-3);
    expect(relative(rowWidthMeV(tables, "phi(1020)", ["K+ K-"]), 1.8503)).toBeLessThan(1e-3);
  });

  test("phi -> K+ K- over its neutral partner is 1.516 with the masses of the charge states", () => {
    const ratio =
      rowWidthMeV(tables, "phi(1020)", ["K+ K-"]) / rowWidthMeV(tables, "phi(1020)", ["K0 K0bar"]);
    expect(relative(ratio, 1.5156)).toBeLessThan(1e-3);
  });

  test("the rho couples to no pion pair with an eta, nor the neutral rho to two neutral pions", () => {
    const ids = tables.parents.flatMap(({ rows }) => rows.map(({ id }) => id));
    expect(ids.filter((id) => id.startsWith("rho"))).not.toContain("rho(770)+ -> pi+ eta");
    expect(ids.filter((id) => id.includes("pi0 pi0"))).toEqual([]);
  });

  test("one coupling of F type is left by exchange and C parity", () => {
    const [minimum] = fitOf(studyText("vector-nonet")).minima;
    expect(minimum!.parameters.filter(({ kind }) => kind === "coupling").map(({ name }) => name)).toEqual([
      "g(8_2)",
    ]);
  });
});

describe("the tensor nonet from f2 -> pi pi", () => {
  const text = studyText("tensor-nonet");
  const tables = tablesOf(text);

  test.each([
    ["f2(1270)", ["K+ K-", "K0 K0bar"], 5.83174],
    ["f2(1270)", ["eta eta"], 0.74425],
    ["a2(1320)+", ["K+ K0bar"], 8.12248],
    ["K2*(1430)+", ["K+ eta"], 0.09166],
    ["f2'(1525)", ["K+ K-", "K0 K0bar"], 49.53955],
    ["f2'(1525)", ["eta eta"], 5.07728],
  ] as const)("%s -> %s has %d MeV", (parent, daughters, widthMeV) => {
    expect(relative(rowWidthMeV(tables, parent, daughters), widthMeV)).toBeLessThan(2e-3);
  });

  // The independent program took charged pions in these; the momenta to the fifth power make the difference.
  test.each([
    ["a2(1320)+", ["pi+ eta"], 27.47674],
    ["K2*(1430)+", ["K+ pi0", "K0 pi+"], 60.93362],
  ] as const)("%s -> %s is near %d MeV", (parent, daughters, widthMeV) => {
    expect(relative(rowWidthMeV(tables, parent, daughters), widthMeV)).toBeLessThan(1e-2);
  });

  test("the quark-line rule leaves one coupling, and f2' does not decay into pions", () => {
    const [minimum] = fitOf(text).minima;
    expect(minimum!.parameters.filter(({ kind }) => kind === "coupling")).toHaveLength(1);
    expect(rowWidthMeV(tables, "f2'(1525)", ["pi+ pi-", "pi0 pi0"])).toBeLessThan(1e-20);
  });

  test("pi0 pi0 has half the width of pi+ pi- at equal masses", () => {
    const ratio = rowWidthMeV(tables, "f2(1270)", ["pi0 pi0"]) / rowWidthMeV(tables, "f2(1270)", ["pi+ pi-"]);
    expect(ratio).toBeCloseTo(0.5, 12);
  });

  test("the ladder misses the data by far: it is an estimate, not a fit", () => {
    // Particle Data Group averages, from memory: 8.6 +- 0.8, 75 +- 4 and 5.2 +- 0.8 MeV.
    const measured = text.replace(
      "measurements:\n",
      `measurements:
  - { width: "f2(1270) -> K Kbar", value: 8.6 +- 0.8 MeV, source: "PDG, from memory" }
  - { width: "f2'(1525) -> K Kbar", value: 75 +- 4 MeV, source: "PDG, from memory" }
  - { width: "a2(1320) -> K Kbar", value: 5.2 +- 0.8 MeV, source: "PDG, from memory" }
`,
    );
    const [minimum] = fitOf(measured).minima;
    expect(minimum!.chi2 / minimum!.ndf).toBeGreaterThan(5);
    expect(parameterValue(minimum!, "t88.g(8_1)")).toBeGreaterThan(0);
  });
});
