import gammainc from "@stdlib/math-base-special-gammainc";
import { describe, expect, test } from "vitest";
import { DEMO_STUDY } from "../../src/cli/demo-study.js";
import type { Replica, Row, Tables } from "../../src/completion/tables.js";
import { decodeDecays } from "../../src/tables/decode-decays.js";
import { encodeDecays } from "../../src/tables/encode-decays.js";
import { fractionsAt, rowsEvaluator, tableHadrons } from "../../src/tables/evaluate-rows.js";
import { chainWeights, replicaWeights } from "../../src/tables/replica-weights.js";
import { octetStudy, parentOf, rowOf, tablesOf } from "./whole-study.js";

const demo = (options: string) => DEMO_STUDY.replace("daughters: decayed", options);

/** The demo with a tenth of its errors and a hundredth of its breaking: so small that everything is linear. */
const precise = (count: number) =>
  demo(`breaking: 0.002, replicas: ${count}, seed: 5`).replace(
    /(\+-|\+(?=\d)| -(?=\d)) ?(\d+(\.\d+)?)/g,
    (_, sign: string, size: string) => `${sign}${sign === "+-" ? " " : ""}${Number(size) / 10}`,
  );

const sum = (values: readonly number[]) => values.reduce((total, value) => total + value, 0);
const ratio = (row: Row, replica: number) => row.replicaRatios?.[replica] ?? 1;

/** Fractions of a parent's rows in one replica, by the rule of the schema at the nominal mass. */
function replicaFractions(rows: readonly Row[], replica: number): number[] {
  const widths = rows.map((row) => ratio(row, replica) * row.fraction.value);
  return widths.map((width) => width / sum(widths));
}

/** Indices of the replicas of one part. */
function replicasOf({ replicas }: Tables, part: Replica["part"]): number[] {
  return replicas.flatMap((replica, k) => (replica.part === part ? [k] : []));
}

const normalBelow = (x: number) => 0.5 * (1 + Math.sign(x) * gammainc((x * x) / 2, 0.5));

describe("the spread of replicas", () => {
  const COUNT = 2000;
  // The spread of N normal numbers is known to 1/sqrt(2N); 4.5 of these for some 200 numbers; 1 % for what is not linear.
  const TOLERANCE = 4.5 / Math.sqrt(2 * COUNT) + 0.01;
  const tables = tablesOf(precise(COUNT));

  test.each(["data", "breaking"] as const)("is the quoted error of %s where errors are small", (part) => {
    const drawn = replicasOf(tables, part);
    expect(drawn).toHaveLength(COUNT);
    let compared = 0;
    for (const { rows } of tables.parents) {
      const fractions = drawn.map((replica) => replicaFractions(rows, replica));
      for (const [k, row] of rows.entries()) {
        const widths = drawn.map((replica) => ratio(row, replica) * row.widthMeV.value);
        const pairs = [
          [row.fraction, fractions.map((all) => all[k]!)],
          [row.widthMeV, widths],
        ] as const;
        for (const [{ value, plus, minus, breaking }, values] of pairs) {
          // Two half-Gaussians about the value have the mean of both squares.
          const quoted = part === "data" ? Math.sqrt((plus ** 2 + minus ** 2) / 2) : breaking;
          if (!(quoted > 1e-6 * value && quoted < 0.08 * value)) continue;
          const spread = Math.sqrt(sum(values.map((x) => (x - value) ** 2)) / COUNT);
          expect(Math.abs(spread / quoted - 1), `${row.id}: ${spread} against ${quoted}`).toBeLessThan(
            TOLERANCE,
          );
          compared++;
        }
      }
    }
    expect(compared).toBeGreaterThan(part === "data" ? 80 : 30);
  });

  test("has the two sides of a measured value", () => {
    const row = rowOf(tables, "Sigma(1731)+ -> p K0bar");
    const moved = replicasOf(tables, "data").map((replica) => (ratio(row, replica) - 1) * row.widthMeV.value);
    for (const [side, quoted] of [
      [moved.filter((x) => x > 0), row.widthMeV.plus],
      [moved.filter((x) => x < 0), row.widthMeV.minus],
    ] as const) {
      const spread = Math.sqrt(sum(side.map((x) => x * x)) / side.length);
      expect(Math.abs(spread / quoted - 1)).toBeLessThan(4.5 / Math.sqrt(COUNT));
    }
    expect(row.widthMeV.plus / row.widthMeV.minus).toBeCloseTo(0.7 / 0.5, 9);
  });

  test("is that of (A + s z)^2 where breaking is larger than the width", () => {
    const wide = tablesOf(demo(`replicas: ${COUNT}, seed: 6`));
    const row = rowOf(wide, "N(1577)+ -> p eta");
    const relative = row.widthMeV.breaking / row.widthMeV.value;
    expect(relative).toBeGreaterThan(5);
    // The variance of (1 + t z)^2 is 4 t^2 + 2 t^4.
    const t = Math.sqrt(Math.sqrt(1 + relative ** 2 / 2) - 1);
    const ratios = replicasOf(wide, "breaking").map((replica) => ratio(row, replica));
    for (const size of [0.01, 0.1, 0.5, 1, 2, 5, 10, 20]) {
      const chance = normalBelow((Math.sqrt(size) - 1) / t) - normalBelow((-Math.sqrt(size) - 1) / t);
      const found = ratios.filter((value) => value < size).length / COUNT;
      const error = Math.sqrt((chance * (1 - chance)) / COUNT);
      expect(Math.abs(found - chance), `below ${size}`).toBeLessThan(4.5 * error);
    }
  });
});

