import { spawnSync } from "node:child_process";
import { closeSync, openSync } from "node:fs";
import { expect, test } from "vitest";
import { COMMAND } from "./command.js";

/** Runs a command whose standard output goes to an open file. */
function runInto(path: string, ...args: readonly string[]): { status: number | null; stderr: string } {
  const file = openSync(path, "w");
  try {
    return spawnSync(process.execPath, [COMMAND, ...args], {
      stdio: ["ignore", file, "pipe"],
      encoding: "utf8",
      timeout: 60_000,
    });
  } finally {
    closeSync(file);
  }
}

test
  .runIf(process.platform === "linux")
  .each([[["--help"]], [["factors", "8", "8"]], [["product", "3", "3"]]])(
  "%j on a full disk says so, with exit code 2",
  (args) => {
    const { status, stderr } = runInto("/dev/full", ...args);
    expect({ status, stderr }).toEqual({
      status: 2,
      stderr:
        "couplet: standard output: could not be written: ENOSPC: no space left on device, write. Free space, or send it elsewhere.\n",
    });
  },
);

test.runIf(process.platform === "linux")(
  "a refusal that cannot be printed keeps its exit code: 1 would say that tables differ",
  () => {
    const full = openSync("/dev/full", "w");
    for (const args of [["compare", "no.pb", "none.pb"], ["compare"], ["serve", "no.pb"]]) {
      const { status } = spawnSync(process.execPath, [COMMAND, ...args], {
        stdio: ["ignore", "ignore", full],
        timeout: 60_000,
      });
      expect([args, status]).toEqual([args, 2]);
    }
    closeSync(full);
  },
);

test("a reader that ends early is no error", () => {
  const script = 'set -o pipefail; "$@" | head -n 1';
  const { status, stdout, stderr } = spawnSync(
    "bash",
    ["-c", script, "bash", process.execPath, COMMAND, "factors", "27", "27"],
    { encoding: "utf8", timeout: 60_000 },
  );
  expect({ status, stderr }).toEqual({ status: 0, stderr: "" });
  expect(stdout).toMatch(/^27 x 27 = .*\n$/);
});
