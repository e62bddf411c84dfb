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
  let unfinished: string | undefined;
  thread.on("message", (message: Unfinished) => {
    unfinished = message.unfinished;
  });
  for (const [signal, code] of [
    ["SIGTERM", 143],
    ["SIGHUP", 129],
  ] as const) {
    process.on(signal, () => process.exit(code));
  }
  process.on("exit", () => {
    if (unfinished !== undefined) rmSync(unfinished, { force: true });
  });
  thread.on("error", (error) => {
    process.stderr.write(`couplet: ${error.stack ?? error.message}\n`);
    process.exitCode = 70;
  });
  thread.on("exit", (code) => {
    process.exitCode ??= code;
  });
}

/** What a thread tells the main one about the file it is writing. */
interface Unfinished {
  readonly unfinished: string | undefined;
}

/** Names a file that must go if the process is stopped now, or none; from any thread, heard in that of `runInOwnThread`. */
export function announceUnfinished(name: string | undefined): void {
  const message: Unfinished = { unfinished: name };
  parentPort?.postMessage(message);
}
