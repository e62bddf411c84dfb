import { Client, credentials, Metadata } from "@grpc/grpc-js";
import { afterEach, describe, expect, test } from "vitest";
import { METHODS } from "../../src/sidecar/calls/index.js";
import { seededIntegers } from "../support/seeded-integers.js";
import { failure, type Running, running, until } from "./running.js";

const SERVICE = "/couplet.v1.SidecarService";
const INVALID_ARGUMENT = 3;
const INTERNAL = 13;
let server: Running;

afterEach(() => server.stop());

const same = (bytes: Buffer) => bytes;

function rawCall(client: Client, name: string, bytes: Buffer): Promise<Buffer> {
  return new Promise((resolve, reject) => {
    client.makeUnaryRequest(`${SERVICE}/${name}`, same, same, bytes, (error, answer) =>
      error === null ? resolve(answer!) : reject(error),
    );
  });
}

describe("an exception in a call", () => {
  const bug = () => {
    throw new TypeError("a planted bug");
  };

  test("gives the client INTERNAL without details, the log the stack, and the others their answers", async () => {
    const methods = METHODS.map((method) =>
      method.name === "EvaluateWidths" ? { ...method, answer: bug } : method,
    );
    server = await running({ methods });
    const client = server.client();
    expect(await failure(client.widths("rho(770)0", 800))).toEqual({
      code: INTERNAL,
      details: "This is a bug in Couplet; the server's log has the details. Please report it.",
    });
    expect((await client.widthsBatch("rho(770)0", [800])).totalWidths).toHaveLength(1);
    const logged = server.log.find(({ msg }) => msg === "a call failed by a bug");
    expect(logged).toMatchObject({ call: "EvaluateWidths", err: { message: "a planted bug" } });
  });

  test("ends its own stream and no other", async () => {
    const plain = METHODS.find(({ name }) => name === "EvaluateWidthsStream")!;
    let armed = false;
    const methods = METHODS.map((method) =>
      method === plain
        ? {
            ...plain,
            answer: (...args: Parameters<typeof plain.answer>) => (armed ? bug() : plain.answer(...args)),
          }
        : method,
    );
    server = await running({ methods });
    const client = server.client();
    const draws = client.drawsStream();
    const widths = client.widthsStream();
    const ask = () => widths.ask({ parent: { name: "rho(770)0" }, masses: [800] });
    await ask();
    armed = true;
    expect((await failure(ask())).code).toBe(INTERNAL);
    const { rows } = await draws.ask({ parent: { name: "rho(770)0" }, seed: 1, count: 3 });
    expect(rows).toHaveLength(3);
    draws.end();
  });
});

test("a deadline that passes ends a stream with DEADLINE_EXCEEDED, and it is closed on the server", async () => {
  server = await running();
  const client = new Client(server.address, credentials.createInsecure());
  const call = client.makeBidiStreamRequest(`${SERVICE}/EvaluateWidthsStream`, same, same, new Metadata(), {
    deadline: Date.now() + 200,
  });
  const code = await new Promise((resolve) =>
    call.once("error", (error: { code?: number }) => resolve(error.code)),
  );
  expect(code).toBe(4);
  await until(async () => /^couplet_streams_open 0$/m.test(await server.sidecar.metrics.registry.metrics()));
  client.close();
});

test("a stream that its client leaves with answers on their way is closed and counted as CANCELLED", async () => {
  server = await running();
  const client = new Client(server.address, credentials.createInsecure());
  const call = client.makeBidiStreamRequest(`${SERVICE}/DrawChannelsStream`, same, same);
  call.on("error", () => {});
  call.pause();
  // Parent rho(770)0, count 100000.
  const request = [0x0a, 0x0b, 0x12, 0x09, ...Buffer.from("rho(770)0"), 0x20, 0xa0, 0x8d, 0x06];
  for (let k = 0; k < 50; k++) call.write(Buffer.from(request));
  const counted = (pattern: RegExp) => async () =>
    pattern.test(await server.sidecar.metrics.registry.metrics());
  await until(counted(/^couplet_draws_total [1-9]/m));
  call.cancel();
  await until(counted(/^couplet_calls_total\{call="DrawChannelsStream",status="CANCELLED"\} 1$/m));
  await until(counted(/^couplet_streams_open 0$/m));
  client.close();
});

test("bytes that are no message are refused as INVALID_ARGUMENT", async () => {
  server = await running();
  const client = new Client(server.address, credentials.createInsecure());
  const { code, details } = await failure(rawCall(client, "EvaluateWidths", Buffer.from([0x0a, 0x7f, 1])));
  expect(code).toBe(INVALID_ARGUMENT);
  expect(details).toMatch(
    /^EvaluateWidths: expected a couplet\.v1\.EvaluateWidthsRequest message, got 3 bytes that are none \(.+\)\. Use the schema of this server's version\.$/,
  );
  client.close();
});

test("3,000 damaged messages (seed 6) leave no call unanswered, none INTERNAL, and the server whole", async () => {
  server = await running();
  const client = new Client(server.address, credentials.createInsecure());
  const random = seededIntegers(6);
  const whole = Buffer.concat([
    Buffer.from([0x0a, 0x0b, 0x12, 0x09]),
    Buffer.from("rho(770)0"),
    Buffer.from([0x11]),
    Buffer.alloc(8, 0x40),
  ]);
  const damaged = () => {
    const bytes = Buffer.from(whole.subarray(0, 1 + random.below(whole.length)));
    for (let flips = random.below(4); flips > 0; flips--)
      bytes[random.below(bytes.length)] = random.below(256);
    return random.below(5) === 0
      ? Buffer.from(Array.from({ length: random.below(60) }, () => random.below(256)))
      : bytes;
  };
  const names = METHODS.filter(({ streaming }) => !streaming).map(({ name }) => name);
  const codes = new Map<number, number>();
  for (let round = 0; round < 60; round++) {
    const calls = Array.from({ length: 50 }, () =>
      rawCall(client, names[random.below(names.length)]!, damaged()),
    );
    for (const outcome of await Promise.allSettled(calls)) {
      const code = outcome.status === "fulfilled" ? 0 : (outcome.reason as { code: number }).code;
      codes.set(code, (codes.get(code) ?? 0) + 1);
    }
  }
  expect([...codes.values()].reduce((a, b) => a + b)).toBe(3000);
  // Answered, INVALID_ARGUMENT, RESOURCE_EXHAUSTED or FAILED_PRECONDITION, and nothing else.
  for (const code of codes.keys()) expect([0, 3, 8, 9]).toContain(code);
  expect(codes.get(INVALID_ARGUMENT)).toBeGreaterThan(500);
  expect((await server.client().widths("rho(770)0", 800)).totalWidth).toBeGreaterThan(0);
  client.close();
});
