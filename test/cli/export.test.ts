import { spawnSync } from "node:child_process";
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { couplingTable } from "../../src/completion/tabulate-couplings.js";
import { encodeCouplings } from "../../src/tables/encode-couplings.js";
import { encodeDecays } from "../../src/tables/encode-decays.js";
import { fitOf, studyText, tablesOf } from "../chain/run.js";

const command = join(__dirname, "..", "..", "dist", "cli", "main.js");
const folder = mkdtempSync(join(tmpdir(), "couplet-export-"));
afterAll(() => rmSync(folder, { recursive: true }));

const first = join(folder, "first.pb");
beforeAll(() => writeFileSync(first, encodeDecays(tablesOf(studyText("decuplet")))));

function run(...args: string[]) {
  return spawnSync(process.execPath, [command, ...args], { encoding: "utf8", maxBuffer: 2 ** 26 });
}

describe("couplet export", () => {
  test("writes a file, or prints the same text", () => {
    const out = join(folder, "first.slha");
    const printed = run("export", first, "--to", "accord");
    const written = run("export", first, "--to", "accord", "-o", out);
    const text = readFileSync(out, "utf8");
    expect([printed.status, printed.stderr, printed.stdout]).toEqual([0, "", text]);
    expect([written.status, written.stdout]).toEqual([0, `wrote ${out} (${text.length} bytes)\n`]);
  });

  test("JSON is that of `couplet show --json`", () => {
    expect(run("export", first, "--to", "json").stdout).toBe(run("show", first, "--json").stdout);
  });

  test("LaTeX of coupling tables is their tabulars, each in its environment", () => {
    const couplings = join(folder, "first.couplings.pb");
    writeFileSync(couplings, encodeCouplings(couplingTable(fitOf(studyText("decuplet")), 0)));
    const { status, stdout, stderr } = run("export", couplings, "--to", "latex");
    expect([status, stderr]).toEqual([0, ""]);
    expect(stdout.match(/^\\begin\{tabular\}/gm)).toHaveLength(3);
    expect(stdout).toContain("\n$\\Delta(1232)^{+} \\to p\\,\\pi^{0}$ & $-\\sqrt{1/3}\\,g(10)$ & ");
    expect(run("export", couplings, "--to", "accord")).toMatchObject({
      status: 2,
      stderr: `couplet: ${couplings}: expected decay tables for --to accord, got couplet.v1.CouplingTables; coupling tables go to csv, latex or json.\n`,
    });
  });

  test("refuses what does not go together, with exit code 2", () => {
    const refused = (...args: string[]) => {
      const { status, stderr } = run("export", first, ...args);
      return [status, stderr];
    };
    expect(refused("--to", "xml")).toEqual([
      2,
      'couplet: --to: expected one of csv, latex, accord, json, got "xml".\n',
    ]);
    expect(refused("--to", "csv", "--rescale")).toEqual([
      2,
      "couplet: --number and --rescale: expected with --to accord only. Leave them out.\n",
    ]);
  });
});

test("a ledger is printed by `couplet show --row`, or the row alone as JSON", () => {
  const id = "Sigma(1385)+ -> Lambda pi+";
  const { status, stdout, stderr } = run("show", first, "--row", id);
  expect([status, stderr, stdout.split("\n")[0]]).toEqual([
    0,
    "",
    `${id}: measured, open at the nominal mass`,
  ]);
  const row = JSON.parse(run("show", first, "--row", id, "--json").stdout);
  expect([row.id, row.measurement.share, row.isospinChannel]).toEqual([id, 1, "Sigma(1385) -> Lambda pi"]);
});
