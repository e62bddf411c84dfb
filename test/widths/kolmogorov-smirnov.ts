/**
 * Largest distance between the distribution of a sample and a cumulative distribution, times the root of the size.
 *
 * For a sample of that distribution it exceeds x with a chance of 2 exp(-2 x^2) if the sample is large.
 * Source: A. Kolmogorov, Giorn. Ist. Ital. Attuari 4 (1933) 83; provenance memory.
 */
export function kolmogorovSmirnov(sample: readonly number[], cumulative: (x: number) => number): number {
  const sorted = [...sample].sort((a, b) => a - b);
  const n = sorted.length;
  const distances = sorted.map((x, k) => {
    const F = cumulative(x);
    return Math.max((k + 1) / n - F, F - k / n);
  });
  return distances.reduce((largest, distance) => Math.max(largest, distance), 0) * Math.sqrt(n);
}

/** The value that `kolmogorovSmirnov` exceeds by chance once in a million true samples. */
export const ONE_IN_A_MILLION = Math.sqrt(Math.log(2e6) / 2);
