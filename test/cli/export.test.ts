import { spawnSync } from "node:child_process";
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { encodeDecays } from "../../src/tables/encode-decays.js";
import { studyText, tablesOf } from "../chain/run.js";

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
