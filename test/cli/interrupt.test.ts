import { type ChildProcess, spawn } from "node:child_process";
import { once } from "node:events";
import { readdirSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { afterAll, expect, test } from "vitest";
import { COMMAND, scratchFolder } from "./command.js";

const { folder, remove } = scratchFolder({ "t.pb": "old" });
afterAll(remove);

/** Starts a computation whose file takes seconds to write. */
const start = () =>
  spawn(process.execPath, [COMMAND, "factors", "6,6", "6,6", "--out", "t.pb"], { cwd: folder });

/** Waits until a file stands beside the one that is to be written. */
async function writing(run: ChildProcess): Promise<void> {
  while (run.exitCode === null && readdirSync(folder).length < 2)
    await new Promise((resolve) => setTimeout(resolve, 5));
}

async function end(run: ChildProcess): Promise<number | null> {
  const [code] = (await once(run, "close")) as [number | null];
  return code;
}

test.each([
  ["Ctrl-C", "SIGINT", 130],
  ["a polite kill", "SIGTERM", 143],
] as const)(
  "%s in the middle of writing ends at once, leaves the old file and nothing else",
  async (_, signal, code) => {
    const run = start();
    await writing(run);
    const sent = performance.now();
    run.kill(signal);
    expect(await end(run)).toBe(code);
    expect(performance.now() - sent).toBeLessThan(3000);
    expect(readdirSync(folder)).toEqual(["t.pb"]);
    expect(readFileSync(join(folder, "t.pb"), "utf8")).toBe("old");
  },
);
