import { afterAll, beforeAll, expect, test } from "vitest";
import { type SidecarClient, WrongTableError } from "../../../src/clients/typescript/couplet-sidecar.js";
import { failure, type Running, running } from "../../sidecar/running.js";

let server: Running;
let client: SidecarClient;

beforeAll(async () => {
  server = await running();
  client = server.client();
});
afterAll(() => server.stop());

test("check binds the client to the only decay table, or to the one of a digest", async () => {
  const table = await client.check();
  const sha256 = Buffer.from(table.sha256!).toString("hex");
  expect((await client.check(sha256)).header?.convention).toBe("deswart-v1");
  expect(Buffer.from(client.key("p").tableSha256!).toString("hex")).toBe(sha256);
});

test("check refuses a table that is not served, naming what is", async () => {
  const refusal = client.check("00");
  await expect(refusal).rejects.toThrow(WrongTableError);
  await expect(refusal).rejects.toThrow(
    /^expected 00, got [0-9a-f]{64} \(.+\)\. Start the sidecar with the job's table, or give its digest\.$/,
  );
});

test("a stream gives its answers in the order of the questions, with many on their way", async () => {
  const stream = client.widthsStream();
  const parent = client.key("rho(770)0");
  const masses = Array.from({ length: 200 }, (_, k) => 600 + k);
  const answers = await Promise.all(masses.map((mass) => stream.ask({ parent, masses: [mass] })));
  const { totalWidths } = await client.widthsBatch("rho(770)0", masses);
  expect(answers.map((answer) => answer.totalWidths[0])).toEqual(totalWidths);
  stream.end();
});

test("after a refusal every question on its way and every later one fails with it", async () => {
  const stream = client.widthsStream();
  const wrong = stream.ask({ parent: client.key("nobody"), masses: [1] });
  const later = stream.ask({ parent: client.key("rho(770)0"), masses: [800] });
  const { code, details } = await failure(wrong);
  expect(code).toBe(3);
  expect(await failure(later)).toEqual({ code, details });
  expect(await failure(stream.ask({ parent: client.key("rho(770)0"), masses: [800] }))).toEqual({
    code,
    details,
  });
});
