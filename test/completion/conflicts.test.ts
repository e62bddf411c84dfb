import { describe, expect, test } from "vitest";
import { WHOLE } from "../../src/completion/parts-per-billion.js";
import { couplet } from "../../src/gen/couplet.js";
import { decodeDecays } from "../../src/tables/decode-decays.js";
import { encodeDecays } from "../../src/tables/encode-decays.js";
import { octetStudy, parentOf, tablesOf } from "./whole-study.js";

const study = (delta: string, policy: string) =>
  octetStudy(`modes:
  - { mode: N(1675)+ -> Delta(1232)+ pi0, fraction: ${delta}, source: invented }
  - { mode: N(1675)+ -> n rho(770)+, threshold: 1300 MeV, fraction: 0.15 +- 0.05, source: invented }
tables: { conflicts: ${policy} }
`);

describe("fractions that add up to more than 1", () => {
  test("are refused unless a policy is named, with every entry", () => {
    expect(() => tablesOf(study("0.50 +- 0.06", "refuse"))).toThrow(
      /^study\.yaml: N\(1675\)\+: expected fractions that add up to at most 1, got 1\.0\d+ of the total width 145 MeV:\n {2}0\.5000 {2}N\(1675\)\+ -> Delta\(1232\)\+ pi0 {2}\(fraction N\(1675\)\+ -> Delta\(1232\)\+ pi0, line 19\)\n/,
    );
  });

  const tables = tablesOf(study("0.50 +- 0.06", "constrained"));
  const { rows } = parentOf(tables, "N(1675)+");

  test("are moved to 1 within 2 sigma; every row that moved is flagged and keeps its old value", () => {
    expect(rows.reduce((sum, { partsPerBillion }) => sum + partsPerBillion, 0)).toBe(WHOLE);
    expect(rows.reduce((sum, { fraction }) => sum + fraction.value, 0)).toBeCloseTo(1, 12);
    expect(rows.some(({ origin }) => origin === "remainder")).toBe(false);
    for (const row of rows) {
      expect(row.flags.includes("adjusted")).toBe(row.unadjusted !== undefined);
      if (row.unadjusted === undefined) continue;
      const { value, plus, minus, breaking } = row.unadjusted.fraction;
      expect(row.fraction.value).not.toBe(value);
      expect(Math.abs(row.fraction.value - value)).toBeLessThan(
        2 * Math.hypot(Math.max(plus, minus), breaking),
      );
      // What is known together, data and breaking, is known better once the sum is known.
      const now = Math.hypot(row.fraction.minus, row.fraction.breaking);
      expect(now).toBeLessThanOrEqual(Math.hypot(minus, breaking) * (1 + 1e-9));
    }
    const delta = rows.find(({ id }) => id === "N(1675)+ -> Delta(1232)+ pi0")!;
    expect(delta.unadjusted!.fraction.value).toBe(0.5);
    expect(delta.measurement!.value).toBe(0.5);
    expect(delta.widthMeV.value).toBeCloseTo(145 * delta.fraction.value, 9);
  });

  test("the two charge states of one measurement keep their ratio", () => {
    const [p, n] = ["p pi0", "n pi+"].map((pair) => rows.find(({ id }) => id === `N(1675)+ -> ${pair}`)!);
    const before = p!.unadjusted!.fraction.value / n!.unadjusted!.fraction.value;
    expect(p!.fraction.value / n!.fraction.value).toBeCloseTo(before, 9);
  });

  test("modes that would take what is left have no rows then, and the parent says so", () => {
    const mode = "  - { mode: N(1675)+ -> p gamma, remainder: 1, source: invented }\ntables:";
    const named = (delta: string) => tablesOf(study(delta, "constrained").replace("tables:", mode));
    const warning =
      "N(1675)+: the other rows leave nothing of the total width to the modes that take the remainder; these have no rows.";
    const full = parentOf(named("0.50 +- 0.06"), "N(1675)+");
    expect(full.rows.some(({ id }) => id === "N(1675)+ -> p gamma")).toBe(false);
    expect(full.warnings).toContain(warning);
    const open = parentOf(named("0.10 +- 0.06"), "N(1675)+");
    expect(open.rows.some(({ id }) => id === "N(1675)+ -> p gamma")).toBe(true);
    expect(open.warnings).not.toContain(warning);
  });

  test("the parent says by how much, of the predicted widths and of the measured", () => {
    const sum = (origin: string, of: (row: (typeof rows)[number]) => number) =>
      rows.filter((row) => row.origin === origin).reduce((total, row) => total + of(row), 0);
    const newMeV = (row: (typeof rows)[number]) => row.widthMeV.value;
    const oldMeV = (row: (typeof rows)[number]) => (row.unadjusted?.widthMeV ?? row.widthMeV).value;
    const scales = rows
      .filter((row) => row.origin === "predicted" && oldMeV(row) > 0)
      .map((row) => newMeV(row) / oldMeV(row));
    const mean = sum("predicted", newMeV) / sum("predicted", oldMeV);
    const [scale, least, most] = [mean, Math.min(...scales), Math.max(...scales)].map((x) => x.toFixed(2));
    expect(Number(least)).toBeLessThan(Number(most));
    const [p, left, m, moved] = [
      sum("predicted", oldMeV),
      145 - sum("measured", newMeV),
      sum("measured", oldMeV),
      sum("measured", newMeV),
    ].map((x) => (x >= 100 ? x.toFixed(0) : String(Number(x.toPrecision(3)))));
    const warnings = (from: typeof tables) =>
      parentOf(from, "N(1675)+").warnings.filter((text) => text.includes("(constrained)"));
    expect(warnings(tables)).toEqual([
      `N(1675)+: ${p} MeV of predicted widths were scaled by ${scale} (rows by ${least} to ${most}) into the ${left} MeV that are left, ${m} MeV of measured widths were moved to ${moved} MeV, of a total width of 145 MeV (constrained).`,
    ]);
    expect(warnings(tablesOf(study("0.10 +- 0.06", "constrained")))).toEqual([]);
    const [parent] = decodeDecays(encodeDecays(tables), "f").parents.filter(
      ({ hadron }) => hadron?.name === "N(1675)+",
    );
    expect(parent!.warnings).toContain(warnings(tables)[0]);
  });

  test("old values are in the file", () => {
    const read = decodeDecays(encodeDecays(tables), "made.pb");
    const row = read.parents[0]!.rows.find(({ id }) => id === "N(1675)+ -> Delta(1232)+ pi0")!;
    expect(row.unadjustedFraction!.value).toBe(0.5);
    expect(row.unadjustedWidth!.value).toBeCloseTo(72.5, 9);
    expect(row.flags).toContain(couplet.v1.Flag.FLAG_ADJUSTED);
    expect(read.header.policies).toMatchObject({ conflicts: "constrained", neutralKaons: "flavour" });
  });

  test("nothing moves where there is room", () => {
    const free = parentOf(tablesOf(study("0.10 +- 0.06", "constrained")), "N(1675)+");
    expect(free.rows.every(({ unadjusted }) => unadjusted === undefined)).toBe(true);
    expect(free.rows.at(-1)!.flags).toEqual(["undecayable"]);
  });

  test("beyond 2 sigma they are refused, and only the smallest set that conflicts is named", () => {
    expect(() => tablesOf(study("0.95 +- 0.02", "constrained"))).toThrow(
      /^study\.yaml: N\(1675\)\+: expected fractions that come to 1 within 2 standard deviations, got 1\.5\d+ of the total width 145 \+- 15\.0 MeV, \d+\.\d standard deviations too much\. The smallest set that conflicts by itself:\n {2}0\.9500 \+- 0\.0200 {2}N\(1675\)\+ -> Delta\(1232\)\+ pi0 {2}\(fraction N\(1675\)\+ -> Delta\(1232\)\+ pi0, line 19\)\n {2}0\.4000 \+- 0\.04\d+ {2}N\(1675\)\+ -> p pi0, N\(1675\)\+ -> n pi\+ {2}\(width N\(1675\) -> N pi, line 14\)\n {2}Mend a value, give the member `width: sum`, or keep a measurement out of the table with `use: fit`\.$/,
    );
  });
});
