import { isatty, WriteStream } from "node:tty";
import type * as cliProgress from "cli-progress";

/** How far a long piece of work has come, in units of its own. */
export type Progress = (done: number, total: number) => void;

/** A progress bar on the terminal, or nothing where there is none to draw on. */
export interface ProgressBar {
  readonly report: Progress;
  /** Removes the bar; the line is as it was before. */
  end(): void;
}

const STANDARD_OUTPUT = 1;
const STANDARD_ERROR = 2;

/**
 * A bar on standard error, drawn only if that is a terminal, and only where nothing else is printed between its frames.
 *
 * @param what - a word or two before the bar
 * @param quietOutput - whether the command prints nothing on standard output until the bar has ended
 * @param afterMs - how long the work may take before the bar is drawn, at its next report
 */
export function progressBar(what: string, quietOutput: boolean, afterMs = 0): ProgressBar {
  // A thread's own streams are no terminals; the descriptors behind them may be.
  const drawn = isatty(STANDARD_ERROR) && (quietOutput || !isatty(STANDARD_OUTPUT));
  if (!drawn) return { report: () => {}, end: () => {} };
  const { SingleBar } = require("cli-progress") as typeof cliProgress;
  const bar = new SingleBar({
    stream: new WriteStream(STANDARD_ERROR),
    format: `${what} [{bar}] {percentage} %, {eta_formatted} left`,
    clearOnComplete: true,
    gracefulExit: false,
    // Turning line wrapping off would outlast a run that is stopped.
    linewrap: true,
    etaBuffer: 50,
  });
  const begin = performance.now() + afterMs;
  if (afterMs === 0) bar.start(1, 0);
  return {
    report: (done, total) => {
      if (bar.isActive) {
        bar.setTotal(total);
        bar.update(done);
      } else if (performance.now() >= begin) bar.start(total, done);
    },
    end: () => bar.stop(),
  };
}
