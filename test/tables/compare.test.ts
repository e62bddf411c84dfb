import { describe, expect, test } from "vitest";
import { couplingTable } from "../../src/completion/tabulate-couplings.js";
import { InputError } from "../../src/errors.js";
import { couplet } from "../../src/gen/couplet.js";
import { type Comparison, compareTables, type Thresholds } from "../../src/tables/compare.js";
import { couplingsMessage } from "../../src/tables/encode-couplings.js";
import { decaysMessage } from "../../src/tables/encode-decays.js";
import { sealBytes } from "../../src/tables/sealed-bytes.js";
import { fitOf, studyText, tablesOf } from "../chain/run.js";

import v1 = couplet.v1;

const text = studyText("octet-5-2");
const decays = () => structuredClone(decaysMessage(tablesOf(text)));
const ORIGINAL = decays();
const couplings = couplingsMessage(couplingTable(fitOf(text), 0));

const sealed = (message: v1.DecayTables.$Properties) => sealBytes(v1.DecayTables.encode(message).finish());
const sealedCouplings = (message: v1.CouplingTables.$Properties) =>
  sealBytes(v1.CouplingTables.encode(message).finish());

/** Compares the original decay tables with changed ones. */
function compared(
  change: (tables: v1.DecayTables.$Properties) => void,
  thresholds: Thresholds = { percent: 1, sigma: 1 },
): Comparison {
  const changed = structuredClone(ORIGINAL);
  change(changed);
  return compareTables(
    { bytes: sealed(ORIGINAL), file: "a.pb" },
    { bytes: sealed(changed), file: "b.pb" },
    thresholds,
  );
}

const rowOf = ({ parents }: v1.DecayTables.$Properties, id: string) =>
  parents!.flatMap(({ rows }) => rows!).find((row) => row.id === id)!;

const ID = "Sigma(1775)0 -> Lambda pi0";

describe("comparison of decay tables", () => {
  test("the order of parents, rows, parameters and lists does not matter", () => {
    const { items, changed, counted } = compared((tables) => {
      tables.parents!.reverse();
      for (const parent of tables.parents!) parent.rows!.reverse();
      for (const minimum of tables.fit!.minima!) {
        minimum.parameters!.reverse();
        minimum.pulls!.reverse();
      }
      tables.externals!.reverse();
      tables.header!.editions!.reverse();
    });
    expect([items, changed, counted]).toEqual([[], 0, 0]);
  });

  test("replicas are not compared: the numbers and errors that they are drawn from are", () => {
    const withReplicas = (seed: number, ratio: number) => (tables: v1.DecayTables.$Properties) => {
      tables.replicas = [{ part: v1.ReplicaPart.REPLICA_PART_DATA, seed, draw: 0 }];
      for (const parent of tables.parents!) for (const row of parent.rows!) row.replicaRatios = [ratio];
    };
    const [a, b] = [structuredClone(ORIGINAL), structuredClone(ORIGINAL)];
    withReplicas(7, 1.5)(a);
    withReplicas(8, 0.25)(b);
    const { items, changed, counted } = compareTables(
      { bytes: sealed(a), file: "a.pb" },
      { bytes: sealed(b), file: "b.pb" },
      { percent: 1, sigma: 1 },
    );
    expect([items, changed, counted]).toEqual([[], 0, 0]);
  });

  test("a changed number is told in percent and in the errors that face each other", () => {
    const { fraction } = rowOf(ORIGINAL, ID);
    const step = fraction!.value! / 10;
    const { items } = compared((tables) => {
      const estimate = rowOf(tables, ID).fraction!;
      estimate.value! += step;
      Object.assign(estimate, { plus: 100, minus: 4 * step, breaking: 0 });
    });
    expect(items).toHaveLength(1);
    const [{ kind, name, status, changes }] = items as [(typeof items)[0]];
    expect([kind, name, status, changes.length]).toEqual(["row", ID, "changed", 1]);
    expect(changes[0]!.path).toBe("fraction");
    expect(changes[0]!.percent).toBeCloseTo(10, 9);
    // Upwards: the upper error of the first table and the lower one of the second.
    const error = Math.hypot(fraction!.plus!, fraction!.breaking!, 4 * step);
    expect(changes[0]!.sigma).toBeCloseTo(step / error, 9);
    expect(changes[0]!.counts).toBe(true);
  });

  test("a change counts above either threshold, and a threshold that is not given counts nothing", () => {
    const change = (tables: v1.DecayTables.$Properties) => {
      const { fraction } = rowOf(tables, ID);
      fraction!.value! *= 1.02;
    };
    const { fraction } = rowOf(ORIGINAL, ID);
    const sigma = (0.02 * fraction!.value!) / Math.hypot(fraction!.plus!, fraction!.minus!);
    const counted = (thresholds: Thresholds) => compared(change, thresholds).counted;
    expect(counted({ percent: 1.9 })).toBe(1);
    expect(counted({ percent: 2.1 })).toBe(0);
    expect(counted({ sigma: 0.9 * sigma })).toBe(1);
    expect(counted({ sigma: 1.1 * sigma })).toBe(0);
    expect(counted({ percent: 2.1, sigma: 0.9 * sigma })).toBe(1);
  });

  test("noise of computation is no change, the smallest real change is one", () => {
    expect(compared((tables) => (rowOf(tables, ID).fraction!.value! *= 1 + 1e-12)).changed).toBe(0);
    const noisy = compared((tables) => (rowOf(tables, "Sigma(1775)0 -> Xi0 K0").width!.value = 1e-20));
    expect(noisy.changed).toBe(0);
    const real = compared((tables) => (rowOf(tables, ID).fraction!.value! *= 1 + 1e-6), { percent: 1e-5 });
    expect([real.changed, real.counted]).toEqual([1, 1]);
  });

  test("new and vanished parents and rows always count", () => {
    const { items, counted } = compared(
      (tables) => {
        const [nucleon] = tables.parents!;
        tables.parents = [...tables.parents!.slice(1), structuredClone(nucleon!)];
        tables.parents.at(-1)!.hadron!.name = "N(9999)+";
        for (const row of tables.parents.at(-1)!.rows!) row.id = row.id!.replace("N(1675)", "N(9999)");
      },
      { percent: 50 },
    );
    const rows = ORIGINAL.parents![0]!.rows!.length;
    const told = items.map(({ kind, status }) => `${status} ${kind}`);
    expect(told.filter((each) => each === "vanished parent")).toHaveLength(1);
    expect(told.filter((each) => each === "new parent")).toHaveLength(1);
    expect(told.filter((each) => each === "vanished row")).toHaveLength(rows);
    expect(told.filter((each) => each === "new row")).toHaveLength(rows);
    expect(counted).toBe(2 + 2 * rows);
  });

  test("how the tables were made comes first, and descriptions do not count", () => {
    const { items, counted } = compared((tables) => {
      rowOf(tables, ID).fraction!.value! *= 2;
      for (const wave of rowOf(tables, ID).waves!) wave.model = "b";
      tables.header!.multiplicityRule = "another rule";
      tables.header!.editions = ["an edition"];
      tables.header!.title = "another title";
    });
    expect(items.map(({ kind }) => kind)).toEqual(["header", "row"]);
    expect(items[0]!.changes.map(({ path, counts }) => [path, counts])).toEqual([
      ["editions", true],
      ["multiplicityRule", true],
      ["title", false],
    ]);
    expect(items[1]!.changes.map(({ path }) => path)).toEqual(["fraction", "waves[2L=4 2S=1].model"]);
    expect(counted).toBe(4);
  });

  test("a change anywhere is found: grids, line shapes, contents, flags, error bars", () => {
    const changes: ((tables: v1.DecayTables.$Properties) => void)[] = [
      (tables) => (rowOf(tables, ID).grid!.logWidths![20]! += 0.1),
      (tables) => (tables.parents![0]!.hadron!.lineShape!.cumulative![20]! *= 0.9),
      (tables) => (tables.externals![0]!.content![0]!.weight = 0.9),
      (tables) => rowOf(tables, ID).flags!.push(v1.Flag.FLAG_SMALL_AMPLITUDE),
      (tables) => (rowOf(tables, ID).fraction!.plus! *= 1.5),
      (tables) => (tables.fit!.minima![0]!.parameters![0]!.value! *= -1),
      (tables) => (tables.externals![0]!.mcNumber = 9),
      (tables) => (rowOf(tables, ID).waves![0]!.re! *= -1),
    ];
    for (const change of changes) expect(compared(change).counted).toBe(1);
  });

  test("changed lines of the study are told, blank lines apart", () => {
    const { studyLines, counted } = compared((tables) => {
      const { header } = tables;
      header!.studyText = header!.studyText!.replace("48 +- 4 MeV", "49 +- 4 MeV").replace("\n", "\n\n");
    });
    expect(studyLines).toEqual({
      vanished: ['  - { width: Sigma(1775) -> N Kbar, value: 48 +- 4 MeV, source: "PDG, from memory" }'],
      added: ['  - { width: Sigma(1775) -> N Kbar, value: 49 +- 4 MeV, source: "PDG, from memory" }'],
    });
    expect(counted).toBe(0);
  });
});

