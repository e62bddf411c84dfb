import Benchmark from "benchmark";
import { addRational, rational } from "../src/exact/rational.js";
import { parseIrrep } from "../src/su3/irrep.js";
import { type FactorColumns, isoscalarTable, valueAt } from "../src/su3/isoscalar-factors.js";
import { varintBytes } from "./varint-bytes.js";

/**
 * Time of complete finished tables of isoscalar factors: every factor of every copy in lowest terms.
 *
 *     npx ts-node -T bench/engine.bench.ts [regular expression of case names]
 *
 * Warm times of one thread, the fastest of the samples. Each case checks its result once, and is compared with writing the same table as varint
 * bytes in the same run: that ratio depends little on the machine.
 */
const CASES: { name: string; left: string; right: string; factors: number }[] = [
  { name: "finished-table/8x8", left: "8", right: "8", factors: 86 },
  { name: "finished-table/27x27", left: "27", right: "27", factors: 1801 },
  { name: "finished-table/64x64", left: "64", right: "64", factors: 16_816 },
  { name: "finished-table/125x125", left: "125", right: "125", factors: 97_225 },
];
const SECONDS_PER_MEASUREMENT = 1;
const WARM_UP_SECONDS = 0.3;

function finishedTable(left: string, right: string): FactorColumns {
  return isoscalarTable(parseIrrep(left), parseIrrep(right)).columns();
}

/** Throws unless the table has its number of places and the squares of every multiplet add up to exactly 1. */
function check(name: string, columns: FactorColumns, factors: number): void {
  if (columns.sign.length !== factors)
    throw new Error(`${name}: ${columns.sign.length} factors, not ${factors}`);
  for (const { start, channels, threeY, twoI } of columns.segments) {
    const squares = channels
      .map((_, c) => valueAt(columns, start + c))
      .map(({ num, den }) => rational(num, den));
    const sum = squares.reduce(addRational, rational(0));
    if (sum.num !== sum.den)
      throw new Error(`${name}: squares at 3Y = ${threeY}, 2I = ${twoI} do not add up to 1`);
  }
}

/** Seconds per call in the least disturbed sample, relative error of the mean in per cent, and number of samples. */
function measured(name: string, run: () => unknown): { seconds: number; error: number; samples: number } {
  const end = performance.now() + 1e3 * WARM_UP_SECONDS;
  while (performance.now() < end) run();
  const bench = new Benchmark(name, run, { maxTime: SECONDS_PER_MEASUREMENT });
  bench.run();
  if (bench.error !== undefined) throw bench.error;
  return {
    seconds: Math.min(...bench.stats.sample),
    error: bench.stats.rme,
    samples: bench.stats.sample.length,
  };
}

function main(selection: RegExp): void {
  console.log(`Node ${process.version}, ${process.platform} ${process.arch}`);
  for (const { name, left, right, factors } of CASES.filter((entry) => selection.test(entry.name))) {
    const columns = finishedTable(left, right);
    check(name, columns, factors);
    const table = measured(name, () => finishedTable(left, right));
    const bytes = measured(name, () => varintBytes(columns));
    console.log(
      `${name.padEnd(24)} ${(table.seconds * 1e3).toFixed(3).padStart(9)} ms ±${table.error.toFixed(1)} % ` +
        `(${table.samples} samples)  ${((table.seconds * 1e6) / factors).toFixed(3)} us/factor  ` +
        `${(table.seconds / bytes.seconds).toFixed(1)} times the bytes`,
    );
  }
}

main(new RegExp(process.argv[2] ?? ""));
