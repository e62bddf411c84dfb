import { refuse, requirePositive } from "../require.js";
import { gaussianDeviations } from "./chi-square.js";

export { asymmetricSigma } from "./asymmetric-sigma.js";

/** The average of several measurements of one quantity, and how well they agree. */
export interface ScaledAverage {
  /** Weighted mean, weights 1/sigma^2. */
  readonly mean: number;
  /** Error of the mean before scaling. */
  readonly sigma: number;
  readonly chi2: number;
  /** S = sqrt(chi2 / (N - 1)) over the measurements used for it; never below 1. */
  readonly scale: number;
  /** Indices of the measurements used for S. */
  readonly used: readonly number[];
}

/**
 * Weighted mean with the scale factor S = sqrt(chi2 / (N - 1)), at least 1.
 *
 * Measurements with sigma > 3 sqrt(N) times the error of the mean say little about agreement and are left out of S
 * (not out of the mean). Source: Particle Data Group, Review of Particle Physics, introduction, "Unconstrained
 * averaging". Provenance: memory.
 * @param sigmas - one per value, each > 0
 * @throws InputError if lengths differ, there is no value, or an error is not positive (names the row)
 */
export function scaledAverage(values: readonly number[], sigmas: readonly number[]): ScaledAverage {
  if (values.length === 0) refuse("scaledAverage: values", "at least one measurement", 0);
  if (sigmas.length !== values.length) {
    refuse("scaledAverage: sigmas", `${values.length} errors, one per value`, sigmas.length);
  }
  for (const [i, s] of sigmas.entries()) requirePositive(`scaledAverage: sigmas ${i}`, s);
  for (const [i, x] of values.entries()) {
    if (!Number.isFinite(x)) refuse(`scaledAverage: values ${i}`, "a finite number", x);
  }
  const weights = sigmas.map((s) => 1 / (s * s));
  const total = weights.reduce((sum, w) => sum + w, 0);
  const mean = values.reduce((sum, x, i) => sum + x * weights[i]!, 0) / total;
  const sigma = 1 / Math.sqrt(total);
  const largest = 3 * Math.sqrt(values.length) * sigma;
  const used = values.map((_, i) => i).filter((i) => sigmas[i]! <= largest);
  const chi2Of = (rows: readonly number[]) =>
    rows.reduce((sum, i) => sum + ((values[i]! - mean) / sigmas[i]!) ** 2, 0);
  const scale = used.length > 1 ? Math.max(1, Math.sqrt(chi2Of(used) / (used.length - 1))) : 1;
  return { mean, sigma, chi2: chi2Of(values.map((_, i) => i)), scale, used };
}

/**
 * Standard deviation of the half-Gaussian at 0 whose part below `limit` is `confidence`: limit / z, z = 1.6449 at 90 %.
 *
 * A quantity x >= 0 known by an upper limit then has the residual x / sigma.
 * @param limit - > 0
 * @param confidence - between 0 and 1, ends excluded
 * @throws InputError outside those ranges
 */
export function upperLimitSigma(limit: number, confidence: number): number {
  requirePositive("upperLimitSigma: limit", limit);
  return limit / gaussianDeviations(confidence);
}
