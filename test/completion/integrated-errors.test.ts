import { describe, expect, test } from "vitest";
import { DEMO_STUDY } from "../../src/cli/demo-study.js";
import type { ParentTable, Replica, Row, Tables } from "../../src/completion/tables.js";
import { decodeDecays } from "../../src/tables/decode-decays.js";
import { encodeDecays } from "../../src/tables/encode-decays.js";
import { fractionsAt, rowsEvaluator, tableHadrons } from "../../src/tables/evaluate-rows.js";
import { drawMass } from "../../src/widths/draw-mass.js";
import { octetStudy, parentOf, rowOf, tablesOf } from "./whole-study.js";

const sum = (values: readonly number[]) => values.reduce((total, value) => total + value, 0);
const demo = (options: string) => DEMO_STUDY.replace("daughters: decayed", options);

/** The demo with a tenth of its errors and a hundredth of its breaking: so small that everything is linear. */
const precise = (count: number) =>
  demo(`breaking: 0.002, replicas: ${count}, seed: 8`).replace(
    /(\+-|\+(?=\d)| -(?=\d)) ?(\d+(\.\d+)?)/g,
    (_, sign: string, size: string) => `${sign}${sign === "+-" ? " " : ""}${Number(size) / 10}`,
  );

/** Masses that share the chance of a parent's line shape evenly. */
const MASSES = 400;

/** A parent's integrated fractions in each replica, from the file alone: the ratios reweight the rows at each mass. */
function integratedIn(tables: Tables, name: string, replicas: readonly number[]): number[][] {
  const decoded = decodeDecays(encodeDecays({ ...tables, replicas: tables.replicas }), "f");
  const parent = decoded.parents.find(({ hadron }) => hadron?.name === name)!;
  const { lineShape } = parentOf(tables, name);
  const evaluator = rowsEvaluator(parent, tableHadrons(decoded));
  const masses = Array.from({ length: MASSES }, (_, k) => drawMass(lineShape!.draw, (k + 0.5) / MASSES));
  const atMasses = masses.map((mass) => fractionsAt(evaluator, mass));
  return replicas.map((replica) => {
    const ratios = parent.rows.map(({ replicaRatios }) => replicaRatios?.[replica] ?? 1);
    const sums = parent.rows.map(() => 0);
    for (const fractions of atMasses) {
      const changed = fractions.map((f, k) => f * ratios[k]!);
      const total = sum(changed);
      for (const [k, value] of changed.entries()) sums[k]! += value / total / MASSES;
    }
    return sums;
  });
}

function replicasOf({ replicas }: Tables, part: Replica["part"]): number[] {
  return replicas.flatMap((replica, k) => (replica.part === part ? [k] : []));
}

const wide = ({ parents }: Tables): ParentTable[] =>
  parents.filter(({ lineShape }) => lineShape !== undefined);

describe("errors of fractions integrated over the line shape", () => {
  const COUNT = 1000;
  // The spread of N normal numbers is known to 1/sqrt(2N); 4.5 of these; 1 % for what is not linear.
  const TOLERANCE = 4.5 / Math.sqrt(2 * COUNT) + 0.01;
  const tables = tablesOf(precise(COUNT));

  test.each(["data", "breaking"] as const)("of %s are the spread of reweighted fractions", (part) => {
    const drawn = replicasOf(tables, part);
    let [compared, closed] = [0, 0];
    for (const { parent, rows } of wide(tables)) {
      const moved = integratedIn(tables, parent.hadron.name, drawn);
      for (const [k, { id, integrated, kinematics }] of rows.entries()) {
        const { value, plus, minus, breaking } = integrated!;
        const quoted = part === "data" ? Math.sqrt((plus ** 2 + minus ** 2) / 2) : breaking;
        if (!(quoted > 1e-5 * value && quoted < 0.08 * value)) continue;
        const centre = sum(moved.map((all) => all[k]!)) / COUNT;
        const spread = Math.sqrt(sum(moved.map((all) => (all[k]! - centre) ** 2)) / COUNT);
        expect(Math.abs(spread / quoted - 1), `${id}: ${spread} against ${quoted}`).toBeLessThan(TOLERANCE);
        compared++;
        closed += kinematics === "closed" ? 1 : 0;
      }
    }
    expect(compared).toBeGreaterThan(30);
    expect(closed).toBeGreaterThan(0);
  });

  test("are not those of the nominal fractions where rows open in the line shape", () => {
    const rows: Row[] = wide(tables).flatMap((table) => [...table.rows]);
    const relative = ({ value, plus }: { value: number; plus: number }) => plus / value;
    const other = rows.filter(
      ({ fraction, integrated }) =>
        fraction.value > 0.01 && Math.abs(relative(integrated!) / relative(fraction) - 1) > 0.05,
    );
    expect(other.length).toBeGreaterThan(3);
  });

  test("of branch and model are the differences to the reweighted fractions of other answers", () => {
    const compared = tablesOf(demo("widthModels: compared, replicas: 1"));
    const [branches, models] = [replicasOf(compared, "branch"), replicasOf(compared, "model")];
    let large = 0;
    for (const { parent, rows } of wide(compared)) {
      const name = parent.hadron.name;
      const [ofBranches, ofModels] = [
        integratedIn(compared, name, branches),
        integratedIn(compared, name, models),
      ];
      // The data's first replica has ratios; the own rows are the reweighted ones of none.
      const [own] = integratedIn(compared, name, [-1]);
      for (const [k, { id, integrated }] of rows.entries()) {
        const away = Math.max(...ofBranches.map((all) => Math.abs(all[k]! - own![k]!)));
        const values = [own![k]!, ...ofModels.map((all) => all[k]!)];
        const range = Math.max(...values) - Math.min(...values);
        expect(own![k]!, id).toBeCloseTo(integrated!.value, 3);
        expect(Math.abs(away - integrated!.branch!), id).toBeLessThan(2e-4);
        expect(Math.abs(range / 2 - integrated!.model!), id).toBeLessThan(2e-4);
        large += integrated!.branch! > 0.01 && integrated!.model! > 1e-3 ? 1 : 0;
      }
    }
    expect(large).toBeGreaterThan(3);
  });

  test("come back from the file, beside the plain value", () => {
    const decoded = decodeDecays(encodeDecays(tables), "f").parents.flatMap(({ rows }) => rows);
    for (const [k, { integrated }] of tables.parents.flatMap(({ rows }) => [...rows]).entries()) {
      expect(decoded[k]!.integratedFraction ?? undefined).toBe(integrated?.value);
      expect(decoded[k]!.integrated?.plus ?? undefined).toBe(integrated?.plus);
    }
  });
});

