import { spawnSync } from "node:child_process";
import {
  cpSync,
  existsSync,
  mkdtempSync,
  readdirSync,
  readFileSync,
  rmSync,
  symlinkSync,
  writeFileSync,
} from "node:fs";
import { tmpdir } from "node:os";
import { basename, join } from "node:path";
import { seededIntegers } from "../support/seeded-integers.js";
import { type Mutant, mutantsOf } from "./mutants.js";

/**
 * Mutation testing of src/exact, src/su2 and src/su3 on a seeded sample:
 *
 *     npx ts-node -T test/mutation/run.ts [--sample 100] [--seed 1] [--only REGEXP of file names]
 *
 * Each mutant is tried in a copy of the tree: first with the tests of its own file, then, if it lives, with all tests of
 * the three rooms. Prints every survivor and the score; exit code 1 below 85 %.
 */
const ROOMS = ["src/exact", "src/su2", "src/su3", "src/su3/engine"];
const COPIED = [
  "src",
  "test/exact",
  "test/su2",
  "test/su3",
  "test/support",
  "package.json",
  "tsconfig.json",
  "vitest.config.mts",
];
const ALL_TESTS = ["test/exact", "test/su2", "test/su3"];
const REQUIRED_SCORE = 0.85;
/** A run that takes so many times as long as all tests without a mutant is taken for endless. */
const PATIENCE = 5;

function main(args: readonly string[]): number {
  const option = (name: string, fallback: string) => {
    const at = args.indexOf(`--${name}`);
    return at < 0 ? fallback : (args[at + 1] ?? fallback);
  };
  const root = join(__dirname, "..", "..");
  const only = new RegExp(option("only", ""));
  const seed = Number(option("seed", "1"));
  const all = ROOMS.flatMap((room) => sourcesIn(root, room))
    .filter((file) => only.test(file))
    .flatMap((file) => mutantsOf(file, readFileSync(join(root, file), "utf8")));
  const sample = sampled(all, Number(option("sample", "100")), seed);
  console.log(`${sample.length} of ${all.length} mutants, seed ${seed}`);
  const copy = mkdtempSync(join(tmpdir(), "couplet-mutation-"));
  try {
    for (const name of COPIED) cpSync(join(root, name), join(copy, name), { recursive: true });
    symlinkSync(join(root, "node_modules"), join(copy, "node_modules"));
    const start = performance.now();
    if (outcome(copy, ALL_TESTS, 3_600_000) !== "survived")
      throw new Error("the tests fail without any mutant");
    const patience = Math.ceil(PATIENCE * (performance.now() - start));
    const survivors: Mutant[] = [];
    for (const [i, mutant] of sample.entries()) {
      const fate = fateOf(copy, mutant, patience);
      if (fate === "survived") survivors.push(mutant);
      console.log(`${i + 1}/${sample.length} ${fate} ${described(mutant)}`);
    }
    const score = 1 - survivors.length / sample.length;
    console.log(`\nscore ${(100 * score).toFixed(1)} %, ${survivors.length} survivors of ${sample.length}`);
    for (const mutant of survivors) console.log(`  ${described(mutant)}`);
    return score >= REQUIRED_SCORE ? 0 : 1;
  } finally {
    rmSync(copy, { recursive: true });
  }
}

function sourcesIn(root: string, room: string): string[] {
  return readdirSync(join(root, room))
    .filter((name) => name.endsWith(".ts"))
    .map((name) => `${room}/${name}`);
}

/** Distinct mutants in random order, every one as likely as any other. */
function sampled(mutants: readonly Mutant[], count: number, seed: number): Mutant[] {
  const random = seededIntegers(seed);
  const rest = [...mutants];
  return Array.from(
    { length: Math.min(count, rest.length) },
    () => rest.splice(random.below(rest.length), 1)[0]!,
  );
}

function fateOf(copy: string, mutant: Mutant, patience: number): Outcome {
  const path = join(copy, mutant.file);
  const text = readFileSync(path, "utf8");
  writeFileSync(path, text.slice(0, mutant.start) + mutant.replacement + text.slice(mutant.end));
  try {
    const own = ownTests(copy, mutant.file);
    const first = own.length === 0 ? "survived" : outcome(copy, own, patience);
    return first === "survived" ? outcome(copy, ALL_TESTS, patience) : first;
  } finally {
    writeFileSync(path, text);
  }
}

/** The test file that mirrors a source file, or the tests of its folder and of the tables for the engine. */
function ownTests(copy: string, file: string): string[] {
  if (file.startsWith("src/su3/engine/")) return ["test/su3/engine", "test/su3/isoscalar-factors.test.ts"];
  const folder = file.split("/").slice(1, -1).join("/");
  const mirror = `test/${folder}/${basename(file, ".ts")}.test.ts`;
  return existsSync(join(copy, mirror)) ? [mirror] : [];
}

/** `survived` if the tests pass, `killed` if one fails, `endless` if they do not end; only the first is a gap. */
type Outcome = "survived" | "killed" | "endless";

function outcome(copy: string, tests: readonly string[], patience: number): Outcome {
  const vitest = join(copy, "node_modules", "vitest", "vitest.mjs");
  const flags = [
    "--bail",
    "1",
    "--pool",
    "threads",
    "--no-isolate",
    "--no-file-parallelism",
    "--reporter",
    "dot",
  ];
  const { status } = spawnSync(process.execPath, [vitest, "run", "--root", copy, ...flags, ...tests], {
    cwd: copy,
    timeout: patience,
    killSignal: "SIGKILL",
    stdio: "ignore",
  });
  return status === 0 ? "survived" : status === null ? "endless" : "killed";
}

function described({ file, line, original, replacement }: Mutant): string {
  return `${file}:${line}  ${oneLine(original)}  ->  ${oneLine(replacement)}`;
}

function oneLine(text: string): string {
  return text.replace(/\s+/g, " ").slice(0, 60);
}

process.exitCode = main(process.argv.slice(2));