describe("comparison of coupling tables", () => {
  const comparedCouplings = (change: (tables: v1.CouplingTables.$Properties) => void) => {
    const changed = structuredClone(couplings);
    change(changed);
    return compareTables(
      { bytes: sealedCouplings(couplings), file: "a.pb" },
      { bytes: sealedCouplings(changed), file: "b.pb" },
    );
  };

  test("a changed exact coefficient counts, whatever its size", () => {
    const { items, counted } = comparedCouplings(({ charged }) => {
      const row = charged!.find(({ id }) => id === "Sigma(1775)0 -> p K-")!;
      row.components![0]!.terms![0]!.coefficient!.sign = 1;
    });
    expect(counted).toBe(1);
    const [{ kind, name, changes }] = items as [(typeof items)[0]];
    expect([kind, name]).toEqual(["vertex", "Sigma(1775)0 -> p K- 2L=4 2S=1"]);
    expect(changes[0]).toEqual({
      path: "components[octet baryon-octet pseudoscalar-octet].terms[g(8_1)].coefficient",
      from: { kind: "text", text: "-sqrt(3/20)" },
      to: { kind: "text", text: "sqrt(3/20)" },
      counts: true,
    });
  });

  test("order does not matter, and a sign that flips is told as such", () => {
    expect(
      comparedCouplings(({ charged, isospin }) => void [charged!.reverse(), isospin!.reverse()]).changed,
    ).toBe(0);
    const { items } = comparedCouplings(({ charged }) => {
      const [row] = charged!;
      row!.value!.value! *= -1;
      row!.sign! *= -1;
    });
    expect(items[0]!.changes.map(({ path }) => path)).toEqual(["sign", "value"]);
    expect(items[0]!.changes[1]!.percent).toBeCloseTo(
      -200 * Math.sign(couplings.charged![0]!.value!.value!),
      9,
    );
  });
});

test("tables of different kinds are refused in words", () => {
  const a = { bytes: sealed(ORIGINAL), file: "a.pb" };
  const b = { bytes: sealedCouplings(couplings), file: "b.pb" };
  expect(() => compareTables(a, b)).toThrow(
    new InputError(
      "b.pb: expected two tables of one kind, got couplet.v1.DecayTables and couplet.v1.CouplingTables.",
    ),
  );
});
