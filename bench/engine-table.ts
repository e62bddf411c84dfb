import { formatRoot } from "../src/exact/signed-root.js";
import { parseIrrep } from "../src/su3/irrep.js";
import { isoscalarTable } from "../src/su3/isoscalar-factors.js";
import { encodeFactors } from "../src/tables/encode-factors.js";
import { ladderCopies, ladderProduct } from "../test/support/ladder-table.js";
import { type ColdRun, coldRun } from "./cold-start.js";
import { checkDense, denseProduct, denseSquares, denseStates } from "./dense-baseline.js";
import { checkFinished } from "./engine-cases.js";
import { measured, timeText, warmUp } from "./measure.js";
import { varintBytes } from "./varint-bytes.js";

/**
 * The engine's table of results in Markdown: `npx ts-node -T bench/engine-table.ts [--quick]`; needs `npm run build`.
 *
 * Finished: every factor of every copy as sign, numerator and denominator in lowest terms. Divided, within the same run,
 * by encoding that table to the bytes of a `couplet.v1.FactorTable` file, and by writing it as plain varints, the
 * shortest serialisation there is. Two rivals, both exact on all product states and checked to give the same answer:
 * dense is elimination without fractions, lowering and squares in lowest terms, but leaves copies as they come; complete
 * works in fractions and ends with every signed factor of every copy. Warm times, the fastest of the samples of one
 * thread.
 */
const ROWS = [
  { name: "8x8", irrep: "8", factors: 86 },
  { name: "27x27", irrep: "27", factors: 1801 },
  { name: "64x64", irrep: "64", factors: 16_816 },
  { name: "125x125", irrep: "125", factors: 97_225 },
  { name: "(5,5)x(5,5)", irrep: "5,5", factors: 411_286 },
  { name: "(6,6)x(6,6)", irrep: "6,6", factors: 1_397_921 },
];

/** Rows from here on give the growth of cost with the number of factors: (n,n)x(n,n), n = 3..6. */
const GROWTH_FROM = 2;

interface Row {
  readonly factors: number;
  readonly seconds: number;
}

function main(quick: boolean): void {
  console.log(`Node ${process.version}, ${process.platform} ${process.arch}\n`);
  console.log(
    "| product | factors | copies | finished | us/factor | / file bytes | / varints | dense / finished | complete / finished |",
  );
  console.log("| --- | --- | --- | --- | --- | --- | --- | --- | --- |");
  const rows = ROWS.map((row) => measuredRow(row, quick));
  const exponent = slope(rows.slice(GROWTH_FROM));
  console.log(`\nGrowth over (n,n)x(n,n), n = 3..6: time ~ factors^${exponent.toFixed(2)}.`);
  const big = { p: 6, q: 6 };
  const alone = measured("one irrep", () => isoscalarTable(big, big, { into: big }).columns());
  console.log(`(6,6) in (6,6)x(6,6), 7 copies, without the other irreps: ${timeText(alone.seconds)}.\n`);
  console.log("| cold process | loading | first table | memory held |");
  console.log("| --- | --- | --- | --- |");
  for (const n of [1, 2, 3, 4, 6]) console.log(coldRow(n, coldRun(n, n, n < 6 ? 10 : 3)));
}

function measuredRow({ name, irrep: label, factors }: (typeof ROWS)[number], quick: boolean): Row {
  const irrep = parseIrrep(label);
  const finished = () => isoscalarTable(irrep, irrep).columns();
  const table = isoscalarTable(irrep, irrep);
  const columns = table.columns();
  if (factors < 100_000) checkFinished(name, columns, factors);
  warmUp(finished, 0.5);
  const seconds = measured(name, finished, 2).seconds;
  warmUp(() => varintBytes(columns), 0.2);
  const varints = measured(`${name} varints`, () => varintBytes(columns)).seconds;
  const file = measured(`${name} file`, () => encodeFactors(table, { states: false })).seconds;
  const dense = factors < (quick ? 10_000 : 100_000) ? denseSeconds(label, factors) : undefined;
  const complete = factors < (quick ? 10_000 : 20_000) ? completeSeconds(label) : undefined;
  const copies = table.series.reduce((sum, { multiplicity }) => sum + multiplicity, 0);
  const cells = [
    name,
    factors,
    copies,
    timeText(seconds),
    ((seconds * 1e6) / factors).toFixed(2),
    (seconds / file).toPrecision(2),
    (seconds / varints).toPrecision(2),
    ...[dense, complete].map((slow) => (slow === undefined ? "" : (slow / seconds).toPrecision(2))),
  ];
  console.log(`| ${cells.join(" | ")} |`);
  return { factors, seconds };
}

/** The dense way, checked against the engine's table where that takes seconds rather than minutes. */
function denseSeconds(label: string, factors: number): number {
  const irrep = parseIrrep(label);
  const product = denseProduct(irrep, irrep);
  const run = () => {
    const states = denseStates(product, irrep, irrep);
    for (const state of states) denseSquares(product, state);
    return states;
  };
  if (factors < 100_000) checkDense(product, run(), isoscalarTable(irrep, irrep));
  if (factors < 10_000) return measured(`${label} dense`, run).seconds;
  // One run of seconds: what V8 compiled in smaller products serves here too.
  const start = performance.now();
  run();
  return (performance.now() - start) / 1e3;
}

/** The complete rival; its factors are compared with the engine's one by one. */
function completeSeconds(label: string): number {
  const irrep = parseIrrep(label);
  const table = isoscalarTable(irrep, irrep);
  const start = performance.now();
  const product = ladderProduct(irrep, irrep);
  const copies = table.series.map((entry) => ({ ...entry, found: ladderCopies(product, entry.irrep) }));
  const seconds = (performance.now() - start) / 1e3;
  const found = new Map<string, string>();
  for (const { irrep: into, found: list } of copies) {
    list.forEach((copy, i) => {
      for (const [labels, value] of copy) found.set(`${into.p},${into.q} ${i + 1} ${labels}`, value);
    });
  }
  let same = 0;
  for (const { irrep: into, copy, value, ...x } of table.factors()) {
    const labels = `${x.threeY},${x.twoI}|${x.threeY1},${x.twoI1},${x.threeY2},${x.twoI2}`;
    if (found.get(`${into.p},${into.q} ${copy} ${labels}`) === formatRoot(value)) same++;
  }
  if (same !== found.size) throw new Error(`${label}: ${found.size - same} factors differ`);
  return seconds;
}

/** Least-squares slope of log time against log number of factors. */
function slope(rows: readonly Row[]): number {
  const x = rows.map(({ factors }) => Math.log(factors));
  const y = rows.map(({ seconds }) => Math.log(seconds));
  const mean = (values: number[]) => values.reduce((sum, value) => sum + value, 0) / values.length;
  const [mx, my] = [mean(x), mean(y)];
  const xy = x.reduce((sum, value, i) => sum + (value - mx) * (y[i]! - my), 0);
  return xy / x.reduce((sum, value) => sum + (value - mx) ** 2, 0);
}

function coldRow(n: number, { loadMs, tableMs, residentMb }: ColdRun): string {
  const cells = [`(${n},${n})x(${n},${n})`, `${loadMs.toFixed(1)} ms`, `${tableMs.toFixed(1)} ms`];
  return `| ${[...cells, `${residentMb.toFixed(0)} MB`].join(" | ")} |`;
}

main(process.argv.includes("--quick"));
