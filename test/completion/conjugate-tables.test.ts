import { describe, expect, test } from "vitest";
import type { ParentTable, Row, Tables } from "../../src/completion/tables.js";
import { InputError } from "../../src/errors.js";
import { decodeDecays } from "../../src/tables/decode-decays.js";
import { cascadeDrawer } from "../../src/tables/draw-cascade.js";
import { encodeDecays } from "../../src/tables/encode-decays.js";
import { seededIntegers } from "../support/seeded-integers.js";
import { parentOf, tablesOf } from "./whole-study.js";

/** An invented tensor into K* Kbar and its conjugate, with K* decayed by the study: only K* has a table. */
const study = (policies: string) => `couplet: 1
title: an invented tensor, and K* of the study
multiplets:
  t:
    irrep: 8
    spinParity: 2++
    members:
      - { name: f(1620), place: eta, mass: 1620 MeV, width: sum }
      - { name: k(1560), place: K, mass: 1560 MeV, width: sum }
  v: { irrep: 8, spinParity: 1--, members: [{ name: K*(892), place: K* }] }
decays:
  - { name: tvp, from: t, to: [vector-octet, pseudoscalar-octet], L: 2, model: c }
  - { name: vpp, from: v, to: [pseudoscalar-octet, pseudoscalar-octet], L: 1, model: e }
measurements:
  - { width: f(1620) -> K*(892) Kbar, value: 20 +- 2 MeV, source: invented }
  - { width: K*(892) -> K pi, value: 40 +- 1 MeV, source: invented }
tables: { ${policies} }
`;

/** Decays from a whole octet: both K* and their antiparticles, and both charged rho, are parents. */
const OCTET = `couplet: 1
title: invented widths of vector mesons
decays:
  - { from: vector-octet, to: [pseudoscalar-octet, pseudoscalar-octet], L: 1, model: e }
measurements:
  - { width: K*(892) -> K pi, value: 45 +- 1 MeV, source: invented }
  - { width: rho(770)+ -> pi+ pi0, value: 120 +- 2 MeV, source: invented }
modes:
  - { mode: K*(892)+ -> K+ gamma, fraction: 0.2 +- 0.02 %, source: invented }
  - { mode: rho(770)- -> pi- gamma, fraction: 0.04 +- 0.01 %, source: invented }
tables: { conflicts: constrained }
`;

/** Of names in the tables, the antiparticle's, or the name itself. */
function conjugateNames({ parents, externals }: Tables): (name: string) => string {
  const hadrons = [...parents.map(({ parent }) => parent.hadron), ...externals.map(({ hadron }) => hadron)];
  const names = new Map(hadrons.map(({ name, antiparticle }) => [name, antiparticle ?? name]));
  return (name) => names.get(name)!;
}

/** Sums in another order differ in the last digits. */
const rounded = (value: unknown): unknown =>
  JSON.parse(JSON.stringify(value, (_, x) => (typeof x === "number" ? Number(x.toPrecision(9)) : x)));

const numbers = ({ fraction, widthMeV, integrated, origin, sources, flags }: Row) =>
  rounded({ fraction, widthMeV, integrated, origin, sources, flags });

/** Rows by their daughters, of this table or of its conjugate. */
function byDaughters({ rows }: ParentTable, nameOf: (name: string) => string) {
  const keyed = rows.map((row): [string, ReturnType<typeof numbers>] => [
    row.daughters
      .map(({ name }) => nameOf(name))
      .sort()
      .join(" "),
    numbers(row),
  ]);
  return Object.fromEntries(keyed.sort(([a], [b]) => (a < b ? -1 : 1)));
}

function expectConjugates(tables: Tables, name: string): void {
  const table = parentOf(tables, name);
  const conjugateName = conjugateNames(tables);
  const other = parentOf(tables, conjugateName(name));
  expect(other).not.toBe(table);
  expect(byDaughters(other, conjugateName)).toEqual(byDaughters(table, (plain) => plain));
  expect(rounded(other.lineShape)).toEqual(rounded(table.lineShape));
}

