import { connect } from "node:http2";
import { Client, credentials } from "@grpc/grpc-js";
import { afterEach, describe, expect, test } from "vitest";
import { failure, type Running, running, until } from "./running.js";

const SERVICE = "/couplet.v1.SidecarService";
const RESOURCE_EXHAUSTED = 8;
let server: Running;

afterEach(() => server.stop());

test("more masses or draws than a request may have are refused with RESOURCE_EXHAUSTED", async () => {
  server = await running({ limits: { masses: 10, draws: 20 } });
  const client = server.client();
  expect(await failure(client.widthsBatch("rho(770)0", new Array(11).fill(800)))).toEqual({
    code: RESOURCE_EXHAUSTED,
    details: "masses: expected at most 10 masses, got 11. Send them in several requests.",
  });
  expect(await failure(client.draw("rho(770)0", 1, 0, 21))).toEqual({
    code: RESOURCE_EXHAUSTED,
    details: "count: expected at most 20 draws, got 21. Ask for several batches.",
  });
  expect((await client.widthsBatch("rho(770)0", new Array(10).fill(800))).totalWidths).toHaveLength(10);
});

test("a message longer than the limit is refused with RESOURCE_EXHAUSTED", async () => {
  server = await running({ limits: { messageBytes: 1000 } });
  const { code, details } = await failure(server.client().widthsBatch("rho(770)0", new Array(200).fill(800)));
  expect(code).toBe(RESOURCE_EXHAUSTED);
  expect(details).toMatch(/^Received message larger than max \(\d+ vs 1000\)$/);
});

describe("isoscalar factors", () => {
  test("of irreps too large are refused before anything is computed", async () => {
    server = await running();
    const client = server.client();
    const began = performance.now();
    const huge = { left: { p: 50_000, q: 50_000 }, right: { p: 50_000, q: 3 } };
    const { code, details } = await failure(client.isoscalarFactors(huge));
    expect(performance.now() - began).toBeLessThan(1000);
    expect(code).toBe(RESOURCE_EXHAUSTED);
    expect(details).toMatch(/: expected at most 2000 factors, got \d+\. Make the table as a file/);
    expect(await failure(client.isoscalarFactors({ left: { p: 3, q: 3 }, right: { p: 2, q: 2 } }))).toEqual({
      code: RESOURCE_EXHAUSTED,
      details:
        "GetIsoscalarFactors: 64 x 27: expected at most 2000 factors, got 4926. Make the table as a file: `couplet factors ... --out FILE.pb`.",
    });
  });

  test("without an irrep, or with one that is not in the product, are refused as INVALID_ARGUMENT", async () => {
    server = await running();
    const client = server.client();
    expect(await failure(client.isoscalarFactors({ right: { p: 1, q: 1 } }))).toEqual({
      code: 3,
      details:
        "GetIsoscalarFactors: left: expected an irrep with p and q, got null. The octet is p = 1, q = 1.",
    });
    const octets = { left: { p: 1, q: 1 }, right: { p: 1, q: 1 } };
    expect(await failure(client.isoscalarFactors({ ...octets, into: { p: 4, q: 4 } }))).toEqual({
      code: 3,
      details: 'isoscalarTable: into: expected one of 1, 8, 10, 10bar, 27, got "4,4".',
    });
  });
});

