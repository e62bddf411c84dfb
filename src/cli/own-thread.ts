import { rmSync } from "node:fs";
import { parentPort, Worker } from "node:worker_threads";

/** Commands that stay in the main thread: they answer at once, or listen to signals themselves. */
const QUICK: readonly string[] = ["help", "new", "serve"];

/** Whether the command of these arguments computes long enough to need `runInOwnThread`. */
export function needsOwnThread([command]: readonly string[]): boolean {
  return command !== undefined && !command.startsWith("-") && !QUICK.includes(command);
}

/**
 * Runs a script with this process's arguments in a thread of its own, and ends with its exit code.
 *
 * A computation holds its thread until it is done; the main thread stays free to hear Ctrl-C, which would otherwise
 * wait for the end of the computation.
 */
export function runInOwnThread(script: string): void {
  const thread = new Worker(script, { argv: process.argv.slice(2) });
  const unfinished = new Set<string>();
  thread.on("message", ({ beside, exists }: Unfinished) => {
    if (exists) unfinished.add(beside);
    else unfinished.delete(beside);
  });
  for (const [signal, code] of [
    ["SIGTERM", 143],
    ["SIGHUP", 129],
  ] as const) {
    process.on(signal, () => process.exit(code));
  }
  process.on("exit", () => {
    for (const beside of unfinished) rmSync(beside, { force: true });
  });
  thread.on("error", (error) => {
    process.stderr.write(`couplet: ${error.stack ?? error.message}\n`);
    process.exitCode = 70;
  });
  thread.on("exit", (code) => {
    process.exitCode ??= code;
  });
}

/** What a thread tells the main one about a file it is writing. */
interface Unfinished {
  readonly beside: string;
  readonly exists: boolean;
}

/** Names a file that must go if the process is stopped, or need not any more; heard in the thread of `runInOwnThread`. */
export function announceUnfinished(beside: string, exists: boolean): void {
  const message: Unfinished = { beside, exists };
  parentPort?.postMessage(message);
}
