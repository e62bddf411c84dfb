/** A case's time in units of the yardstick: the median over the rounds, and its scatter as a relative deviation. */
export interface Ratio {
  readonly ratio: number;
  readonly noise: number;
}

/** A stored run to compare with. */
export interface Baseline {
  readonly node: string;
  readonly cases: Readonly<Record<string, Ratio>>;
}

/** Differences below this are not worth a word, however quiet the machine. */
const SMALLEST_DIFFERENCE = 0.1;

/** Standard deviations a difference must have to exceed the noise. */
const DEVIATIONS = 3;

/** The ratio of a case from its rounds; the scatter of the median from the median absolute deviation. */
export function ratioOf(rounds: readonly number[]): Ratio {
  const ratio = median(rounds);
  const deviation = median(rounds.map((value) => Math.abs(value - ratio)));
  // 1.48 times the median absolute deviation estimates the standard deviation of one round.
  return { ratio, noise: (1.48 * deviation) / ratio / Math.sqrt(rounds.length) };
}

/** What became of a case since the baseline. */
export type Verdict = "new" | "same" | "slower" | "faster";

/** The verdict on a case, and the relative difference and what of it noise may explain. */
export function compared(
  now: Ratio,
  then: Ratio | undefined,
): { verdict: Verdict; difference: number; noise: number } {
  if (then === undefined) return { verdict: "new", difference: 0, noise: now.noise };
  const difference = Math.log(now.ratio / then.ratio);
  const noise = DEVIATIONS * Math.hypot(now.noise, then.noise);
  const exceeds = Math.abs(difference) > Math.max(noise, SMALLEST_DIFFERENCE);
  return { verdict: exceeds ? (difference > 0 ? "slower" : "faster") : "same", difference, noise };
}

function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  const middle = (sorted.length - 1) / 2;
  return (sorted[Math.floor(middle)]! + sorted[Math.ceil(middle)]!) / 2;
}
