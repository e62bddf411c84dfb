import { execFileSync } from "node:child_process";
import { mkdtempSync, readFileSync, rmSync, statSync } from "node:fs";
import { loadavg, tmpdir } from "node:os";
import { join } from "node:path";
import { complete } from "../src/completion/complete.js";
import { WHOLE } from "../src/completion/parts-per-billion.js";
import type { ParentTable, Row, Tables } from "../src/completion/tables.js";
import { couplet } from "../src/gen/couplet.js";
import { fitModel } from "../src/model/fit-model.js";
import { resolveStudy } from "../src/model/resolve-study.js";
import { readStudy } from "../src/study/read-study.js";
import { decodeDecays } from "../src/tables/decode-decays.js";
import { decayPieces, decaysMessage, encodeDecays } from "../src/tables/encode-decays.js";
import { sealedPieces } from "../src/tables/sealed-bytes.js";
import { writeWholePieces } from "../src/tables/whole-file.js";
import { requireResult } from "./bench-case.js";
import { timeText } from "./measure.js";

import Message = couplet.v1.DecayTables;

/**
 * Decay tables of the size of a production: `npx ts-node -T bench/scale.bench.ts`, after `npm run build`.
 *
 * 1. 300 parents of 20 rows with grids of 200 points: file size, and the times of writing (tables to bytes, digest
 *    included) and reading (digest and sums checked) against plain encoding and decoding of the same message by
 *    protobufjs. Goals: 2 and 1.5 times.
 * 2. 100 to 10,000 such parents, streamed to a file and back: time for one row, how it grows (goal: rows^1.05 at most),
 *    and the memory a fresh process needs to read.
 * Times are processor times, the least of several rounds.
 */
function main(): void {
  console.log(`Node ${process.version}, load ${loadavg()[0]!.toFixed(1)}`);
  const pattern = patternRows();
  againstPlainProtobuf(pattern);
  const folder = mkdtempSync(join(tmpdir(), "couplet-scale-"));
  try {
    growth(pattern, folder);
  } finally {
    rmSync(folder, { recursive: true });
  }
}

const ROWS = 20;
const POINTS = 200;

interface Pattern {
  readonly tables: Tables;
  readonly parent: ParentTable;
  readonly rows: readonly Row[];
}

/** Twenty rows with grids of 200 points, from the real rows of a decuplet. */
function patternRows(): Pattern {
  const file = join(__dirname, "..", "test", "chain", "studies", "decuplet.yaml");
  const tables = complete(fitModel(resolveStudy(readStudy(readFileSync(file), file))), 0);
  const parent = tables.parents.find(({ parent: { hadron } }) => hadron.name === "Sigma(1385)0")!;
  const real = tables.parents
    .flatMap(({ rows }) => rows)
    .filter(({ grid, waves }) => grid !== undefined && waves.length > 0);
  const rows = Array.from({ length: ROWS }, (_, k): Row => {
    const row = real[k % real.length]!;
    const steps = Array.from({ length: POINTS }, (_, point) => (point + 1) * (1 + k / 100));
    const grid = {
      thresholdMeV: row.grid!.thresholdMeV,
      distancesMeV: steps,
      logWidths: steps.map((x) => 1.5 * Math.log(x)),
      slopes: steps.map(() => 1.5),
    };
    return { ...row, grid, partsPerBillion: WHOLE / ROWS };
  });
  return { tables, parent, rows };
}

function* parents({ parent, rows }: Pattern, count: number): Generator<ParentTable> {
  for (let k = 0; k < count; k++) {
    const hadron = { ...parent.parent.hadron, name: `X(${k})` };
    yield {
      ...parent,
      parent: { ...parent.parent, hadron },
      rows: rows.map((row, r) => ({ ...row, id: `X(${k}) -> channel ${r}` })),
    };
  }
}

