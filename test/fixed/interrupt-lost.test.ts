import { spawnSync } from "node:child_process";
import { join } from "node:path";
import { expect, test } from "vitest";
import { COMMAND } from "../cli/command.js";

// A SIGINT that came while modules were loaded was dropped when the server changed its listeners: it started and stayed.
test("Ctrl-C while `couplet serve` loads ends it with exit code 130", () => {
  const hook = join(__dirname, "send-interrupt.cjs");
  const args = ["-r", hook, COMMAND, "serve", "--listen", "127.0.0.1:0", "--metrics", "none"];
  const { status, signal } = spawnSync(process.execPath, args, { timeout: 50_000, killSignal: "SIGKILL" });
  expect({ status, signal }).toEqual({ status: 130, signal: null });
});
