import { join } from "node:path";
import { setImmediate } from "node:timers/promises";
import { Tinypool } from "tinypool";
import { LimitError } from "../errors.js";
import { quantile } from "../fit/quantile.js";
import { Evaluation, evaluator } from "../model/evaluate.js";
import { type Fit, fittedObservables, LISTED_DELTA_CHI2 } from "../model/fit-model.js";
import { requireInteger } from "../require.js";
import type { StudyQuantity } from "./quantities.js";
import { type PseudoExperimentTask, type RefitThreadData, Refitter, rowLength } from "./refit.js";
import { fillSome, rowAt, rowsDone, type SharedRows, sharedRows } from "./shared-rows.js";

/** Choices for pseudo-experiments. */
export interface PseudoExperimentOptions {
  /** How many, at least 1. */
  readonly count: number;
  /** A 32-bit integer; the same seed gives the same results, whatever the number of workers. */
  readonly seed: number;
  /** Threads that fit at the same time, this one included. Default 1. */
  readonly workers?: number;
  /** Index of the minimum whose predictions are the truth; default the best. */
  readonly minimum?: number;
  /** Stops all threads; the promise is rejected with the signal's reason. */
  readonly signal?: AbortSignal;
  readonly onProgress?: (done: number, total: number) => void;
  /** Compiled file of the threads' body; default the one beside this file. */
  readonly threadFile?: string;
}

/** How the fitted values of one quantity scatter. */
export interface PseudoQuantity {
  readonly name: string;
  readonly unit: string;
  readonly kind: StudyQuantity["kind"];
  /** The value the data were drawn from. */
  readonly truth: number;
  /** Quantiles 16, 50 and 84 % of the fitted values. */
  readonly quantiles: readonly [number, number, number];
  /** Part of the experiments in which the truth lies within one linear error of the fitted value; 0.683 if Gaussian. */
  readonly coverage: number;
}

/** Results of pseudo-experiments, as plain data. */
export interface PseudoExperiments {
  readonly count: number;
  readonly seed: number;
  /** Experiments whose fit did not converge; they enter nothing else. */
  readonly unconverged: number;
  /** Part of the experiments with a chi2 at least as large as that of the data. */
  readonly probability: number;
  /** By index of the fit's minima: experiments in which the fit begun there has the least chi2. */
  readonly branches: readonly number[];
  readonly quantities: readonly PseudoQuantity[];
}

/** Threads that fit at the same time, at most. */
const MOST_THREADS = 256;

/** How long a thread waits for the next experiments. */
const IDLE_MILLISECONDS = 10_000;

/** Bytes of results above which a request is refused. */
const MAXIMUM_BYTES = 2 ** 30;

/**
 * Pseudo-experiments: data drawn from a fit's predictions with the data's errors, priors drawn too, each set fitted
 * again from the minimum, and from every other minimum that deserves attention.
 *
 * @throws InputError if count, seed or workers is not an integer in range
 * @throws LimitError if the results would not fit into memory
 */
export async function pseudoExperiments(
  fit: Fit,
  options: PseudoExperimentOptions,
): Promise<PseudoExperiments> {
  const { count, seed, workers = 1, signal } = options;
  requireInteger("pseudoExperiments: count", count, 1);
  requireInteger("pseudoExperiments: seed", seed, 0, "", 2 ** 32 - 1);
  requireInteger("pseudoExperiments: workers", workers, 1, "", MOST_THREADS);
  signal?.throwIfAborted();
  const chosen = options.minimum ?? 0;
  const listed = fit.minima
    .map((minimum, index) => ({ minimum, index }))
    .filter(
      ({ minimum, index }) => index === chosen || minimum.chi2 < fit.minima[0]!.chi2 + LISTED_DELTA_CHI2,
    )
    .sort((a, b) => Number(b.index === chosen) - Number(a.index === chosen));
  const task: PseudoExperimentTask = {
    model: fit.model,
    fitted: fittedObservables(fit.model),
    starts: listed.map(({ minimum }) => minimum.vector),
    seed,
  };
  const refitter = new Refitter(task);
  const { quantities } = refitter;
  const bytes = 8 * count * rowLength(quantities.length);
  if (bytes > MAXIMUM_BYTES) {
    const most = Math.floor(MAXIMUM_BYTES / (bytes / count));
    throw new LimitError(
      `pseudoExperiments: ${count} experiments with ${quantities.length} quantities are more than fit into memory. Ask for at most ${most}.`,
    );
  }
  const rows = sharedRows(count, rowLength(quantities.length));
  await fill(rows, refitter, task, options);
  return summary(
    fit,
    listed.map(({ index }) => index),
    quantities,
    rows,
    seed,
  );
}

let pool: Tinypool | undefined;

/** The other threads. They stay for a while, since a new one is slow until its code is compiled; a process ends all the same. */
function otherThreads(): Tinypool {
  pool ??= new Tinypool({
    minThreads: 0,
    maxThreads: MOST_THREADS,
    idleTimeout: IDLE_MILLISECONDS,
    isolateWorkers: false,
  });
  return pool;
}

/** Fills all rows, here and in other threads, none of which works on them when this ends. */
async function fill(
  rows: SharedRows,
  refitter: Refitter,
  task: PseudoExperimentTask,
  { workers = 1, signal, onProgress, threadFile }: PseudoExperimentOptions,
): Promise<void> {
  const filename = threadFile ?? join(__dirname, "refit-thread.js");
  const data: RefitThreadData = { task, rows };
  const stop = new AbortController();
  const threads = Array.from({ length: workers - 1 }, () =>
    otherThreads().run(data, { filename, name: "fillRows", signal: stop.signal }),
  );
  const all = Promise.all(threads);
  // A failure is seen when `all` is awaited; until then it must not count as unhandled.
  all.catch(() => {});
  try {
    while (fillSome(rows, (index, row) => refitter.write(index, row))) {
      onProgress?.(rowsDone(rows), rows.count);
      await setImmediate();
      signal?.throwIfAborted();
    }
    await all;
    signal?.throwIfAborted();
    onProgress?.(rows.count, rows.count);
  } finally {
    stop.abort();
    await Promise.allSettled(threads);
  }
}

function summary(
  fit: Fit,
  starts: readonly number[],
  quantities: readonly StudyQuantity[],
  rows: SharedRows,
  seed: number,
): PseudoExperiments {
  const every = Array.from({ length: rows.count }, (_, index) => rowAt(rows, index));
  const converged = every.filter((row) => row[2] === 1);
  const part = (holds: (row: Float64Array) => boolean) => converged.filter(holds).length / converged.length;
  const { vector, chi2 } = fit.minima[starts[0]!]!;
  const best = new Evaluation(evaluator(fit.model), vector);
  return {
    count: rows.count,
    seed,
    unconverged: rows.count - converged.length,
    probability: part((row) => row[0]! >= chi2),
    branches: fit.minima.map((_, index) => {
      const start = starts.indexOf(index);
      return converged.filter((row) => row[1] === start).length;
    }),
    quantities: quantities.map((quantity, k): PseudoQuantity => {
      const { name, unit, kind } = quantity;
      const truth = quantity.of(best).value;
      const values = Float64Array.from(converged, (row) => row[3 + 2 * k]!).sort();
      return {
        name,
        unit,
        kind,
        truth,
        quantiles: [quantile(values, 0.16), quantile(values, 0.5), quantile(values, 0.84)],
        coverage: part((row) => Math.abs(row[3 + 2 * k]! - truth) <= row[4 + 2 * k]!),
      };
    }),
  };
}