function againstPlainProtobuf(pattern: Pattern): void {
  const tables: Tables = { ...pattern.tables, parents: [...parents(pattern, 300)] };
  const message = decaysMessage(tables);
  const bytes = encodeDecays(tables);
  const plain = Message.encode(message).finish();
  requireResult("scale", bytes.length === plain.length + 35, `${bytes.length} and ${plain.length} bytes`);
  requireResult("scale", decodeDecays(bytes, "f").parents.length === 300, "parents");
  const actions = {
    write: () => encodeDecays(tables),
    encode: () => Message.encode(message).finish(),
    read: () => decodeDecays(bytes, "f"),
    decode: () => Message.decode(bytes),
  };
  const least = { write: Infinity, encode: Infinity, read: Infinity, decode: Infinity };
  for (let round = 0; round < 25; round++) {
    for (const name of ["write", "encode", "read", "decode"] as const) {
      least[name] = Math.min(least[name], processorSeconds(actions[name]));
    }
  }
  const perPoint = bytes.length / (300 * ROWS * POINTS);
  console.log(
    `300 parents x ${ROWS} rows x ${POINTS} points: ${(bytes.length / 1e6).toFixed(1)} MB, ${perPoint.toFixed(1)} bytes a point\n` +
      `  write ${timeText(least.write)}, ${(least.write / least.encode).toFixed(2)} times plain encoding (${timeText(least.encode)}); goal 2\n` +
      `  read  ${timeText(least.read)}, ${(least.read / least.decode).toFixed(2)} times plain decoding (${timeText(least.decode)}); goal 1.5`,
  );
}

function processorSeconds(run: () => unknown): number {
  const start = process.cpuUsage();
  run();
  const { user, system } = process.cpuUsage(start);
  return (user + system) / 1e6;
}

const READER = `
const { openDecays } = require(process.argv[1]);
const before = process.cpuUsage();
const file = openDecays(process.argv[2]);
let rows = 0;
for (const parent of file.parents()) rows += parent.rows.length;
const { user, system } = process.cpuUsage(before);
const status = require("node:fs").readFileSync("/proc/self/status", "utf8");
console.log(JSON.stringify({ rows, seconds: (user + system) / 1e6, megabytes: Number(/VmHWM:\\s+(\\d+)/.exec(status)[1]) / 1024 }));`;

function growth(pattern: Pattern, folder: string): void {
  const counts = [100, 1000, 10_000];
  const file = join(folder, "scale.decays.pb");
  const module = join(__dirname, "..", "dist", "tables", "stream-decays.js");
  const points = counts.map((count) => {
    const write = () =>
      writeWholePieces(
        file,
        sealedPieces(decayPieces({ ...pattern.tables, parents: parents(pattern, count) })),
      );
    const writeSeconds = Math.min(...Array.from({ length: 3 }, () => processorSeconds(write)));
    const reads = Array.from({ length: 3 }, () => {
      const text = execFileSync(process.execPath, ["-e", READER, module, file], { encoding: "utf8" });
      return JSON.parse(text) as { rows: number; seconds: number; megabytes: number };
    });
    requireResult("scale", reads[0]!.rows === count * ROWS, `${reads[0]!.rows} rows`);
    const readSeconds = Math.min(...reads.map(({ seconds }) => seconds));
    const megabytes = Math.max(...reads.map((read) => read.megabytes));
    const rows = count * ROWS;
    console.log(
      `${String(count).padStart(6)} parents: ${(statSync(file).size / 1e6).toFixed(0)} MB, streamed write ${timeText(writeSeconds / rows)} a row, ` +
        `streamed read ${timeText(readSeconds / rows)} a row, reader held ${megabytes.toFixed(0)} MB at most`,
    );
    return { rows, writeSeconds, readSeconds };
  });
  const exponent = (seconds: (point: (typeof points)[number]) => number) =>
    Math.log(seconds(points.at(-1)!) / seconds(points[0]!)) / Math.log(points.at(-1)!.rows / points[0]!.rows);
  console.log(
    `time grows as rows^${exponent(({ writeSeconds }) => writeSeconds).toFixed(2)} in writing and rows^${exponent(({ readSeconds }) => readSeconds).toFixed(2)} in reading; goal 1.05`,
  );
}

main();