describe("replicas of other minima and width models", () => {
  const tables = tablesOf(demo("widthModels: compared, replicas: 1"));

  test("reproduce the quoted parts", () => {
    const [branches, models] = [replicasOf(tables, "branch"), replicasOf(tables, "model")];
    expect([branches.length, models.length]).toEqual([1, 5]);
    let large = 0;
    for (const { rows } of tables.parents) {
      const fractions = (replicas: readonly number[]) => replicas.map((r) => replicaFractions(rows, r));
      const [ofBranches, ofModels] = [fractions(branches), fractions(models)];
      for (const [k, { id, fraction }] of rows.entries()) {
        const away = Math.max(...ofBranches.map((all) => Math.abs(all[k]! - fraction.value)));
        const values = [fraction.value, ...ofModels.map((all) => all[k]!)];
        // Ratios are in single precision.
        expect(Math.abs(away - fraction.branch!), id).toBeLessThan(3e-7);
        expect(Math.abs((Math.max(...values) - Math.min(...values)) / 2 - fraction.model!), id).toBeLessThan(
          3e-7,
        );
        large += fraction.branch! > 0.01 && fraction.model! > 0.001 ? 1 : 0;
      }
    }
    expect(large).toBeGreaterThan(3);
  });

  test("are labelled by minimum and model", () => {
    const decoded = decodeDecays(encodeDecays(tables), "f");
    const [data, breaking, branch, ...models] = decoded.replicas;
    expect([data!.seed, data!.draw, data!.minimum, data!.model]).toEqual([1, 0, 0, ""]);
    expect([breaking!.draw, breaking!.chi2]).toEqual([0, decoded.fit!.minima![0]!.chi2]);
    expect([branch!.minimum, branch!.chi2, branch!.draw]).toEqual([1, decoded.fit!.minima![1]!.chi2, null]);
    expect(models.map(({ model }) => model)).toEqual(["a", "b", "c", "c", "d"]);
    expect(models[0]!.options!.map(({ name, value, unit }) => `${name} ${value} ${unit}`)).toEqual([
      "n 1 1",
      "referenceMomentumMeV 1000 MeV",
      "referenceMassMeV 1000 MeV",
    ]);
  });
});

