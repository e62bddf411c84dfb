// Speed of the sidecar as ratios against an echo service: same library, same sizes of messages, same clients.
//
//     ts-node -T bench/sidecar/run.ts [--rounds N] [--seconds S] [--rows N] [--only PATTERN] [--cpp LOAD_CLIENT]
//
// Needs `npm run build`. --rows: rows evaluated before memory is looked at again (default 10 million). --cpp: a compiled
// load-client.cpp; without it the C++ rows are missing. Rounds alternate between the two servers, so that what else the
// machine does meets both; a ratio is the median over rounds, with its smallest and largest.
import { type ChildProcess, execFileSync, spawn } from "node:child_process";
import { readFileSync } from "node:fs";
import { join } from "node:path";
import { performance } from "node:perf_hooks";
import { parseArgs } from "node:util";
import { SidecarClient } from "../../src/clients/typescript/couplet-sidecar.js";
import { couplet } from "../../src/gen/couplet.js";
import { payloadBytes } from "./echo-server.js";

import v1 = couplet.v1;

const { values } = parseArgs({
  options: {
    rounds: { type: "string", default: "5" },
    seconds: { type: "string", default: "3" },
    rows: { type: "string", default: "10000000" },
    cpp: { type: "string" },
    only: { type: "string", default: "" },
  },
});
const ROUNDS = Number(values.rounds);
const SECONDS = Number(values.seconds);
const ROOT = join(__dirname, "..", "..");
const PARENT = { name: "Sigma(1385)0" };
const SERVICE = "/couplet.v1.SidecarService";

interface Load {
  readonly perSecond: number;
  readonly p50Ms: number;
  readonly p99Ms: number;
  /** Of the warm-up too. */
  readonly answers: number;
  /** Processor time of the server for one answer. */
  readonly serverMicroseconds: number;
}

interface Case {
  readonly name: string;
  readonly client: "js" | "cpp";
  readonly mode: "unary" | "stream";
  readonly concurrency: number;
  readonly method: string;
  readonly request: Uint8Array;
  readonly responseBytes: number;
  readonly atLeast: number;
}

function masses(count: number): number[] {
  return Array.from({ length: count }, (_, k) => 1300 + k);
}

function cases(rowCount: number): Case[] {
  const list = (length: number) => new Array<number>(length).fill(1);
  const tableSha256 = new Uint8Array(32);
  const single = {
    method: "EvaluateWidths",
    mode: "unary" as const,
    request: v1.EvaluateWidthsRequest.encode({ parent: PARENT, mass: 1390 }).finish(),
    responseBytes: v1.EvaluateWidthsResponse.encode({
      tableSha256,
      totalWidth: 1,
      widths: list(rowCount),
      fractions: list(rowCount),
    }).finish().length,
    atLeast: 0.85,
  };
  const batch = {
    method: "EvaluateWidthsStream",
    mode: "stream" as const,
    request: v1.EvaluateWidthsStreamRequest.encode({ parent: PARENT, masses: masses(100) }).finish(),
    responseBytes: v1.EvaluateWidthsStreamResponse.encode({
      tableSha256,
      totalWidths: list(100),
      widths: list(100 * rowCount),
      fractions: list(100 * rowCount),
    }).finish().length,
    atLeast: 0.7,
  };
  const clients = values.cpp === undefined ? (["js"] as const) : (["js", "cpp"] as const);
  return clients.flatMap((client) => [
    { name: `single query, ${client} client, 1 at a time`, client, concurrency: 1, ...single },
    { name: `single query, ${client} client, 16 at a time`, client, concurrency: 16, ...single },
    { name: `stream of batches of 100, ${client} client, 16 under way`, client, concurrency: 16, ...batch },
  ]);
}

function load(one: Case, server: { port: number; pid: number }, path: string, request: Uint8Array): Load {
  const hex = Buffer.from(request).toString("hex");
  const args = [`127.0.0.1:${server.port}`, path, one.mode, String(one.concurrency), String(SECONDS), hex];
  const before = processorSeconds(server.pid);
  const text =
    one.client === "cpp"
      ? execFileSync(values.cpp!, args, { encoding: "utf8" })
      : execFileSync(process.execPath, [tsNode(), "-T", join(__dirname, "load-client.ts"), ...args], {
          encoding: "utf8",
        });
  const result = JSON.parse(text) as Load;
  const used = processorSeconds(server.pid) - before;
  return { ...result, serverMicroseconds: (1e6 * used) / result.answers };
}

function tsNode(): string {
  return require.resolve("ts-node/dist/bin.js");
}

/** Starts a child and reads its port from the first line that has one. */
function started(child: ChildProcess, pattern: RegExp): Promise<number> {
  return new Promise((resolve, reject) => {
    let text = "";
    const read = (chunk: Buffer) => {
      text += chunk.toString();
      const port = pattern.exec(text)?.[1];
      if (port !== undefined) resolve(Number(port));
    };
    child.stdout?.on("data", read);
    child.stderr?.on("data", read);
    child.once("exit", () => reject(new Error(`the server ended: ${text}`)));
  });
}

