import { type ChildProcess, spawn } from "node:child_process";
import { existsSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { connect as connectHttp2 } from "node:http2";
import { createServer, type Server } from "node:net";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { Client, credentials } from "@grpc/grpc-js";
import { afterEach, beforeEach, describe, expect, test } from "vitest";
import { SidecarClient } from "../../src/clients/typescript/couplet-sidecar.js";
import { digestOf } from "../../src/tables/sealed-bytes.js";
import { builtInFiles, failure, retitled, until } from "./running.js";

const COMMAND = join(__dirname, "..", "..", "dist", "cli", "main.js");
const UNAVAILABLE = 14;

let folder: string;
const children: ChildProcess[] = [];

beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), "couplet-serve-"));
});
afterEach(() => {
  for (const child of children.splice(0)) child.kill("SIGKILL");
  rmSync(folder, { recursive: true, force: true });
});

interface Served {
  readonly child: ChildProcess;
  readonly address: string;
  readonly exit: Promise<number | null>;
  log(): string;
}

function spawned(args: readonly string[]): Omit<Served, "address"> {
  const child = spawn(process.execPath, [COMMAND, "serve", "--metrics", "none", ...args]);
  children.push(child);
  let text = "";
  child.stderr.on("data", (chunk) => {
    text += String(chunk);
  });
  return { child, log: () => text, exit: new Promise((resolve) => child.once("exit", resolve)) };
}

/** `couplet serve`, once it serves. */
async function served(...args: readonly string[]): Promise<Served> {
  const started = spawned(args.includes("--listen") ? args : [...args, "--listen", "127.0.0.1:0"]);
  const address = () => /"address":"([^"]+)"/.exec(started.log())?.[1];
  await until(() => address() !== undefined || started.child.exitCode !== null, 50_000);
  if (address() === undefined) throw new Error(started.log());
  return { ...started, address: address()! };
}

/** What a start that must fail printed, and its exit code. */
async function refused(...args: readonly string[]): Promise<{ code: number | null; text: string }> {
  const started = spawned(args);
  return { code: await started.exit, text: started.log() };
}

const FILE = () => builtInFiles()[0]!;
const ASK = { parent: { name: "rho(770)0" }, masses: [800] };

test("without a file it serves the built-in tables", async () => {
  const { address } = await served();
  const client = new SidecarClient(address);
  const table = await client.check(digestOf(readFileSync(FILE())));
  expect(table.file).toBe("built in");
  expect((await client.widths("Delta(1232)++", 1232)).totalWidth).toBeCloseTo(117, 6);
  client.close();
});

describe("signals", () => {
  test("SIGTERM lets a running stream finish, takes no new call and ends with exit code 0", async () => {
    const { child, address, exit } = await served(FILE());
    const client = new SidecarClient(address);
    const stream = client.widthsStream();
    await stream.ask(ASK);
    child.kill("SIGTERM");
    const late = new SidecarClient(address);
    await until(
      async () => (await failure(late.listTables()).catch(() => ({ code: 0 }))).code === UNAVAILABLE,
    );
    const answers = await Promise.all(Array.from({ length: 20 }, () => stream.ask(ASK)));
    expect(answers).toHaveLength(20);
    stream.end();
    expect(await exit).toBe(0);
    client.close();
    late.close();
  });

  test("SIGTERM ends what still runs after --drain-seconds", async () => {
    const { child, address, exit, log } = await served(FILE(), "--drain-seconds", "1");
    const client = new SidecarClient(address);
    const stream = client.widthsStream();
    await stream.ask(ASK);
    child.kill("SIGTERM");
    expect(await exit).toBe(0);
    expect(log()).toContain("calls still ran at the end of the time to drain");
    expect((await failure(stream.ask(ASK))).code).toBeGreaterThan(0);
    client.close();
  });

  test("SIGTERM does not wait for a client that only watches the health", async () => {
    const { child, address, exit, log } = await served(FILE());
    const client = new Client(address, credentials.createInsecure());
    const same = (bytes: Buffer) => bytes;
    const watch = client.makeServerStreamRequest("/grpc.health.v1.Health/Watch", same, same, Buffer.alloc(0));
    const seen: number[] = [];
    watch.on("data", (status: Buffer) => seen.push(status[1]!));
    watch.on("error", () => {});
    await until(() => seen.length === 1);
    child.kill("SIGTERM");
    expect(await exit).toBe(0);
    expect(log()).not.toContain("calls still ran");
    // SERVING, then NOT_SERVING.
    expect(seen).toEqual([1, 2]);
    client.close();
  });

  test("SIGINT drains too, with exit code 130", async () => {
    const { child, exit } = await served(FILE());
    child.kill("SIGINT");
    expect(await exit).toBe(130);
  });

  test("SIGHUP serves a newly written file, and says in the log why it does not serve a damaged one", async () => {
    const file = join(folder, "tables.pb");
    const original = readFileSync(FILE());
    writeFileSync(file, original);
    const { child, address, log } = await served(file);
    const client = new SidecarClient(address);
    const fresh = retitled(original, "fresh");
    writeFileSync(file, fresh);
    child.kill("SIGHUP");
    await until(() => log().includes("tables replaced"));
    expect((await client.check(digestOf(fresh))).header?.title).toBe("fresh");
    writeFileSync(file, fresh.subarray(100));
    child.kill("SIGHUP");
    await until(() => log().includes("replacement refused; the old tables stay"));
    expect((await client.check(digestOf(fresh))).header?.title).toBe("fresh");
    client.close();
  });
});

