/**
 * x to the power of a small integer n >= 0, by multiplication: several times faster than `**`, and within n/2 ulp.
 *
 * @param n - an integer >= 0; powers of momenta in widths stay below 30
 */
export function integerPower(x: number, n: number): number {
  let power = 1;
  for (let k = 0; k < n; k++) power *= x;
  return power;
}
