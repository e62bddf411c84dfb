import { describe, expect, test } from "vitest";
import { antihadron } from "../../src/completion/antiparticle-tables.js";
import { checkRows } from "../../src/completion/check-rows.js";
import type { ParentTable, Row } from "../../src/completion/tables.js";
import { InternalError } from "../../src/errors.js";
import { finalStates } from "../../src/model/final-states.js";
import { KnownParticles } from "../../src/model/known-particles.js";
import { octetStudy, parentOf, rowOf, tablesOf } from "./whole-study.js";

const policy = (text: string) => octetStudy(`tables: { ${text} }\n`);

/** Squares of SU(2) coefficients, exact algebra: what one measured sum gives each charge state of equal phase space. */
const SPLITS: readonly [parent: string, daughters: string, channel: string, share: number][] = [
  ["Delta(1232)+", "N pi", "p pi0", 2 / 3],
  ["Delta(1232)+", "N pi", "n pi+", 1 / 3],
  ["N(1520)+", "N pi", "n pi+", 2 / 3],
  ["N(1520)+", "N pi", "p pi0", 1 / 3],
  ["Sigma(1385)+", "Sigma pi", "Sigma+ pi0", 1 / 2],
  ["Sigma(1385)+", "Sigma pi", "Sigma0 pi+", 1 / 2],
  ["Sigma(1385)0", "Sigma pi", "Sigma0 pi0", 0],
  ["Sigma(1385)0", "Sigma pi", "Sigma+ pi-", 1 / 2],
  ["Lambda(1520)", "Sigma pi", "Sigma0 pi0", 1 / 3],
  ["Xi(1530)0", "Xi pi", "Xi- pi+", 2 / 3],
  ["N(1520)+", "Delta(1232) pi", "Delta(1232)++ pi-", 1 / 2],
  ["N(1520)+", "Delta(1232) pi", "Delta(1232)+ pi0", 1 / 3],
  ["N(1520)+", "Delta(1232) pi", "Delta(1232)0 pi+", 1 / 6],
  ["Delta(1700)+", "Delta(1232) pi", "Delta(1232)++ pi-", 2 / 5],
  ["Delta(1700)+", "Delta(1232) pi", "Delta(1232)+ pi0", 1 / 15],
  ["Delta(1700)+", "Delta(1232) pi", "Delta(1232)0 pi+", 8 / 15],
  ["phi(1020)", "K Kbar", "K+ K-", 1 / 2],
];

test.each(SPLITS)("isospin splits %s -> %s: %s has the share %d", (parent, daughters, channel, share) => {
  const particles = new KnownParticles([], []);
  const [known] = particles.states(parent);
  const finals = finalStates(known!, daughters.split(" "), particles, false, () => 1);
  const found = finals.find((final) => final.daughters.map(({ name }) => name).join(" ") === channel);
  expect(found?.share ?? 0).toBeCloseTo(share, 12);
  expect(finals.reduce((sum, final) => sum + final.share, 0)).toBeCloseTo(1, 12);
});

describe("neutral kaons as K_S0 and K_L0", () => {
  const flavour = tablesOf(policy("neutralKaons: flavour"));
  const shortLong = tablesOf(policy("neutralKaons: short-long"));

  test("a single K0bar of width W is W/2 of each, exactly, and keeps its flavour amplitude beside it", () => {
    const whole = rowOf(flavour, "Sigma(1775)+ -> p K0bar");
    for (const [name, sign] of [
      ["K_S0", -1],
      ["K_L0", 1],
    ] as const) {
      const half = rowOf(shortLong, `Sigma(1775)+ -> p ${name}`);
      expect(half.widthMeV.value).toBe(whole.widthMeV.value / 2);
      expect(half.fraction.plus).toBe(whole.fraction.plus / 2);
      expect(half.kaonFlavours).toEqual([
        {
          row: "Sigma(1775)+ -> p K0bar",
          projection: sign * Math.SQRT1_2,
          re: [whole.waves[0]!.re],
          im: [0],
        },
      ]);
      expect(half.waves[0]!.re ** 2).toBeCloseTo(half.widthMeV.value, 12);
      // The row's amplitude is that of the flavour times its projection, with its sign.
      expect(half.waves[0]!.re).toBeCloseTo(sign * Math.SQRT1_2 * whole.waves[0]!.re, 12);
      expect(half.waves[0]!.flavourAmplitude).toBeCloseTo(
        sign * Math.SQRT1_2 * whole.waves[0]!.flavourAmplitude,
        12,
      );
      expect(half.grid!.logWidths[5]).toBeCloseTo(whole.grid!.logWidths[5]! - Math.LN2, 5);
    }
  });

  test("no part is lost, and no K0 or K0bar is left", () => {
    for (const { rows } of shortLong.parents) {
      expect(rows.reduce((sum, { partsPerBillion }) => sum + partsPerBillion, 0)).toBe(1_000_000_000);
      const names = rows.flatMap(({ daughters }) => daughters.map(({ name }) => name));
      expect(names.filter((name) => name === "K0" || name === "K0bar")).toEqual([]);
    }
  });

  const mesons = (line: string) =>
    tablesOf(octetStudy(`modes:\n${line}tables: { neutralKaons: short-long }\n`));
  const kaonRows = (tables: ReturnType<typeof mesons>, parent: string) =>
    parentOf(tables, parent).rows.filter(({ origin }) => origin === "measured");

  test("a pair of odd spin is K_S0 K_L0 alone; one of even spin K_S0 K_S0 and K_L0 K_L0, half each", () => {
    const phi = kaonRows(
      mesons("  - { mode: phi(1020) -> K0 K0bar, fraction: 0.34 +- 0.01, source: rounded }\n"),
      "phi(1020)",
    );
    expect(phi.map(({ id, fraction }) => [id, fraction.value])).toEqual([["phi(1020) -> K_S0 K_L0", 0.34]]);
    const f2 = kaonRows(
      mesons("  - { mode: f2(1270) -> K0 K0bar, fraction: 0.02 +- 0.01, source: rounded }\n"),
      "f2(1270)",
    );
    expect(f2.map(({ id, fraction, identicalFactor }) => [id, fraction.value, identicalFactor])).toEqual([
      ["f2(1270) -> K_S0 K_S0", 0.01, 0.5],
      ["f2(1270) -> K_L0 K_L0", 0.01, 0.5],
    ]);
  });

  const D0 = (phases: readonly [string, string]) =>
    `modes:
  - { mode: D0 -> K0bar pi0, fraction: 0.025 +- 0.001, weak: true, ${phases[0]}source: invented }
  - { mode: D0 -> K0 pi0, fraction: ${0.025 * 0.0535 ** 2} +- 1e-6, weak: true, ${phases[1]}source: invented }
tables: { neutralKaons: short-long }
`;

  test("of a weak parent are projected from both amplitudes: tan^2 = 0.0535 makes K_S0 : K_L0 = 1.24", () => {
    const tables = tablesOf(octetStudy(D0(["phase: 0 rad, ", "phase: 3.141592653589793 rad, "])));
    const [short, long] = kaonRows(tables, "D0");
    expect([short!.id, long!.id]).toEqual(["D0 -> K_S0 pi0", "D0 -> K_L0 pi0"]);
    expect(short!.widthMeV.value / long!.widthMeV.value).toBeCloseTo(1.24, 2);
    for (const row of [short!, long!]) {
      const re = row.kaonFlavours!.reduce((sum, { projection, re }) => sum + projection * re[0]!, 0);
      const im = row.kaonFlavours!.reduce((sum, { projection, im }) => sum + projection * im[0]!, 0);
      expect((re * re + im * im) / row.widthMeV.value).toBeCloseTo(1, 12);
    }
  });

  test("of a weak parent without known phases are refused", () => {
    expect(() => tablesOf(octetStudy(D0(["", ""])))).toThrow(
      "study.yaml: D0 -> K0 pi0 and D0 -> K0bar pi0: expected the phases of both, since they interfere in K_S0 and K_L0. Give each mode its `phase`, or take `neutralKaons: flavour`.",
    );
  });
});

