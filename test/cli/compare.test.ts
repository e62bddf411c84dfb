import { spawnSync } from "node:child_process";
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { describeComparison } from "../../src/cli/compare.js";
import { couplet } from "../../src/gen/couplet.js";
import { isoscalarTable, MULTIPLICITY_RULE } from "../../src/su3/isoscalar-factors.js";
import { compareTables, DEFAULT_THRESHOLDS } from "../../src/tables/compare.js";
import { decaysMessage, encodeDecays } from "../../src/tables/encode-decays.js";
import { factorsMessage } from "../../src/tables/encode-factors.js";
import { sealBytes } from "../../src/tables/sealed-bytes.js";
import { studyText, tablesOf } from "../chain/run.js";

import v1 = couplet.v1;

const command = join(__dirname, "..", "..", "dist", "cli", "main.js");
const folder = mkdtempSync(join(tmpdir(), "couplet-compare-"));
afterAll(() => rmSync(folder, { recursive: true }));

const [first, second] = [join(folder, "first.pb"), join(folder, "second.pb")];

function run(...args: string[]) {
  return spawnSync(process.execPath, [command, ...args], { encoding: "utf8", maxBuffer: 2 ** 26 });
}

beforeAll(() => {
  const text = studyText("decuplet");
  writeFileSync(first, encodeDecays(tablesOf(text)));
  writeFileSync(second, encodeDecays(tablesOf(text.replace("4.35 +- 0.6", "4.5 +- 0.6"))));
});

describe("couplet compare", () => {
  test("ends with 1 and tells rows, percent and sigma where a change counts, the study's lines first", () => {
    const { status, stdout, stderr } = run("compare", first, second);
    expect([status, stderr]).toEqual([1, ""]);
    const studyAt = stdout.indexOf("+   - { width: Sigma(1385) -> Sigma pi, value: 4.5 +- 0.6 MeV");
    const rowAt = stdout.indexOf("  row Sigma(1385)+ -> Sigma+ pi0\n");
    expect(studyAt).toBeGreaterThan(0);
    expect(rowAt).toBeGreaterThan(studyAt);
    // (4.5 - 4.35)/4.35, and 0.15/sqrt(0.6^2 + 0.6^2).
    expect(stdout).toMatch(
      /\n {4}width +2\.1750 \+- 0\.30 +-> +2\.2500 \+- 0\.30 +\+3\.45 % +\+0\.18 sigma\n/,
    );
    expect(stdout).toMatch(
      /\n\d+ values differ, \d+ of them count: new, gone, or beyond 1 % or 1 sigma\.\n$/,
    );
  });

  test("ends with 0 where nothing differs, and where no change is beyond the threshold", () => {
    const same = run("compare", first, first);
    expect([same.status, same.stdout]).toEqual([
      0,
      `from ${first}\nto   ${first}\ncouplet.v1.DecayTables\n\nNo value differs.\n`,
    ]);
    const small = run("compare", first, second, "--sigma", "0.5");
    expect(small.status).toBe(0);
    expect(small.stdout).toMatch(
      /\n\d+ values differ, 0 of them count: new, gone, or beyond 0\.5 sigma\.\n$/,
    );
  });

  test("prints every difference as JSON", () => {
    const { status, stdout } = run("compare", first, second, "--json", "--percent", "2");
    const { thresholds, items, counted, kind } = JSON.parse(stdout);
    expect([status, kind, thresholds]).toEqual([1, "couplet.v1.DecayTables", { percent: 2 }]);
    const row = items.find(({ name }: { name: string }) => name === "Sigma(1385)- -> Sigma0 pi-");
    const width = row.changes.find(({ path }: { path: string }) => path === "width");
    expect(width.percent).toBeCloseTo((100 * 0.15) / 4.35, 6);
    expect(counted).toBeGreaterThan(0);
  });

  test("refuses a threshold that is none, with exit code 2", () => {
    const { status, stderr } = run("compare", first, second, "--percent", "-1");
    expect([status, stderr]).toEqual([2, 'couplet: --percent: expected a number >= 0, got "-1".\n']);
  });
});

