import { connect as connectHttp2 } from "node:http2";
import { connect, type Socket } from "node:net";
import { afterEach, beforeEach, expect, test } from "vitest";
import { seededIntegers } from "../support/seeded-integers.js";
import { type Running, running, until } from "./running.js";

let server: Running;

beforeEach(async () => {
  server = await running({ keepalive: { afterMs: 150, timeoutMs: 150 }, limits: { connections: 300 } });
});
afterEach(() => server.stop());

const PREFACE = Buffer.concat([
  Buffer.from("PRI * HTTP/2.0\r\n\r\nSM\r\n\r\n"),
  Buffer.from([0, 0, 0, 4, 0, 0, 0, 0, 0]),
]);

function opened(): Promise<Socket> {
  return new Promise((resolve) => {
    const socket = connect(server.port, "127.0.0.1", () => resolve(socket));
    socket.on("error", () => socket.destroy());
  });
}

async function connectionsOpen(): Promise<number> {
  const text = await server.sidecar.metrics.registry.metrics();
  return Number(/^couplet_connections_open (\d+)$/m.exec(text)?.[1]);
}

async function requireAnswers(): Promise<void> {
  expect((await server.client().widths("rho(770)0", 800)).totalWidth).toBeGreaterThan(0);
}

test("1,000 connections with garbage bytes (seed 61) end, and the server still answers", async () => {
  const random = seededIntegers(61);
  const garbage = (length: number) => Buffer.from(Array.from({ length }, () => random.below(256)));
  for (let round = 0; round < 20; round++) {
    const sockets = await Promise.all(Array.from({ length: 50 }, () => opened()));
    for (const socket of sockets) {
      const kind = random.below(4);
      if (kind === 0) socket.write(garbage(1 + random.below(200)));
      else if (kind === 1) socket.write(PREFACE.subarray(0, 1 + random.below(PREFACE.length)));
      // A frame with a random head after a proper start.
      else
        socket.write(
          Buffer.concat([PREFACE, Buffer.from([0, 0, random.below(64)]), garbage(6 + random.below(80))]),
        );
      if (random.below(2) === 0) socket.destroy();
      else socket.end();
    }
    if (round % 10 === 0) await requireAnswers();
  }
  await requireAnswers();
  // The one connection left is the client's of this test.
  await until(async () => (await connectionsOpen()) <= 1);
});

test("1,000 calls cut off in the middle of a message (seed 62) leave the server whole", async () => {
  const random = seededIntegers(62);
  for (let round = 0; round < 20; round++) {
    const http2 = connectHttp2(`http://${server.address}`);
    http2.on("error", () => {});
    const done = Array.from({ length: 50 }, () => {
      const stream = http2.request({
        ":method": "POST",
        ":path": "/couplet.v1.SidecarService/EvaluateWidthsStream",
        "content-type": "application/grpc",
        te: "trailers",
      });
      stream.on("error", () => {});
      stream.resume();
      const length = 1 + random.below(1000);
      const part = Buffer.alloc(5 + random.below(length), random.below(256));
      part.writeUInt8(random.below(3), 0);
      part.writeUInt32BE(random.below(8) === 0 ? random.below(2 ** 31) : length, 1);
      const end = random.below(3);
      stream.write(part, () => {
        if (end === 0) stream.end();
        else if (end === 1) stream.close(8);
      });
      return end === 0 ? new Promise((resolve) => stream.once("close", resolve)) : Promise.resolve();
    });
    await Promise.all(done);
    http2.destroy();
  }
  await requireAnswers();
  await until(async () => /^couplet_streams_open 0$/m.test(await server.sidecar.metrics.registry.metrics()));
});

test("calls of other paths and content types get an answer and do no harm", async () => {
  const http2 = connectHttp2(`http://${server.address}`);
  const status = (headers: Record<string, string>) =>
    new Promise((resolve, reject) => {
      const stream = http2.request({ ":method": "POST", ...headers });
      stream.once("response", (response) => resolve([response[":status"], response["grpc-status"]]));
      stream.once("error", reject);
      stream.end();
    });
  expect(
    await status({ ":path": "/couplet.v1.SidecarService/Nothing", "content-type": "application/grpc" }),
  ).toEqual([200, "12"]);
  expect(await status({ ":path": "/é\u00ff%zz", "content-type": "application/grpc" })).toEqual([200, "12"]);
  expect(
    await status({ ":path": "/couplet.v1.SidecarService/ListTables", "content-type": "text/html" }),
  ).toEqual([415, undefined]);
  http2.destroy();
  await requireAnswers();
});

test("connections that say nothing, or stop answering, are closed after the time for a sign of life", async () => {
  const silent = await opened();
  const half = await opened();
  half.write(PREFACE);
  // Bytes are taken, pings are not answered: what a machine that lost its power looks like.
  for (const socket of [silent, half]) socket.resume();
  const closed = [silent, half].map((socket) => new Promise((resolve) => socket.once("close", resolve)));
  await Promise.all(closed);
  await until(async () => (await connectionsOpen()) === 0);
  await requireAnswers();
});

test("connections above the limit are closed at once, and work again when others end", async () => {
  const sockets = await Promise.all(Array.from({ length: 300 }, () => opened()));
  const one = await opened();
  await new Promise((resolve) => one.once("close", resolve));
  expect(await server.sidecar.metrics.registry.metrics()).toMatch(/^couplet_connections_dropped_total 1$/m);
  for (const socket of sockets) socket.destroy();
  await until(async () => (await connectionsOpen()) === 0);
  await requireAnswers();
});
