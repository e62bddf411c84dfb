/**
 * Centrifugal barrier factor F_L^2 = z^L / P_L(z), z = (R q)^2: z^L/P_L(0) near threshold, 1 far above it.
 *
 * Source: F. von Hippel and C. Quigg, Phys. Rev. D 5 (1972) 624.
 * @param z - (R q)^2, dimensionless, >= 0
 * @returns from 0 to 1
 */
export function barrierFactorSquared(L: number, z: number): number {
  return z ** L / barrierPolynomial(L, z);
}

/**
 * The polynomial P_L(z) = |theta_L(i sqrt z)|^2 of the barrier factor: 1, 1 + z, 9 + 3z + z^2, ...
 *
 * theta_L are the reverse Bessel polynomials, theta_L(x) = (2L-1) theta_(L-1)(x) + x^2 theta_(L-2)(x); at x = i sqrt z
 * the recurrence keeps real and imaginary parts apart, so any L is reached without a table.
 * @example barrierPolynomial(2, 1) // 13
 */
export function barrierPolynomial(L: number, z: number): number {
  if (L === 0) return 1;
  let [previousRe, previousIm] = [1, 0];
  let [re, im] = [1, Math.sqrt(z)];
  for (let order = 2; order <= L; order++) {
    const weight = 2 * order - 1;
    [previousRe, previousIm, re, im] = [re, im, weight * re - z * previousRe, weight * im - z * previousIm];
  }
  return re * re + im * im;
}