describe("the finite difference of a study", () => {
  test("is the quoted error: one measured width larger by its error, all else the same", () => {
    // Only measured rows and a remainder: the error of one width alone.
    const text = (value: number, error: number) =>
      octetStudy("")
        .replace("Lambda pi, value: 20 +- 4 MeV", `Lambda pi, value: ${value} +- ${error} MeV, use: table`)
        .replace("N Kbar, value: 48 +- 4 MeV", "N Kbar, value: 48 +- 1e-9 MeV")
        .replace("Sigma pi, value: 4 +- 2 MeV", "Sigma pi, value: 4 +- 1e-9 MeV")
        .replace("N pi, value: 58 +- 3 MeV", "N pi, value: 58 +- 1e-9 MeV")
        .replace("120 +- 10", "120");
    const id = "Sigma(1775)+ -> Lambda pi+";
    const at = (value: number) => rowOf(tablesOf(text(value, 0.2)), id).integrated!;
    const { plus } = at(20);
    const difference = (at(20.2).value - at(19.8).value) / 2;
    expect(plus).toBeGreaterThan(1e-4);
    // The study's line shape moves with the width too, the quoted error's does not: the rest is of that order.
    expect(Math.abs(difference / plus - 1)).toBeLessThan(0.02);
  });
});

describe("the warning of a tail", () => {
  // A lighter Sigma makes the couplings larger, so that Lambda K matters in the decays of N.
  const tables = tablesOf(
    octetStudy("tables: { antiparticles: rows }\n")
      .replace("mass: 1775 MeV", "mass: 1475 MeV")
      .replaceAll("Sigma(1775)", "Sigma(1475)"),
  );
  const warnings = (name: string) =>
    parentOf(tables, name).warnings.filter((text) => text.includes("tail of the line shape"));

  test("names the rows whose fraction more than doubles over the line shape, and the window", () => {
    const { fraction, integrated } = rowOf(tables, "N(1675)+ -> Lambda K+");
    expect(fraction.value).toBeCloseTo(0.00401, 5);
    expect(integrated!.value).toBeCloseTo(0.00897, 5);
    const [low, high] = parentOf(tables, "N(1675)+").lineShape!.windowMeV.map(Math.round);
    expect(warnings("N(1675)+")).toEqual([
      `N(1675)+: fractions over the line shape more than 2 times those at the nominal mass: N(1675)+ -> Sigma+ K0, N(1675)+ -> Sigma0 K+, N(1675)+ -> Lambda K+. They depend on the tail of the line shape within the window of ${low} to ${high} MeV.`,
    ]);
    expect(warnings("N(1675)+bar")[0]).toContain(", N(1675)+bar -> Lambdabar K-. They");
  });

  test("counts the fraction over the line shape, above 0.001: rows that are closed or tiny at the nominal mass are named", () => {
    const [tiny] = ["N(1675)+ -> Sigma+ K0"].map((id) => rowOf(tables, id));
    expect(tiny!.fraction.value).toBeLessThan(1e-3);
    expect(tiny!.integrated!.value).toBeGreaterThan(1e-3);
    const lighter = tablesOf(octetStudy("").replace("mass: 1675 MeV", "mass: 1600 MeV"));
    const closed = rowOf(lighter, "N(1675)+ -> Lambda K+");
    expect([closed.kinematics, closed.fraction.value]).toEqual(["closed", 0]);
    const { warnings: texts, rows } = parentOf(lighter, "N(1675)+");
    const ruled = rows.filter(
      ({ fraction, integrated }) => integrated!.value > 1e-3 && integrated!.value > 2 * fraction.value,
    );
    const silent = rows.filter((row) => !ruled.includes(row));
    expect(silent.some((row) => row.integrated!.value > 2 * row.fraction.value)).toBe(true);
    expect(texts.find((text) => text.includes("tail of the line shape"))).toContain(
      `: ${ruled.map(({ id }) => id).join(", ")}. They`,
    );
    expect(ruled.some(({ kinematics }) => kinematics === "closed")).toBe(true);
  });

  test("is not given where no row does", () => {
    const { rows } = parentOf(tables, "Sigma(1475)0");
    expect(
      rows.filter((row) => row.integrated!.value > 1e-3 && row.integrated!.value > 2 * row.fraction.value),
    ).toEqual([]);
    expect(warnings("Sigma(1475)0")).toEqual([]);
  });
});