describe("antiparticles", () => {
  const implied = tablesOf(policy("antiparticles: implied"));
  const rows = tablesOf(policy("antiparticles: rows"));

  test("are implied, or follow their particle with the same numbers and conjugate daughters", () => {
    expect(rows.parents).toHaveLength(2 * implied.parents.length);
    for (const table of implied.parents) {
      const { name } = table.parent.hadron;
      const conjugate = parentOf(rows, `${name}bar`);
      expect(conjugate.parent.hadron.charge).toBe(
        table.parent.hadron.charge === 0 ? 0 : -table.parent.hadron.charge,
      );
      expect(conjugate.rows.map(({ partsPerBillion }) => partsPerBillion)).toEqual(
        table.rows.map(({ partsPerBillion }) => partsPerBillion),
      );
    }
    const row = rowOf(rows, "Sigma(1775)+bar -> pbar K0");
    expect(row.daughters.map(({ mcNumber }) => mcNumber)).toEqual([-2212, 311]);
    expect(row.widthMeV).toEqual(rowOf(rows, "Sigma(1775)+ -> p K0bar").widthMeV);
  });

  test("of antiparticles are the particles, but for the phase of their states", () => {
    for (const { parent } of implied.parents) {
      const back = antihadron(antihadron(parent.hadron));
      expect({ ...back, content: [] }).toEqual({ ...parent.hadron, content: [] });
      expect(back.content.map(({ leg }) => leg.state)).toEqual(
        parent.hadron.content.map(({ leg }) => leg.state),
      );
    }
  });
});

describe("every row is checked before it is written", () => {
  const tables = tablesOf(octetStudy(""));
  const proton = parentOf(tables, "N(1675)+");
  const withRow = (change: (row: Row) => Row): ParentTable[] => [
    { ...proton, rows: proton.rows.map((row, k) => (k === 0 ? change(row) : row)) },
  ];

  test("as made it passes", () => {
    expect(() => checkRows(tables.parents)).not.toThrow();
  });

  test("a daughter of another charge, a strange one, and a lost part are bugs, and said so", () => {
    const other = rowOf(tables, "Sigma(1775)+ -> p K0bar").daughters;
    const pion = rowOf(tables, "N(1675)+ -> n pi+").daughters;
    const report = "This is a bug in Couplet; please report it with the command you ran.";
    for (const [daughters, text] of [
      [[other[0]!, pion[1]!], "charge, 1 before and 2 after"],
      [[other[0]!, other[1]!], "strangeness, 0 before and -1 after"],
    ] as const) {
      const broken = () => checkRows(withRow((row) => ({ ...row, daughters })));
      expect(broken).toThrow(InternalError);
      expect(broken).toThrow(`checkRows: N(1675)+ -> p pi0 breaks ${text}. ${report}`);
    }
    expect(() => checkRows(withRow((row) => ({ ...row, partsPerBillion: row.partsPerBillion - 1 })))).toThrow(
      `checkRows: N(1675)+: rows add up to 999999999 parts. ${report}`,
    );
  });
});