describe("kill -9", () => {
  test("of the server in the middle of a stream is an UNAVAILABLE for its client, which another server answers", async () => {
    const socket = join(folder, "s.sock");
    const first = await served(FILE(), "--listen", `unix:${socket}`);
    const client = new SidecarClient(first.address);
    const stream = client.widthsStream();
    await stream.ask(ASK);
    first.child.kill("SIGKILL");
    const { code } = await failure(stream.ask(ASK));
    expect([UNAVAILABLE, 1]).toContain(code);
    expect(existsSync(socket)).toBe(true);
    const second = await served(FILE(), "--listen", `unix:${socket}`);
    const again = new SidecarClient(second.address);
    expect((await again.widths("rho(770)0", 800)).totalWidth).toBeGreaterThan(0);
    client.close();
    again.close();
  });

  test("of a client in the middle of a stream leaves the server whole, and its streams closed", async () => {
    const { address, log } = await served(FILE(), "--log-level", "debug");
    const script = `
      const { Client, credentials } = require(${JSON.stringify(require.resolve("@grpc/grpc-js"))});
      const same = (bytes) => bytes;
      const client = new Client(process.argv[1], credentials.createInsecure());
      const call = client.makeBidiStreamRequest("/couplet.v1.SidecarService/DrawChannelsStream", same, same);
      const request = Buffer.from([0x0a, 0x0b, 0x12, 0x09, ...Buffer.from("rho(770)0"), 0x20, 0xa0, 0x8d, 0x06]);
      call.on("data", () => { process.stdout.write("."); call.write(request); });
      for (let k = 0; k < 10; k++) call.write(request);`;
    const client = spawn(process.execPath, ["-e", script, address]);
    children.push(client);
    await new Promise((resolve) => client.stdout.once("data", resolve));
    client.kill("SIGKILL");
    const other = new SidecarClient(address);
    expect((await other.widths("rho(770)0", 800)).totalWidth).toBeGreaterThan(0);
    expect(log()).not.toContain("a bug");
    other.close();
  });
});

describe("memory of the server", () => {
  const residentMiB = (child: ChildProcess) =>
    Number(/^VmRSS:\s+(\d+)/m.exec(readFileSync(`/proc/${child.pid}/status`, "utf8"))?.[1]) / 1024;

  test("stays flat against a client that asks and never reads", async () => {
    const { child, address } = await served(FILE());
    const http2 = connectHttp2(`http://${address}`);
    http2.on("error", () => {});
    const masses = Buffer.alloc(8000);
    for (let k = 0; k < 1000; k++) masses.writeDoubleLE(1300, 8 * k);
    const name = Buffer.from("Sigma(1385)0");
    const message = Buffer.concat([
      Buffer.from([0x0a, name.length + 2, 0x12, name.length]),
      name,
      Buffer.from([0x12, 0xc0, 0x3e]),
      masses,
    ]);
    const frame = Buffer.concat([
      Buffer.from([0, 0, 0, message.length >> 8, message.length & 0xff]),
      message,
    ]);
    const before = residentMiB(child);
    // 1,400 answers of 150 kB: 210 MB without a limit; it is 16 MiB.
    for (let k = 0; k < 1400; k++) {
      const stream = http2.request({
        ":method": "POST",
        ":path": "/couplet.v1.SidecarService/EvaluateWidthsBatch",
        "content-type": "application/grpc",
        te: "trailers",
      });
      stream.on("error", () => {});
      stream.end(frame);
    }
    const reader = new SidecarClient(address);
    for (let k = 0; k < 30; k++) {
      expect((await reader.widths("rho(770)0", 800)).totalWidth).toBeGreaterThan(0);
      await new Promise((resolve) => setTimeout(resolve, 50));
    }
    expect(residentMiB(child) - before).toBeLessThan(120);
    reader.close();
    http2.destroy();
  });
});

