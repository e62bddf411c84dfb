import Benchmark from "benchmark";

/** Time of one call, from the samples of `benchmark`. */
export interface Measured {
  /** The least disturbed sample: other programs can only add to a time. */
  readonly seconds: number;
  /** Relative error of the mean over the samples, in per cent. */
  readonly meanErrorPercent: number;
  readonly samples: number;
}

/** Measures a warm function; throws what it throws. */
export function measured(name: string, run: () => unknown, maxSeconds = 1): Measured {
  const bench = new Benchmark(name, run, { maxTime: maxSeconds, minSamples: 3 });
  bench.run();
  if (bench.error !== undefined) throw bench.error;
  const { sample, rme } = bench.stats;
  return { seconds: Math.min(...sample), meanErrorPercent: rme, samples: sample.length };
}

/** Runs a function for some time, so that V8 has compiled it. */
export function warmUp(run: () => unknown, seconds: number): void {
  const end = performance.now() + 1e3 * seconds;
  do run();
  while (performance.now() < end);
}

/** Seconds with a unit that keeps three digits, e.g. `27.4 ms`. */
export function timeText(seconds: number): string {
  const [scale, unit] = seconds >= 1 ? [1, "s"] : seconds >= 1e-3 ? [1e3, "ms"] : [1e6, "us"];
  return `${(seconds * scale).toPrecision(3)} ${unit}`;
}
