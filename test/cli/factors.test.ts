import { spawn, spawnSync } from "node:child_process";
import { mkdtempSync, readdirSync, readFileSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, describe, expect, test } from "vitest";
import { isoscalarTable } from "../../src/su3/isoscalar-factors.js";
import { decodeFactors } from "../../src/tables/decode-factors.js";

const command = join(__dirname, "..", "..", "dist", "cli", "main.js");
const folder = mkdtempSync(join(tmpdir(), "couplet-factors-command-"));
afterAll(() => rmSync(folder, { recursive: true }));

const COUNT = [...isoscalarTable({ p: 2, q: 2 }, { p: 1, q: 1 }).factors()].length;

function run(...args: string[]) {
  return spawnSync(process.execPath, [command, ...args], { encoding: "utf8", maxBuffer: 2 ** 26 });
}

describe("couplet factors", () => {
  test("writes a file that reads back, and is quiet where there is no terminal", () => {
    const path = join(folder, "27x8.pb");
    const { status, stdout, stderr } = run("factors", "27", "8", "--out", path);
    const bytes = readFileSync(path);
    expect([status, stderr, stdout]).toEqual([0, "", `wrote ${path} (${bytes.length} bytes)\n`]);
    const { factors, left } = decodeFactors(bytes, path);
    expect([left?.p, left?.q, factors.length]).toEqual([2, 2, COUNT]);
  });

  test("prints JSON with the factors of the file", () => {
    const { status, stdout, stderr } = run("factors", "27", "8", "--json");
    expect([status, stderr]).toEqual([0, ""]);
    expect(JSON.parse(stdout).factors.length).toBe(COUNT);
  });

  test("refuses beforehand what would not fit, with exit code 4", () => {
    const { status, stderr } = run("factors", "9,9", "9,9", "--out", join(folder, "large.pb"));
    expect([status, stderr]).toEqual([
      4,
      "couplet: expected at most 20000000 factors, got 23920150 in 1000 x 1000. Choose smaller irreps, or ask for one irrep with `into`.\n",
    ]);
  });

  test("ends with 130 on Ctrl-C in the middle of writing, and leaves nothing", async () => {
    const own = mkdtempSync(join(folder, "stopped-"));
    const child = spawn(process.execPath, [command, "factors", "5,5", "5,5", "--out", join(own, "x.pb")]);
    const ended = new Promise((resolve) => child.on("exit", resolve));
    while (child.exitCode === null && readdirSync(own).length === 0) {
      await new Promise((resolve) => setTimeout(resolve, 5));
    }
    const seen = readdirSync(own);
    child.kill("SIGINT");
    expect(await ended).toBe(130);
    expect(seen).toEqual([expect.stringMatching(/^\.x\.pb\.[0-9a-f]{16}$/)]);
    expect(readdirSync(own)).toEqual([]);
  });
});
