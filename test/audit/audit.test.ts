import { spawnSync } from "node:child_process";
import { join } from "node:path";
import { describe, expect, test } from "vitest";
import { type Baseline, baselineCheck, makeBaseline, meantChanges } from "../../src/audit/baseline.js";
import { allHold } from "../../src/audit/check.js";
import { identityChecks, productsUpTo } from "../../src/audit/identity-checks.js";
import { publishedCheck } from "../../src/audit/published-checks.js";
import { quarkAndLagrangianChecks } from "../../src/audit/quark-and-lagrangian-checks.js";
import { errorInUlps } from "../../src/audit/rounding-check.js";
import { parseRoot } from "../../src/exact/signed-root.js";
import stored from "../../src/published/baseline.json";
import { publishedIsoscalarTables } from "../../src/published/isoscalar-tables.js";
import { parseIrrep } from "../../src/su3/irrep.js";

const octets = [parseIrrep("8"), parseIrrep("8")] as const;
const decuplets = [parseIrrep("10"), parseIrrep("8")] as const;

describe("the audit", () => {
  test("finds the identities to hold over products with p + q <= 1, and says what it compared", () => {
    const checks = identityChecks({ largestSum: 1 }).map((check) => check.run());
    expect(allHold(checks)).toBe(true);
    expect(checks.map(({ name }) => name)).toContain("identity/casimir-eigenvectors");
    for (const { checked, what, source } of checks) {
      expect(checked).toBeGreaterThan(0);
      expect(what.length * source.length).toBeGreaterThan(0);
    }
    expect(checks[0]).toEqual({
      name: "identity/dimension-sum",
      what: "dim left dim right = sum of dimensions, all 9 products with p + q <= 1",
      source: "complete reducibility",
      checked: 9,
      worst: "exact",
      differences: [],
    });
  });

  test("finds the wave functions and the constants of the Lagrangian as published", () => {
    const checks = quarkAndLagrangianChecks().map((check) => check.run());
    expect(checks.map(({ differences }) => differences)).toEqual([[], []]);
    expect(checks.map(({ checked }) => checked)).toEqual([15, 12]);
  });

  test("names a published value that differs, with both values", () => {
    const table = publishedIsoscalarTables().find(({ name }) => name.includes("8-from-10x8"))!;
    expect(publishedCheck(table).differences).toEqual([]);
    const [first, ...others] = table.rows as [(typeof table.rows)[0], ...typeof table.rows];
    const wrong = { ...table, rows: [{ ...first, value: parseRoot("sqrt(4/5)") }, ...others] };
    expect(publishedCheck(wrong).differences).toEqual([
      `${first.decay}: published sqrt(4/5), computed -sqrt(4/5)`,
    ]);
  });

  test("measures errors in units in the last place, on either side", () => {
    const x = Math.sqrt(2);
    const right = errorInUlps(x, 2n, 1n);
    expect(right).toBeLessThanOrEqual(0.5);
    expect(errorInUlps(x + 2 ** -52, 2n, 1n) + errorInUlps(x - 2 ** -52, 2n, 1n)).toBeCloseTo(2, 12);
    expect(errorInUlps(-x, 2n, 1n)).toBe(Number.POSITIVE_INFINITY);
    expect(errorInUlps(Number.NaN, 2n, 1n)).toBe(Number.POSITIVE_INFINITY);
    expect(errorInUlps(1, 1n, 1n)).toBe(0);
  });
});

describe("the baseline of an earlier version", () => {
  const baseline = makeBaseline("0.0.1", [octets], [decuplets]);

  test("equals the tables of today", () => {
    expect(baselineCheck(baseline, []).run().differences).toEqual([]);
  });

  test("names a changed coefficient of a small product, and a changed copy of a large one", () => {
    expect(baselineCheck(changed(baseline), []).run().differences).toEqual([
      "8x8 changed",
      "8x8, 1_1 (3Y 0, 2I 0) -> (3, 1) (-3, 1): signed square -1/4 before, 1/4 now",
      "10x8 changed",
      "10x8, 8_1: changed",
    ]);
  });

  test("passes a change with a reason in the change log, and repeats the reason", () => {
    const meant = meantChanges(
      "# Changes\n\n## 1.0.0\n\n- coefficients of 8x8 changed: another sign rule for singlets\n- a line about 10x8\n",
    );
    expect(meant).toEqual([{ product: "8x8", reason: "another sign rule for singlets" }]);
    const check = baselineCheck(changed(baseline), meant).run();
    expect(check.differences).toEqual(["10x8 changed", "10x8, 8_1: changed"]);
    expect(check.what).toBe("digests of 2 tables; meant: 8x8: another sign rule for singlets");
    const all = meantChanges("- coefficients of all products changed: new convention");
    expect(baselineCheck(changed(baseline), all).run().differences).toEqual([]);
  });

  test("in the package holds all products with p + q <= 3", () => {
    const names = new Set(stored.products.map(({ left, right }) => `${left} ${right}`));
    for (const [left, right] of productsUpTo(3))
      expect(names.has(`${left.p},${left.q} ${right.p},${right.q}`)).toBe(true);
  });
});

/** The first square with another sign, and the first copy with another digest. */
function changed({ version, products }: Baseline): Baseline {
  const [small, large] = products as [Baseline["products"][0], Baseline["products"][0]];
  return {
    version,
    products: [
      { ...small, sha256: "0", squares: `-${small.squares}` },
      { ...large, sha256: "0", copies: large.copies!.replace(/^\S/, "x") },
    ],
  };
}

describe("couplet audit", () => {
  const command = join(__dirname, "..", "..", "dist", "cli", "main.js");
  const run = (...args: string[]) =>
    spawnSync(process.execPath, [command, "audit", ...args], { encoding: "utf8" });

  test("passes with exit code 0 and says what it compared", () => {
    const { status, stdout, stderr } = run("--grid", "1", "--json");
    const report = JSON.parse(stdout);
    expect([status, stderr, report.holds]).toEqual([0, "", true]);
    expect(report.checked).toBeGreaterThan(99_000);
    expect(report.checks.every(({ source }: { source: string }) => source.length > 0)).toBe(true);
  });

  test("refuses a grid it would not finish", () => {
    const { status, stderr } = run("--grid", "9");
    expect([status, stderr]).toEqual([
      2,
      "couplet audit: --grid: expected an integer from 0 to 4, got 9. It bounds p + q of both factors.\n",
    ]);
  });
});
