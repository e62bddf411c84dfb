import { existsSync, readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import type { BenchCase } from "./bench-case.js";
import { type Baseline, compared, ratioOf, type Verdict } from "./compare.js";
import { ENGINE_CASES } from "./engine-cases.js";
import { measured, timeText, warmUp } from "./measure.js";
import { PHYSICS_CASES } from "./physics-cases.js";
import { yardstick } from "./yardstick.js";

/**
 * Regression benchmarks: `npm run bench -- [regular expression of case names] [--save]`.
 *
 * Each case checks its result once, then is measured in rounds, each beside the yardstick: what is compared with
 * bench/baseline.json is the ratio, and only a difference beyond the scatter of the rounds of both runs counts.
 * Exit code 1 if a case became slower. `--save` writes the measured ratios to the baseline.
 */
const CASES: readonly BenchCase[] = [...ENGINE_CASES, ...PHYSICS_CASES];
const BASELINE = join(__dirname, "baseline.json");
const ROUNDS = 7;
const SECONDS_PER_ROUND = 0.25;

function main(args: readonly string[]): number {
  const selection = new RegExp(args.find((arg) => !arg.startsWith("--")) ?? "");
  const selected = CASES.filter(({ name }) => selection.test(name));
  if (selected.length === 0) {
    process.stderr.write(
      `no case matches ${selection}; there are ${CASES.map(({ name }) => name).join(", ")}\n`,
    );
    return 2;
  }
  const baseline: Baseline = existsSync(BASELINE)
    ? JSON.parse(readFileSync(BASELINE, "utf8"))
    : { node: "none", cases: {} };
  console.log(
    `Node ${process.version}, ${process.platform} ${process.arch}; baseline: Node ${baseline.node}`,
  );
  console.log(
    "times are of the fastest sample; ratios to the yardstick of the same round, median of the rounds",
  );
  const cases = { ...baseline.cases };
  const verdicts: Verdict[] = [];
  for (const benchCase of selected) {
    const { seconds, rounds } = roundsOf(benchCase);
    const now = ratioOf(rounds);
    const { verdict, difference, noise } = compared(now, baseline.cases[benchCase.name]);
    cases[benchCase.name] = { ratio: rounded(now.ratio), noise: rounded(now.noise) };
    verdicts.push(verdict);
    const change =
      verdict === "new" ? "" : `${signedPercent(Math.expm1(difference))}, noise ${percent(noise)}`;
    console.log(
      `${benchCase.name.padEnd(38)} ${timeText(seconds).padStart(8)}  ratio ${now.ratio.toPrecision(4).padEnd(8)} ` +
        `${verdict.padEnd(6)} ${change}`,
    );
  }
  const count = (verdict: Verdict) => verdicts.filter((other) => other === verdict).length;
  console.log(
    `${verdicts.length} cases: ${count("slower")} slower and ${count("faster")} faster beyond the noise, ` +
      `${count("same")} the same, ${count("new")} not in the baseline`,
  );
  if (args.includes("--save")) {
    writeFileSync(BASELINE, `${JSON.stringify({ node: process.version, cases }, null, 2)}\n`);
    console.log(`wrote ${BASELINE}`);
  }
  return count("slower") > 0 ? 1 : 0;
}

/** The fastest sample of a case, and its ratio to the yardstick in every round. */
function roundsOf({ name, make }: BenchCase): { seconds: number; rounds: number[] } {
  const { run, check } = make();
  check(run() as never);
  warmUp(run, 0.3);
  warmUp(yardstick, 0.1);
  const rounds: number[] = [];
  let seconds = Number.POSITIVE_INFINITY;
  for (let round = 0; round < ROUNDS; round++) {
    const unit = measured("yardstick", yardstick, SECONDS_PER_ROUND / 2).seconds;
    const own = measured(name, run, SECONDS_PER_ROUND).seconds;
    rounds.push(own / unit);
    seconds = Math.min(seconds, own);
  }
  return { seconds, rounds };
}

function rounded(x: number): number {
  return Number(x.toPrecision(4));
}

function percent(x: number): string {
  return `${(100 * x).toFixed(0)} %`;
}

function signedPercent(x: number): string {
  return `${x > 0 ? "+" : ""}${percent(x)}`;
}

process.exitCode = main(process.argv.slice(2));
