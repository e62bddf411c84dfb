import gammainc from "@stdlib/math-base-special-gammainc";
import { refuse, requireInteger } from "../require.js";

/**
 * Probability that chi-square with `ndf` degrees of freedom exceeds `chi2`; the tail itself, not 1 minus its complement.
 *
 * Q(ndf/2, chi2/2), the regularised upper incomplete gamma function; right down to about 1e-300, 0 below.
 * With no degrees of freedom left a fit cannot be judged, and the probability is defined as 1.
 * Source: M. Abramowitz and I.A. Stegun, Handbook of Mathematical Functions (1964), 26.4.19.
 * @param chi2 - >= 0; infinity gives 0
 * @param ndf - an integer >= 0
 * @throws InputError if `chi2` is negative or NaN, or `ndf` is no integer >= 0
 */
export function chiSquareProbability(chi2: number, ndf: number): number {
  if (!(chi2 >= 0)) refuse("chiSquareProbability: chi2", "a number >= 0", chi2);
  requireInteger("chiSquareProbability: ndf", ndf, 0);
  if (ndf === 0 || chi2 === 0) return 1;
  if (chi2 === Number.POSITIVE_INFINITY) return 0;
  return gammainc(chi2 / 2, ndf / 2, true, true);
}

/**
 * Scale factor S = sqrt(chi2 / ndf) by which errors would have to grow for chi2 to equal its expectation; never below 1.
 *
 * Source: Particle Data Group, Review of Particle Physics, introduction, "Constrained fits". Provenance: memory.
 * @returns undefined with no degrees of freedom
 */
export function scaleFactor(chi2: number, ndf: number): number | undefined {
  return ndf > 0 ? Math.max(1, Math.sqrt(chi2 / ndf)) : undefined;
}

/**
 * Number of standard deviations on both sides of 0 that hold a given part of a Gaussian, e.g. 1.6449 for 0.9.
 *
 * The square root of the chi-square quantile with one degree of freedom, found by bisection on the tail.
 * @param confidence - between 0 and 1, ends excluded; up to 1 - 1e-15
 * @throws InputError outside that range
 */
export function gaussianDeviations(confidence: number): number {
  if (!(confidence > 0 && confidence < 1)) {
    refuse("gaussianDeviations: confidence", "a number between 0 and 1, ends excluded", confidence);
  }
  let [low, high] = [0, 9];
  for (;;) {
    const middle = (low + high) / 2;
    if (middle === low || middle === high) return middle;
    if (chiSquareProbability(middle * middle, 1) > 1 - confidence) low = middle;
    else high = middle;
  }
}
