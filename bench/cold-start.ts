import { execFileSync } from "node:child_process";
import { join } from "node:path";

/** What a fresh process needs for one table: milliseconds, and the memory it held at most. */
export interface ColdRun {
  /** Reading and compiling the engine's modules. */
  readonly loadMs: number;
  /** The first finished table. */
  readonly tableMs: number;
  readonly residentMb: number;
}

const SCRIPT = `
const { performance } = require("node:perf_hooks");
const [module, p, q] = process.argv.slice(1);
const start = performance.now();
const { isoscalarTable } = require(module);
const loaded = performance.now();
const irrep = { p: Number(p), q: Number(q) };
isoscalarTable(irrep, irrep).columns();
const done = performance.now();
// Not resourceUsage().maxRSS: a new process inherits that from the one that started it.
const status = require("node:fs").readFileSync("/proc/self/status", "utf8");
const residentMb = Number(/VmHWM:\\s+(\\d+)/.exec(status)[1]) / 1024;
console.log(JSON.stringify({ loadMs: loaded - start, tableMs: done - loaded, residentMb }));`;

/** The fastest of several fresh processes that make the finished table of (p,q) x (p,q) with the compiled package. */
export function coldRun(p: number, q: number, processes: number): ColdRun {
  const module = join(__dirname, "..", "dist", "su3", "isoscalar-factors.js");
  const runs = Array.from({ length: processes }, (): ColdRun => {
    const output = execFileSync(process.execPath, ["-e", SCRIPT, module, String(p), String(q)]);
    return JSON.parse(output.toString());
  });
  return {
    loadMs: Math.min(...runs.map(({ loadMs }) => loadMs)),
    tableMs: Math.min(...runs.map(({ tableMs }) => tableMs)),
    residentMb: Math.max(...runs.map(({ residentMb }) => residentMb)),
  };
}
