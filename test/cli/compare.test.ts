import { spawnSync } from "node:child_process";
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { encodeDecays } from "../../src/tables/encode-decays.js";
import { studyText, tablesOf } from "../chain/run.js";

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
