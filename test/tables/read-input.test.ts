import { mkdtempSync, rmSync, truncateSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { serverIdentity } from "../../src/sidecar/credentials.js";
import { loadTables } from "../../src/sidecar/load-tables.js";
import { readInput } from "../../src/tables/read-input.js";
import { openDecays } from "../../src/tables/stream-decays.js";

const folder = mkdtempSync(join(tmpdir(), "couplet-input-"));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

const tooLarge = (where: string, maxBytes: number, what = "file") =>
  new InputError(
    `${where}: expected a ${what} of at most ${maxBytes} bytes, got more. Is this the right file?`,
  );

test("a file up to the limit is read whole", () => {
  const path = join(folder, "100k");
  writeFileSync(path, Buffer.alloc(100_000, 7));
  expect(readInput(path, { maxBytes: 100_000 })).toEqual(Buffer.alloc(100_000, 7));
  expect(() => readInput(path, { maxBytes: 99_999, what: "study" })).toThrow(tooLarge(path, 99_999, "study"));
});

test("a file without end is read no further than the limit", () => {
  expect(() => readInput("/dev/zero", { maxBytes: 1000 })).toThrow(tooLarge("/dev/zero", 1000));
});

test("the sidecar reads tables and certificates within limits too", () => {
  const path = join(folder, "huge");
  writeFileSync(path, "");
  // Takes no room on the disk.
  truncateSync(path, 2 ** 30 + 1);
  expect(() => loadTables([path])).toThrow(tooLarge(path, 2 ** 30));
  expect(() => serverIdentity({ certificate: path, key: path })).toThrow(
    tooLarge(`--tls-cert: ${path}`, 2 ** 20),
  );
});

test("what cannot be read is told in the same words everywhere", () => {
  const path = join(folder, "none");
  const words = `${path}: could not be read: ENOENT: no such file or directory. Check the path.`;
  expect(() => readInput(path)).toThrow(new InputError(words));
  expect(() => loadTables([path])).toThrow(new InputError(words));
  expect(() => openDecays(path)).toThrow(new InputError(words));
  expect(() => serverIdentity({ certificate: path, key: path })).toThrow(
    new InputError(`--tls-cert: ${words}`),
  );
});