function sidecar(): ChildProcess {
  const command = join(ROOT, "dist", "cli", "main.js");
  return spawn(process.execPath, [command, "serve", "--listen", "127.0.0.1:0", "--metrics", "none"]);
}

function echo(replyBytes: number): ChildProcess {
  return spawn(process.execPath, [tsNode(), "-T", join(__dirname, "echo-server.ts"), String(replyBytes)]);
}

/** User and system time of a process, in the clock's hundredths of a second. */
function processorSeconds(pid: number): number {
  const fields = readFileSync(`/proc/${pid}/stat`, "utf8").split(") ")[1]!.split(" ");
  return (Number(fields[11]) + Number(fields[12])) / 100;
}

function residentMiB(pid: number): number {
  const line = /^VmRSS:\s+(\d+) kB/m.exec(readFileSync(`/proc/${pid}/status`, "utf8"));
  return Number(line?.[1]) / 1024;
}

function spread(values: readonly number[]): string {
  const sorted = [...values].sort((a, b) => a - b);
  const f = (x: number | undefined) => (x ?? Number.NaN).toFixed(2);
  return `${f(sorted[Math.floor(sorted.length / 2)])} (${f(sorted[0])} to ${f(sorted.at(-1))})`;
}

async function compare(one: Case, server: { port: number; pid: number }): Promise<void> {
  const rival = echo(one.responseBytes);
  const rivalPort = await started(rival, /^(\d+)$/m);
  const payload = new Uint8Array(payloadBytes(one.request.length)).fill(1);
  const rivalRequest = Buffer.concat([
    Buffer.from(one.request.length < 130 ? [0x0a, payload.length] : varintHead(payload.length)),
    payload,
  ]);
  const rivalPath = one.mode === "stream" ? "/echo.Echo/EchoStream" : "/echo.Echo/Echo";
  const rounds = Array.from({ length: ROUNDS }, () => ({
    echo: load(one, { port: rivalPort, pid: rival.pid! }, rivalPath, rivalRequest),
    ours: load(one, server, `${SERVICE}/${one.method}`, one.request),
  }));
  rival.kill();
  const ratio = spread(rounds.map(({ ours, echo }) => ours.perSecond / echo.perSecond));
  const tail = spread(rounds.map(({ ours, echo }) => ours.p99Ms / echo.p99Ms));
  const cost = spread(rounds.map(({ ours, echo }) => echo.serverMicroseconds / ours.serverMicroseconds));
  const time = spread(rounds.map(({ ours }) => ours.serverMicroseconds));
  const rate = spread(rounds.map(({ ours }) => ours.perSecond));
  process.stdout.write(
    `${one.name} (${one.request.length} -> ${one.responseBytes} bytes)\n` +
      `  rate ${ratio} of the echo's, at least ${one.atLeast} wanted; ${rate} a second\n` +
      `  answers per second of the server's processor time ${cost} of the echo's; ${time} microseconds each\n` +
      `  p99 ${tail} times the echo's, at most 2 wanted\n`,
  );
}

/** Tag and length of a bytes field longer than 127. */
function varintHead(length: number): number[] {
  return [0x0a, (length & 0x7f) | 0x80, length >> 7];
}

async function memory(port: number, pid: number, rowCount: number): Promise<void> {
  const client = new SidecarClient(`127.0.0.1:${port}`);
  const stream = client.widthsStream();
  const request = { parent: PARENT, masses: masses(100) };
  const evaluate = async (rows: number) => {
    const answers = Math.ceil(rows / (100 * rowCount));
    for (let k = 0; k < answers; k += 16)
      await Promise.all(Array.from({ length: 16 }, () => stream.ask(request)));
  };
  await evaluate(1_000_000);
  const before = residentMiB(pid);
  await evaluate(Number(values.rows));
  const after = residentMiB(pid);
  stream.end();
  client.close();
  process.stdout.write(
    `memory: ${before.toFixed(1)} MiB after a million rows, ${after.toFixed(1)} MiB after ${values.rows} more: ${((100 * after) / before - 100).toFixed(1)} %, at most 10 % wanted\n`,
  );
}

async function main(): Promise<void> {
  const began = performance.now();
  const child = sidecar();
  const port = await started(child, /127\.0\.0\.1:(\d+)/);
  const startSeconds = (performance.now() - began) / 1000;
  const client = new SidecarClient(`127.0.0.1:${port}`);
  const rowCount = (await client.decayTable(PARENT.name)).parent.rows.length;
  client.close();
  process.stdout.write(
    `Node ${process.version}; ${ROUNDS} rounds of ${SECONDS} s; ${PARENT.name} with ${rowCount} rows\n` +
      `start with the built-in tables: ${startSeconds.toFixed(2)} s, ${processorSeconds(child.pid!).toFixed(2)} s of processor time\n`,
  );
  const wanted = cases(rowCount).filter(({ name }) => new RegExp(values.only).test(name));
  for (const one of wanted) await compare(one, { port, pid: child.pid! });
  await memory(port, child.pid!, rowCount);
  child.kill("SIGTERM");
}

main().catch((error: unknown) => {
  process.stderr.write(`${error instanceof Error ? error.stack : String(error)}\n`);
  process.exit(1);
});
