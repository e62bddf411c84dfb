import { spawnSync } from "node:child_process";
import { mkdtempSync, rmSync, statSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { writeWhole } from "../../src/tables/whole-file.js";

// Renaming put an ordinary file in the place of /dev/null when the command ran as root.
test("a pipe or a device is refused as an output, and stays what it is", () => {
  const folder = mkdtempSync(join(tmpdir(), "couplet-device-"));
  const pipe = join(folder, "pipe");
  expect(spawnSync("mkfifo", [pipe]).status).toBe(0);
  expect(() => writeWhole(pipe, "new")).toThrow(
    new InputError(`${pipe}: expected a place for a file, got a device or a pipe. Name a file.`),
  );
  expect(statSync(pipe).isFIFO()).toBe(true);
  rmSync(folder, { recursive: true });
});
