import { requirePositive } from "../require.js";
import { gaussianDeviations } from "./chi-square.js";

export { asymmetricSigma } from "./asymmetric-sigma.js";

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
