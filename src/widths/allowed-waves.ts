import { refuse, requireInteger } from "../require.js";
import type { SpinParity } from "./width-model-definition.js";

/** One partial wave of a two-body decay: orbital angular momentum L and twice the total spin S of the daughters. */
export interface Wave {
  readonly L: number;
  readonly twoS: number;
}

/**
 * Partial waves of a two-body decay that conserves angular momentum and, unless told otherwise, parity.
 *
 * |J - S| <= L <= J + S with |j1 - j2| <= S <= j1 + j2, and P = P1 P2 (-1)^L. Sorted by L, then S. An empty list means
 * that the decay is forbidden (0- to two 0- by the strong interaction).
 * @param parityConserved - false for weak decays
 * @throws InputError for spins that are no half-integers >= 0, or that cannot add up (a fermion into two bosons)
 * @example allowedWaves({ twoJ: 3, parity: 1 }, { twoJ: 1, parity: 1 }, { twoJ: 0, parity: -1 }) // [{ L: 1, twoS: 1 }]
 */
export function allowedWaves(
  parent: SpinParity,
  first: SpinParity,
  second: SpinParity,
  parityConserved = true,
): Wave[] {
  for (const { twoJ } of [parent, first, second]) {
    requireInteger("allowedWaves: twoJ", twoJ, 0, "Give twice the spin.");
  }
  if ((parent.twoJ + first.twoJ + second.twoJ) % 2 !== 0) {
    const spins = [parent.twoJ, first.twoJ, second.twoJ];
    const mend = "Check the spins: one of the three is a baryon too many or too few.";
    refuse("allowedWaves: twice the spins", "an even number of half-integer spins", spins, mend);
  }
  const waves: Wave[] = [];
  const largestL = (parent.twoJ + first.twoJ + second.twoJ) / 2;
  for (let L = 0; L <= largestL; L++) {
    const parity = first.parity * second.parity * (L % 2 === 0 ? 1 : -1);
    if (parityConserved && parity !== parent.parity) continue;
    for (let twoS = Math.abs(first.twoJ - second.twoJ); twoS <= first.twoJ + second.twoJ; twoS += 2) {
      if (Math.abs(parent.twoJ - twoS) <= 2 * L && 2 * L <= parent.twoJ + twoS) waves.push({ L, twoS });
    }
  }
  return waves;
}