describe("couplet compare in words", () => {
  const tables = decaysMessage(tablesOf(`${studyText("octet-5-2")}tables: { widthModels: compared }\n`));
  const text = (change: (tables: v1.DecayTables.$Properties) => void) => {
    const changed = structuredClone(tables);
    change(changed);
    const [a, b] = [tables, changed].map((each) => sealBytes(v1.DecayTables.encode(each).finish()));
    const comparison = compareTables({ bytes: a!, file: "a" }, { bytes: b!, file: "b" });
    return describeComparison(comparison, "a", "b", DEFAULT_THRESHOLDS);
  };
  const MADE = "Conventions, models, editions";

  test("errors from the width model are numbers of their rows, not models", () => {
    const told = text(({ parents }) => {
      const rows = parents!
        .flatMap(({ rows }) => rows!)
        .filter(({ fraction, waves }) => fraction!.model! > 0 && waves!.length > 0);
      expect(rows.length).toBeGreaterThan(3);
      for (const { fraction } of rows) fraction!.model! *= 1.5;
      rows[0]!.fraction!.plus! *= 2;
      delete rows[1]!.fraction!.model;
      rows[2]!.waves![0]!.model = "b";
    });
    const [head, values] = told.split("Changed beyond the thresholds");
    expect(head!.split(MADE)[1]).toBe("\n  row waves[2L=4 2S=1].model: a -> b\n\n");
    expect(values).toMatch(/\n {4}also error of fraction, fraction\.model, by up to \+[\d.]+ %\n/);
    expect(values).toContain("\n    also fraction.model\n");
    expect(values).toContain("\n    also fraction.model, by up to +50.0 %\n");
  });

  test("notes are told one by one", () => {
    const told = text(({ header }) => {
      header!.notes = [...header!.notes!.slice(1), "a new note; with a semicolon", "another"];
    });
    expect(tables.header!.notes!.length).toBeGreaterThan(1);
    expect(told.split(MADE)[1]!.split("\n\n")[0]!.split("\n").slice(1)).toEqual([
      `  header notes, gone: ${tables.header!.notes![0]}`,
      "  header notes, new: a new note; with a semicolon",
      "  header notes, new: another",
    ]);
  });
});

describe("couplet compare of factor tables", () => {
  const [a, b] = [join(folder, "a.factors.pb"), join(folder, "b.factors.pb")];
  beforeAll(() => {
    const table = factorsMessage(isoscalarTable({ p: 1, q: 1 }, { p: 1, q: 1 }), { states: false });
    const write = (file: string) => writeFileSync(file, sealBytes(v1.FactorTable.encode(table).finish()));
    write(a);
    table.factors![0]!.value!.sign! *= -1;
    table.factors = table.factors!.filter(({ irrep }) => irrep!.p !== 3);
    table.multiplicityRule = "another-rule";
    write(b);
  });

  test("tells the rule first, what is gone, then each coefficient on a line; ends with 1", () => {
    const { status, stdout, stderr } = run("compare", a, b);
    expect([status, stderr]).toEqual([1, ""]);
    expect(stdout).toBe(
      [
        `from ${a}`,
        `to   ${b}`,
        "couplet.v1.FactorTable",
        "",
        "Conventions, models, editions",
        `  header multiplicityRule: ${MULTIPLICITY_RULE} -> another-rule`,
        "",
        "New and vanished",
        "  vanished irrep: 10",
        "",
        "Changed coefficients",
        "  factor <Y1=1 I1=1/2; Y2=-1 I2=1/2 | 1 Y=0 I=0>: 1/2 -> -1/2",
        "",
        "3 values differ, 3 of them count.",
        "",
      ].join("\n"),
    );
    expect(run("compare", a, a).status).toBe(0);
  });

  test("shows the first hundred of many, and has all as JSON", () => {
    const table = factorsMessage(isoscalarTable({ p: 2, q: 2 }, { p: 1, q: 1 }), { states: false });
    const many = [join(folder, "m.factors.pb"), join(folder, "n.factors.pb")] as const;
    for (const file of many) {
      writeFileSync(file, sealBytes(v1.FactorTable.encode(table).finish()));
      for (const { value } of table.factors!) value!.sign! *= -1;
    }
    const count = table.factors!.length;
    const lines = run("compare", ...many).stdout.split("\n");
    expect(lines.filter((line) => line.startsWith("  factor"))).toHaveLength(100);
    expect(lines).toContain(`  and ${count - 100} more; --json has them all`);
    expect(JSON.parse(run("compare", ...many, "--json").stdout).items).toHaveLength(count);
  });
});