describe("the antiparticle of a parent", () => {
  const decayed = tablesOf(study("daughters: decayed"));
  const names = (tables: Tables) => tables.parents.map(({ parent }) => parent.hadron.name);

  test("gets no built-in rows beside the study's of the particle", () => {
    expect(names(decayed)).toContain("K*(892)+");
    expect(names(decayed).filter((name) => name === "K*(892)-" || name === "K*(892)0bar")).toEqual([]);
    expect(names(decayed)).toContain("eta");
  });

  test("has the conjugate rows where antiparticles have rows of their own", () => {
    const tables = tablesOf(study("daughters: decayed, antiparticles: rows"));
    for (const name of ["K*(892)+", "K*(892)0", "k(1560)+", "k(1560)0"]) expectConjugates(tables, name);
  });

  test("is not left open where it is implied, and has the particle's line shape", () => {
    const tables = tablesOf(study("daughters: external"));
    const { leftOpen } = decodeDecays(encodeDecays(tables), "f");
    expect(leftOpen).not.toContain("K*(892)-");
    expect(leftOpen).not.toContain("K*(892)0bar");
    expect(leftOpen).toContain("eta");
    const external = tables.externals.find(({ hadron }) => hadron.name === "K*(892)-")!;
    expect(external.life).toBe("conjugate");
    expect(external.lineShape).toBeDefined();
    expect(external.lineShape).toEqual(parentOf(tables, "K*(892)+").lineShape);
  });

  test("ends cascades as often undecayed as the particle: both masses of the same numbers, both decays of one table", () => {
    const message = decodeDecays(encodeDecays(decayed), "f");
    const drawOf = (id: string) => {
      const parent = message.parents.find(({ hadron }) => hadron?.name === "f(1620)")!;
      const only = { ...parent, rows: parent.rows.filter((row) => row.id === id) };
      const others = message.parents.filter((other) => other !== parent);
      const tables = Object.assign(Object.create(Object.getPrototypeOf(message)), message, {
        parents: [only, ...others],
      });
      const random = seededIntegers(20261201);
      const drawer = cascadeDrawer(tables);
      return Array.from({ length: 300 }, () =>
        drawer.draw("f(1620)", () => random.below(2 ** 31) / 2 ** 31, 1620),
      );
    };
    const [plain, conjugate] = ["f(1620) -> K*(892)+ K-", "f(1620) -> K*(892)- K+"].map(drawOf) as [
      ReturnType<typeof drawOf>,
      ReturnType<typeof drawOf>,
    ];
    expect(plain.some((cascade) => cascade[1]!.end === "undecayable")).toBe(true);
    for (const [k, cascade] of plain.entries()) {
      expect(cascade[1]!.name).toBe("K*(892)+");
      const seen = (particles: typeof cascade, nameOf: (name: string) => string) =>
        // What a pi0 decays to, its own antiparticle, comes in the order of the row.
        particles
          .filter(({ mother }) => mother === 0 || mother === 1)
          .map(({ name, massMeV, end }) => ({ name: nameOf(name), massMeV, end }));
      expect(seen(conjugate[k]!, conjugateNames(decayed))).toEqual(seen(cascade, (name) => name));
    }
  });

  test("takes no modes of its own where only the particle is a parent", () => {
    const text = study("daughters: decayed").replace(
      "tables:",
      "modes:\n  - { mode: K*(892)- -> K- gamma, fraction: 0.1 %, source: invented }\ntables:",
    );
    expect(() => tablesOf(text)).toThrow(
      new InputError(
        'study.yaml:18:5: modes/0: mode: expected K*(892)+, as whose antiparticle it decays, got "K*(892)-". Write the conjugate mode, of K*(892)+.',
      ),
    );
  });
});

describe("two parents that are antiparticles of each other", () => {
  const tables = tablesOf(OCTET);

  test.each(["K*(892)+", "K*(892)0", "rho(770)+"])(
    "%s: measured rows and modes of one are both's",
    (name) => {
      expectConjugates(tables, name);
    },
  );

  test("have the measured numbers", () => {
    const row = (parent: string, id: string) => parentOf(tables, parent).rows.find((r) => r.id === id)!;
    const own = row("rho(770)-", "rho(770)- -> pi0 pi-");
    expect([own.origin, own.widthMeV.value, own.widthMeV.plus, own.widthMeV.breaking]).toEqual([
      "measured",
      120,
      2,
      0,
    ]);
    expect(row("K*(892)-", "K*(892)- -> K- gamma").fraction.value).toBeCloseTo(0.002, 12);
    expect(row("rho(770)+", "rho(770)+ -> pi+ gamma").fraction.value).toBeCloseTo(0.0004, 12);
  });
});