describe("a file with replicas", () => {
  const text = octetStudy("tables: { replicas: 7, seed: 3 }\n");
  const ratiosOf = (study: string) =>
    tablesOf(study).parents.flatMap(({ rows }) => rows.map(({ replicaRatios }) => replicaRatios));

  test("is the same for the same seed and another for another; more draws leave the first as they are", () => {
    const bytes = encodeDecays(tablesOf(text));
    expect(encodeDecays(tablesOf(text))).toEqual(bytes);
    expect(ratiosOf(text.replace("seed: 3", "seed: 4"))).not.toEqual(ratiosOf(text));
    const more = ratiosOf(text.replace("replicas: 7", "replicas: 9"));
    expect(more.map((ratios) => ratios?.slice(0, 7))).toEqual(ratiosOf(text).map((r) => r?.slice(0, 7)));
  });

  test("has the tables of one without, and none are made unasked", () => {
    const without = tablesOf(octetStudy(""));
    expect(without.replicas).toEqual([]);
    const plain = tablesOf(text).parents.map(({ rows }) => rows.map(({ replicaRatios: _, ...row }) => row));
    expect(JSON.stringify(plain)).toBe(JSON.stringify(without.parents.map(({ rows }) => rows)));
  });

  test("keeps ratios as they are, >= 0, and none for rows that no replica changes", () => {
    const tables = tablesOf(text);
    const rows = tables.parents.flatMap((table) => [...table.rows]);
    const decoded = decodeDecays(encodeDecays(tables), "f").parents.flatMap((parent) => parent.rows);
    for (const [k, { replicaRatios = [] }] of rows.entries()) {
      expect(decoded[k]!.replicaRatios).toEqual(replicaRatios);
      expect(replicaRatios.every((value) => value >= 0 && value === Math.fround(value))).toBe(true);
    }
    expect(rows.filter(({ replicaRatios }) => replicaRatios === undefined).length).toBeLessThan(rows.length);
  });

  test("gives antiparticles and neutral kaons the ratios of what they are made from", () => {
    const policies = "antiparticles: rows, neutralKaons: short-long, replicas: 7, seed: 3";
    const other = tablesOf(octetStudy(`tables: { ${policies} }\n`));
    const flavour = rowOf(tablesOf(text), "Sigma(1775)+ -> p K0bar").replicaRatios;
    expect(flavour).toHaveLength(14);
    for (const id of ["Sigma(1775)+ -> p K_S0", "Sigma(1775)+ -> p K_L0"])
      expect(rowOf(other, id).replicaRatios).toEqual(flavour);
    const { rows } = parentOf(other, "Sigma(1775)+");
    const anti = other.parents.find(({ parent }) => parent.hadron.antiparticle === "Sigma(1775)+")!;
    expect(anti.rows.map(({ replicaRatios }) => replicaRatios)).toEqual(rows.map((row) => row.replicaRatios));
  });

  test("lets the flavour amplitudes behind K_S0 and K_L0 interfere in each replica", () => {
    const modes = `modes:
  - { mode: D0 -> K0bar pi0, fraction: 0.025 +- 0.005, weak: true, phase: 0 rad, source: invented }
  - { mode: D0 -> K0 pi0, fraction: 0.004 +- 0.002, weak: true, phase: 2 rad, source: invented }
`;
    const made = (kaons: string) =>
      tablesOf(octetStudy(`${modes}tables: { neutralKaons: ${kaons}, replicas: 5 }\n`));
    const [flavour, projected] = [made("flavour"), made("short-long")];
    for (let k = 0; k < flavour.replicas.length; k++) {
      const width = (tables: Tables, id: string) => {
        const row = rowOf(tables, id);
        return ratio(row, k) * row.widthMeV.value;
      };
      const [a, b] = [width(flavour, "D0 -> K0 pi0"), width(flavour, "D0 -> K0bar pi0")];
      const mixed = Math.sqrt(a * b) * Math.cos(2);
      expect(width(projected, "D0 -> K_S0 pi0") / ((a + b) / 2 - mixed)).toBeCloseTo(1, 6);
      expect(width(projected, "D0 -> K_L0 pi0") / ((a + b) / 2 + mixed)).toBeCloseTo(1, 6);
    }
  });

  test("counts rows that a replica opens and the table does not have, and leaves their ratio at 1", () => {
    const zero = tablesOf(text.replace("Sigma pi, value: 4 +- 2", "Sigma pi, value: 0 +- 2"));
    const data = replicasOf(zero, "data");
    const opened = data.map((k) => zero.replicas[k]!.unreachableRows);
    // Two rows in each of three charge states, or none.
    expect(new Set(opened)).toEqual(new Set([0, 6]));
    const row = rowOf(zero, "Sigma(1775)+ -> Sigma+ pi0");
    expect([row.widthMeV.value, row.replicaRatios]).toEqual([0, undefined]);
    expect(tablesOf(text).replicas.every(({ unreachableRows }) => unreachableRows === 0)).toBe(true);
  });
});

describe("weights", () => {
  const tables = decodeDecays(encodeDecays(tablesOf(demo("daughters: decayed, replicas: 10"))), "f");
  const hadrons = tableHadrons(tables);
  const count = tables.replicas.length;

  test.each([-20, 0, 35])(
    "turn the table's fractions into the replica's, %d MeV off the nominal mass",
    (shift) => {
      for (const parent of tables.parents) {
        const massMeV = parent.hadron!.mass! + shift;
        const weights = replicaWeights(parent, hadrons, count);
        const fractions = fractionsAt(rowsEvaluator(parent, hadrons), massMeV);
        if (sum(fractions) === 0) continue;
        for (let replica = 0; replica < count; replica++) {
          const changed = fractions.map((f, k) => f * (parent.rows[k]!.replicaRatios![replica] ?? 1));
          for (const [k, fraction] of fractions.entries()) {
            const weight = weights.of(parent.rows[k]!.id!, massMeV)[replica]!;
            expect(Math.abs(fraction * weight - changed[k]! / sum(changed))).toBeLessThan(1e-12);
          }
        }
      }
    },
  );

  test("multiply down a chain", () => {
    expect(
      chainWeights([
        [1, 2],
        [3, 0.5],
        [2, 0],
      ]),
    ).toEqual([6, 0]);
    expect(chainWeights([])).toEqual([]);
  });

  test("refuse a row of another parent, and ratios that are not one for each replica", () => {
    const [parent] = tables.parents;
    const weights = replicaWeights(parent!, hadrons, count);
    expect(() => weights.of("x -> y z")).toThrow(
      'row: expected the id of a row of N(1577)+, got "x -> y z".',
    );
    expect(() => replicaWeights(parent!, hadrons, count + 1)).toThrow(
      `${parent!.rows[0]!.id}: expected one finite ratio >= 0 for each of ${count + 1} replicas, got others`,
    );
  });
});