describe("streams", () => {
  test("1,000 at the same time are all answered, and one more is refused in words", async () => {
    server = await running();
    const client = server.client();
    const parent = client.key("rho(770)0");
    const streams = Array.from({ length: 1000 }, () => client.widthsStream());
    const answers = await Promise.all(
      streams.map((stream, k) => stream.ask({ parent, masses: [700 + k / 10] })),
    );
    const expected = await client.widthsBatch(
      "rho(770)0",
      streams.map((_, k) => 700 + k / 10),
    );
    expect(answers.map(({ totalWidths }) => totalWidths[0])).toEqual(expected.totalWidths);
    expect(await failure(client.widthsStream().ask({ parent, masses: [800] }))).toEqual({
      code: RESOURCE_EXHAUSTED,
      details:
        "connection: expected at most 1000 streaming calls at a time, got one more. End some, or use several connections.",
    });
    for (const stream of streams) stream.end();
    await until(async () => (await metric(server, "couplet_streams_open")) === 0);
    const again = client.widthsStream();
    expect((await again.ask({ parent, masses: [800] })).totalWidths).toHaveLength(1);
    again.end();
  });

  test("of one connection leave those of another alone", async () => {
    server = await running({ limits: { streams: 1 } });
    const client = server.client();
    const open = client.widthsStream();
    await open.ask({ parent: client.key("rho(770)0"), masses: [800] });
    const other = new Client(server.address, credentials.createInsecure(), {
      "grpc.use_local_subchannel_pool": 1,
    });
    const call = other.makeBidiStreamRequest(
      `${SERVICE}/EvaluateWidthsStream`,
      (bytes: Buffer) => bytes,
      (bytes: Buffer) => bytes,
    );
    const answered = new Promise((resolve, reject) => call.once("data", resolve).once("error", reject));
    call.write(Buffer.from([0x0a, 0x0b, 0x12, 0x09, ...Buffer.from("rho(770)0")]));
    await answered;
    call.end();
    other.close();
    open.end();
  });
});

/** A count once it is above 0 and stands still for a second; the test's own time limit ends the wait. */
async function settled(count: () => Promise<number>): Promise<number> {
  let last = 0;
  for (;;) {
    await new Promise((resolve) => setTimeout(resolve, 1000));
    const now = await count();
    if (now > 0 && now === last) return now;
    last = now;
  }
}

test("a stream whose client does not read is no longer read from either", async () => {
  server = await running();
  // A bare HTTP/2 client: the library's own takes answers off the wire into memory, whatever its user reads.
  const session = connect(`http://${server.address}`);
  const stream = session.request({
    ":method": "POST",
    ":path": `${SERVICE}/DrawChannelsStream`,
    "content-type": "application/grpc",
    te: "trailers",
  });
  stream.on("error", () => {});
  session.on("error", () => {});
  stream.pause();
  // name rho(770)0, count 100000: 100 kB of answer for each 17 bytes.
  const request = Buffer.from([0x0a, 0x0b, 0x12, 0x09, ...Buffer.from("rho(770)0"), 0x20, 0xa0, 0x8d, 0x06]);
  const framed = Buffer.concat([Buffer.from([0, 0, 0, 0, request.length]), request]);
  for (let k = 0; k < 500; k++) stream.write(framed);
  const draws = await settled(() => metric(server, "couplet_draws_total"));
  // Window of the server, of HTTP/2 and of the streams' own buffers; 500 requests would be 5e7.
  expect(draws).toBeLessThan(40 * 100_000);
  session.destroy();
});

test("a connection that takes no answers gets no more work, and another one still does", async () => {
  server = await running({ limits: { untakenBytes: 1_000_000 } });
  const greedy = new Client(server.address, credentials.createInsecure(), {
    "grpc.use_local_subchannel_pool": 1,
  });
  const masses = Buffer.alloc(8000);
  for (let k = 0; k < 1000; k++) masses.writeDoubleLE(800, 8 * k);
  const batch = Buffer.concat([
    Buffer.from([0x0a, 0x0b, 0x12, 0x09, ...Buffer.from("rho(770)0"), 0x12, 0xc0, 0x3e]),
    masses,
  ]);
  const calls = Array.from({ length: 60 }, () => {
    const call = greedy.makeServerStreamRequest(
      `${SERVICE}/EvaluateWidthsBatch`,
      (bytes: Buffer) => bytes,
      (bytes: Buffer) => bytes,
      batch,
    );
    call.pause();
    call.on("error", () => {});
    return call;
  });
  await until(() =>
    server.log.some(({ details }) => /that the client has not taken, got \d+/.test(String(details))),
  );
  const reader = server.client();
  expect((await reader.widths("rho(770)0", 800)).totalWidth).toBeGreaterThan(0);
  for (const call of calls) call.cancel();
  greedy.close();
});

/** The value of a metric without labels. */
async function metric({ sidecar }: Running, name: string): Promise<number> {
  const text = await sidecar.metrics.registry.metrics();
  return Number(new RegExp(`^${name} (\\S+)$`, "m").exec(text)?.[1]);
}