describe("the place to listen", () => {
  let taken: Server;
  afterEach(() => taken?.close());

  test("that another process has is refused with exit code 2", async () => {
    taken = createServer();
    const port = await new Promise<number>((resolve) =>
      taken.listen(0, "127.0.0.1", () => resolve((taken.address() as { port: number }).port)),
    );
    expect(await refused(FILE(), "--listen", `127.0.0.1:${port}`)).toEqual({
      code: 2,
      text: `couplet: --listen: expected a free address, got 127.0.0.1:${port}, where another process listens. Stop it, or choose another address.\n`,
    });
  });

  test("that is a socket somebody answers, or no socket, is refused and left alone", async () => {
    const socket = join(folder, "live.sock");
    taken = createServer((connection) => connection.end());
    await new Promise<void>((resolve) => taken.listen(socket, resolve));
    expect(await refused(FILE(), "--listen", `unix:${socket}`)).toEqual({
      code: 2,
      text: `couplet: --listen: expected a free address, got unix:${socket}, where another process listens. Stop it, or choose another address.\n`,
    });
    const file = join(folder, "file");
    writeFileSync(file, "precious");
    expect(await refused(FILE(), "--listen", `unix:${file}`)).toEqual({
      code: 2,
      text: `couplet: --listen: expected a place for a socket, got unix:${file}, where something else is. Choose another path.\n`,
    });
    expect(readFileSync(file, "utf8")).toBe("precious");
  });

  test("that others can reach is refused without TLS", async () => {
    const { code, text } = await refused(FILE(), "--listen", "0.0.0.0:0");
    expect(code).toBe(2);
    expect(text).toMatch(
      /^couplet: --listen: expected a loopback address or a Unix socket, since there is no TLS/,
    );
  });
});

test("a damaged file is refused with exit code 3, a foreign one with 2", async () => {
  const damaged = join(folder, "damaged.pb");
  writeFileSync(damaged, readFileSync(FILE()).subarray(0, 1000));
  expect((await refused(damaged)).code).toBe(3);
  const foreign = join(folder, "foreign.pb");
  writeFileSync(foreign, "hello");
  expect((await refused(foreign)).code).toBe(2);
});

test("each Unix connection has limits of its own", async () => {
  const { address } = await served(FILE(), "--listen", `unix:${join(folder, "two.sock")}`);
  const open = () =>
    new Client(address, credentials.createInsecure(), { "grpc.use_local_subchannel_pool": 1 });
  const [greedy, modest] = [open(), open()];
  const same = (bytes: Buffer) => bytes;
  const stream = (client: Client) => {
    const call = client.makeBidiStreamRequest("/couplet.v1.SidecarService/EvaluateWidthsStream", same, same);
    return { call, failed: new Promise<string>((resolve) => call.once("error", (e) => resolve(e.message))) };
  };
  const many = Array.from({ length: 1001 }, () => stream(greedy));
  expect(await Promise.race(many.map(({ failed }) => failed))).toContain(
    "at most 1000 streaming calls at a time",
  );
  const { call } = stream(modest);
  const answered = new Promise((resolve, reject) => call.once("data", resolve).once("error", reject));
  call.write(Buffer.from([0x0a, 0x0b, 0x12, 0x09, ...Buffer.from("rho(770)0")]));
  await answered;
  for (const one of many) one.call.cancel();
  greedy.close();
  modest.close();
});
