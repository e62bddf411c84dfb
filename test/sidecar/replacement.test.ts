import { copyFileSync, mkdtempSync, readFileSync, renameSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterEach, beforeEach, expect, test } from "vitest";
import { digestOf } from "../../src/tables/sealed-bytes.js";
import { health } from "./health.js";
import { builtInFiles, failure, type Running, retitled, running } from "./running.js";

let folder: string;
let file: string;
let server: Running;
let original: Uint8Array;

beforeEach(async () => {
  folder = mkdtempSync(join(tmpdir(), "couplet-replace-"));
  file = join(folder, "tables.pb");
  copyFileSync(builtInFiles()[0]!, file);
  original = readFileSync(file);
  server = await running({ files: [file] });
});
afterEach(async () => {
  await server.stop();
  rmSync(folder, { recursive: true, force: true });
});

const hex = (bytes: Uint8Array) => Buffer.from(bytes).toString("hex");

/** Puts a file in place whole, as `couplet tables` does. */
function put(bytes: Uint8Array): void {
  writeFileSync(`${file}.new`, bytes);
  renameSync(`${file}.new`, file);
}

test("a new table is served after the swap, while a running stream keeps the old one", async () => {
  const client = server.client();
  const stream = client.widthsStream();
  const request = { parent: { name: "rho(770)0" }, masses: [800] };
  const before = hex((await stream.ask(request)).tableSha256);
  expect(before).toBe(digestOf(original));
  put(retitled(original, "another"));
  expect(server.sidecar.replaceTables()).toBe(true);
  const after = hex((await client.widths("rho(770)0", 800)).tableSha256);
  expect(after).toBe(digestOf(readFileSync(file)));
  expect(after).not.toBe(before);
  expect(hex((await stream.ask(request)).tableSha256)).toBe(before);
  stream.end();
});

test("a client bound to a table that was replaced is told so", async () => {
  const client = server.client();
  await client.check(digestOf(original));
  expect((await client.widths("rho(770)0", 800)).totalWidth).toBeGreaterThan(0);
  put(retitled(original, "another"));
  server.sidecar.replaceTables();
  const { code, details } = await failure(client.widths("rho(770)0", 800));
  expect(code).toBe(9);
  expect(details).toContain("Tables may have been replaced; list them again.");
});

test.each([
  ["cut", (bytes: Uint8Array) => bytes.subarray(0, bytes.length / 2), /the file is damaged/],
  [
    "changed by a bit",
    (bytes: Uint8Array) => bytes.map((b, k) => (k === 5000 ? b ^ 1 : b)),
    /the file is damaged/,
  ],
  ["foreign", () => Buffer.from("hello"), /expected a table file written by Couplet/],
])(
  "a replacement that is %s is refused in log, health and listing, and the old table stays",
  async (_, damage, reason) => {
    const client = server.client();
    put(damage(original));
    expect(server.sidecar.replaceTables()).toBe(false);
    expect(hex((await client.widths("rho(770)0", 800)).tableSha256)).toBe(digestOf(original));
    expect((await client.listTables()).refusedReplacement).toMatch(reason);
    const logged = server.log.find(({ msg }) => msg === "replacement refused; the old tables stay");
    expect(logged).toMatchObject({ err: { message: expect.stringMatching(reason) } });
    expect(await health(server.address, "couplet.v1.Replacement")).toBe("NOT_SERVING");
    expect(await health(server.address, "couplet.v1.SidecarService")).toBe("SERVING");
    put(retitled(original, "mended"));
    expect(server.sidecar.replaceTables()).toBe(true);
    expect((await client.listTables()).refusedReplacement).toBe("");
    expect(await health(server.address, "couplet.v1.Replacement")).toBe("SERVING");
  },
);

test("under load no call is dropped by 20 swaps, and every answer has one of the digests", async () => {
  const client = server.client();
  const digests = new Set([digestOf(original)]);
  let swapping = true;
  let answers = 0;
  const seen = new Set<string>();
  const load = Array.from({ length: 8 }, async () => {
    while (swapping) {
      seen.add(hex((await client.widthsBatch("Sigma(1385)0", [1380, 1390, 1400])).tableSha256));
      answers++;
    }
  });
  for (let k = 0; k < 20; k++) {
    const bytes = retitled(original, `version ${k}`);
    digests.add(digestOf(bytes));
    put(bytes);
    expect(server.sidecar.replaceTables()).toBe(true);
    await new Promise((resolve) => setTimeout(resolve, 20));
  }
  swapping = false;
  await Promise.all(load);
  expect(answers).toBeGreaterThan(20);
  expect(seen.size).toBeGreaterThan(2);
  for (const digest of seen) expect(digests).toContain(digest);
});

test("the same table twice, or a factor table, is refused at the start", async () => {
  await expect(running({ files: [file, builtInFiles()[0]!] })).rejects.toThrow(
    `${builtInFiles()[0]}: expected tables that differ, got the same content as ${file}. Give it once.`,
  );
});
