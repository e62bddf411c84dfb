import { type SignedRoot, signedRoot, ZERO_ROOT } from "../exact/signed-root.js";
import { refuse, requireInteger } from "../require.js";

/**
 * SU(2) Clebsch-Gordan coefficient <j1 m1; j2 m2 | j m>, exact, in the phases of Condon and Shortley.
 *
 * All labels are doubled. 0 where m differs from m1 + m2 or j lies outside |j1 - j2| .. j1 + j2 in steps of 1.
 * Cost O(j1 + j2) products of integers of O(j1 + j2) digits.
 * Source: the sum of E.P. Wigner and G. Racah in the form with binomial coefficients only, as in L. Wei, Comput. Phys.
 * Commun. 120 (1999) 222 (provenance: memory; checked by orthogonality and published values).
 * @throws InputError if a spin is negative, or a projection does not belong to its spin
 */
export function clebschGordan(
  twoJ1: number,
  twoM1: number,
  twoJ2: number,
  twoM2: number,
  twoJ: number,
  twoM: number,
): SignedRoot {
  requireSpin("1", twoJ1, twoM1);
  requireSpin("2", twoJ2, twoM2);
  requireSpin("", twoJ, twoM);
  const total = twoJ1 + twoJ2 + twoJ;
  if (total % 2 !== 0 || twoM !== twoM1 + twoM2) return ZERO_ROOT;
  if (twoJ > twoJ1 + twoJ2 || twoJ < Math.abs(twoJ1 - twoJ2)) return ZERO_ROOT;

  const without = total / 2 - twoJ;
  const without2 = total / 2 - twoJ2;
  const without1 = total / 2 - twoJ1;
  const lower1 = (twoJ1 - twoM1) / 2;
  const upper2 = (twoJ2 + twoM2) / 2;
  let sum = 0n;
  for (
    let k = Math.max(0, lower1 - without2, upper2 - without1);
    k <= Math.min(without, lower1, upper2);
    k++
  ) {
    const term = binomial(without, k) * binomial(without2, lower1 - k) * binomial(without1, upper2 - k);
    sum += k % 2 === 0 ? term : -term;
  }
  const num = binomial(twoJ1, without) * binomial(twoJ2, without);
  const den =
    binomial(total / 2 + 1, without) *
    binomial(twoJ1, lower1) *
    binomial(twoJ2, (twoJ2 - twoM2) / 2) *
    binomial(twoJ, (twoJ - twoM) / 2);
  return signedRoot(sum, sum * sum * num, den);
}

/** The binomial coefficient n over k for 0 <= k <= n. */
function binomial(n: number, k: number): bigint {
  let product = 1n;
  for (let i = 1; i <= Math.min(k, n - k); i++) product = (product * BigInt(n - i + 1)) / BigInt(i);
  return product;
}

function requireSpin(index: string, twoJ: number, twoM: number): void {
  requireInteger(`clebschGordan: twoJ${index}`, twoJ, 0, "Spins are given doubled.");
  if (Number.isInteger(twoM) && Math.abs(twoM) <= twoJ && (twoJ - twoM) % 2 === 0) return;
  refuse(
    `clebschGordan: twoM${index}`,
    `a number from ${-twoJ || 0} to ${twoJ} in steps of 2`,
    twoM,
    "Projections are given doubled.",
  );
}
