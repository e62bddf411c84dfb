import { spawn, spawnSync } from "node:child_process";
import { join } from "node:path";
import { describe, expect, test } from "vitest";

const command = join(__dirname, "..", "..", "dist", "cli", "main.js");
const study = (name: string) => join(__dirname, "..", "chain", "studies", `${name}.yaml`);

function run(...args: string[]) {
  return spawnSync(process.execPath, [command, "fit", ...args], { encoding: "utf8", maxBuffer: 2 ** 26 });
}

describe("couplet fit", () => {
  test("prints further errors only where they are asked for", () => {
    const { status, stdout, stderr } = run(study("decuplet"));
    expect([status, stderr]).toEqual([0, ""]);
    expect(stdout).not.toMatch(/profile|pseudo|left out|width models/);
    // chi2 11.46 with 3 degrees of freedom: S = 1.95, beside an error that stays as it is.
    expect(stdout).toContain("S = sqrt(chi2/ndf) = 1.95");
    expect(stdout).toMatch(/g\(10\) +5\.35 \+- 0\.05 +\(\+- 0\.10\)/);
  });

  test("says what it moved of given masses and total widths, which are terms of chi2 too", () => {
    const { stdout } = run(study("decuplet-whole"));
    const lines = stdout.replaceAll(/ {2,}/g, "  ").split("\n");
    const start = lines.findIndex((line) => line.startsWith("  quantity"));
    const shown = lines
      .slice(start + 1, start + 6)
      .map((line) => Number(/(\S+)(?: {2}<-.*)?$/.exec(line)![1]));
    expect(lines[start + 5]).toMatch(
      /^ {2}total width Delta\(1232\).* 117 \+- 3 .*<- contradicts the others$/,
    );
    expect(lines[start + 6]).toBe("  the pull of 1 given mass, total width or angle is below 1");
    // No decay of Xi(1530) is measured.
    expect(lines).toContain("  not listed, since no measurement depends on it: mass Xi(1530)");
    expect(lines.filter((line) => line.startsWith("  mass Xi(1530)"))).toEqual([]);
    expect(lines).toContain(
      "Note: `mass Sigma(1385)` has value and error of Sigma(1385)+, `mass Xi(1530)` has value and error of Xi(1530)0; the other charge states move by as much with it.",
    );
    const [minimum] = JSON.parse(run(study("decuplet-whole"), "--json").stdout).minima;
    const idle = minimum.parameters.filter(
      (p: { given?: { measured: boolean } }) => p.given?.measured === false,
    );
    expect(idle.map(({ name }: { name: string }) => name)).toEqual(["mass Xi(1530)"]);
    const given = minimum.parameters.flatMap((p: { given?: { pull: number } }) =>
      p.given ? [p.given.pull] : [],
    );
    const measured = minimum.pulls.map(({ pull }: { pull: number }) => pull);
    const squares = [...measured, ...given].reduce((sum: number, pull: number) => sum + pull ** 2, 0);
    expect(squares).toBeCloseTo(minimum.chi2, 8);
    const listed = shown.reduce((sum, pull) => sum + pull ** 2, 0);
    expect(Math.abs(listed - minimum.chi2)).toBeLessThan(0.5);
  });

  test("prints intervals, pseudo-experiments, leave-one-out and models, and the same as JSON", () => {
    const options = ["--profile", "--toys", "40", "--seed", "3", "--leave-one-out", "--models"];
    const { status, stdout, stderr } = run(study("decuplet"), ...options, "--workers", "2");
    expect([status, stderr]).toEqual([0, ""]);
    for (const heading of [
      "Intervals by profile likelihood, all other parameters fitted again:",
      "40 pseudo-experiments, seed 3; ",
      "Fits without one measurement each, shifts in brackets:",
      "The same data with other width models:",
      "error of a predicted width, MeV  statistical  branch  model  breaking",
    ])
      expect(stdout.replaceAll(/ {2,}/g, "  ")).toContain(heading);
    const json = JSON.parse(run(study("decuplet"), ...options, "--workers", "1", "--json").stdout);
    expect(Object.keys(json)).toEqual([
      "title",
      "minima",
      "notes",
      "warnings",
      "profiles",
      "pseudoExperiments",
      "models",
      "leaveOneOut",
      "errorParts",
    ]);
    expect(json.pseudoExperiments.seed).toBe(3);
    expect(json.leaveOneOut).toHaveLength(4);
    expect(json.errorParts[0].channel).toBe("Delta(1232)++ -> p pi+");
  });

  test.each([
    {
      options: ["--seed", "3"],
      message:
        "couplet fit: --seed belongs to --toys, which is not there. Add --toys <n>, or leave it out.\n",
    },
    {
      options: ["--toys", "many"],
      message: 'couplet fit: --toys: expected an integer from 1 to 100000000, got "many".\n',
    },
    {
      options: ["--toys", "5", "--workers", "0"],
      message: "couplet fit: --workers: expected an integer from 1 to 256, got 0.\n",
    },
  ])("refuses $options with exit code 2", ({ options, message }) => {
    const { status, stdout, stderr } = run(study("decuplet"), ...options);
    expect([status, stdout, stderr]).toEqual([2, "", message]);
  });

  test("ends with 130 on Ctrl-C in the middle of pseudo-experiments, and prints nothing", async () => {
    const child = spawn(process.execPath, [
      command,
      "fit",
      study("decuplet"),
      "--toys",
      "1000000",
      "--workers",
      "2",
    ]);
    let output = "";
    child.stdout.on("data", (piece) => {
      output += piece;
    });
    const ended = new Promise((resolve) => child.on("exit", resolve));
    await new Promise((resolve) => setTimeout(resolve, 2500));
    expect(child.exitCode).toBe(null);
    child.kill("SIGINT");
    expect([await ended, output]).toEqual([130, ""]);
  });
});
