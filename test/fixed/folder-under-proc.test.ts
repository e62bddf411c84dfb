import { spawnSync } from "node:child_process";
import { expect, test } from "vitest";
import { COMMAND } from "../cli/command.js";

// Node's recursive mkdir never returns where a folder cannot be made and its parent exists, as under /proc.
test("an output folder that cannot be made is refused instead of hanging for ever", () => {
  const run = spawnSync(process.execPath, [COMMAND, "factors", "3", "3bar", "--out", "/proc/x/t.pb"], {
    encoding: "utf8",
    timeout: 30_000,
  });
  expect([run.status, run.stderr]).toEqual([
    2,
    "couplet: /proc/x/t.pb: could not be written: ENOENT: no such file or directory. Choose another folder. Nothing was changed.\n",
  ]);
});
