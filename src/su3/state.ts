import { LimitError } from "../errors.js";
import { refuse, requireInteger } from "../require.js";
import {
  conjugate,
  hasMultiplet,
  type Irrep,
  irrepDimension,
  isospinMultiplets,
  requireIrrep,
} from "./irrep.js";

/** One state of an irrep, by integers: 3Y, 2I and 2I3. Inside an irrep these labels name exactly one state. */
export interface State {
  readonly irrep: Irrep;
  readonly threeY: number;
  readonly twoI: number;
  readonly twoI3: number;
}

const LARGEST_STATE_LIST = 1_000_000;

/**
 * The states of an irrep: Y descending, then I descending, then I3 descending. Length irrepDimension(irrep).
 *
 * @throws LimitError above one million states
 */
export function states(irrep: Irrep): State[] {
  const count = irrepDimension(irrep);
  if (count > LARGEST_STATE_LIST) {
    throw new LimitError(
      `states: expected at most ${LARGEST_STATE_LIST} states, got ${count} in (${irrep.p}, ${irrep.q}). Choose a smaller irrep.`,
    );
  }
  const list: State[] = [];
  for (const { threeY, twoI } of isospinMultiplets(irrep)) {
    for (let twoI3 = twoI; twoI3 >= -twoI; twoI3 -= 2) list.push({ irrep, threeY, twoI, twoI3 });
  }
  return list;
}

/**
 * Three times the electric charge, 3Q = 3 I3 + 3Y/2: an integer, and a multiple of 3 in irreps of triality 0.
 *
 * Source: M. Gell-Mann, Phys. Rev. 92 (1953) 833; T. Nakano and K. Nishijima, Prog. Theor. Phys. 10 (1953) 581
 * (provenance: memory).
 */
export function threeCharge(state: State): number {
  return (3 * state.twoI3 + state.threeY) / 2;
}

/**
 * The conjugate of a state: |R; Y I I3>* = phase · |Rbar; -Y I -I3>, phase = (-1)^(Q + (p-q)/3).
 *
 * It is the phase that keeps all matrix elements of I+ and V+ positive in both irreps (convention `deswart-v1`); for
 * antiquarks it gives the antitriplet (dbar, -ubar; sbar). Conjugating twice gives the state back, with phase 1.
 * Source: J.J. de Swart, Rev. Mod. Phys. 35 (1963) 916 (provenance: memory; checked with the generators).
 */
export function conjugateState(state: State): { phase: 1 | -1; state: State } {
  const { irrep, threeY, twoI, twoI3 } = state;
  const exponent = (threeCharge(state) + irrep.p - irrep.q) / 3;
  return {
    phase: exponent % 2 === 0 ? 1 : -1,
    state: { irrep: conjugate(irrep), threeY: negative(threeY), twoI, twoI3: negative(twoI3) },
  };
}

/** Whether a and b are the same state. */
export function sameState(a: State, b: State): boolean {
  return (
    a.irrep.p === b.irrep.p &&
    a.irrep.q === b.irrep.q &&
    a.threeY === b.threeY &&
    a.twoI === b.twoI &&
    a.twoI3 === b.twoI3
  );
}

/**
 * Checks that a state exists.
 *
 * @param where - the function and argument, for the message
 * @throws InputError if the irrep has no such multiplet, or the multiplet no such I3
 */
export function requireState(where: string, state: State): void {
  const { irrep, threeY, twoI, twoI3 } = state;
  requireIrrep(where, irrep);
  requireInteger(`${where}: twoI3`, twoI3, -Number.MAX_SAFE_INTEGER);
  if (!hasMultiplet(irrep, { threeY, twoI })) {
    refuse(`${where}: (threeY, twoI)`, `an isospin multiplet of (${irrep.p}, ${irrep.q})`, [threeY, twoI]);
  }
  if (Math.abs(twoI3) > twoI || (twoI - twoI3) % 2 !== 0) {
    refuse(`${where}: twoI3`, `a number from ${negative(twoI)} to ${twoI} in steps of 2`, twoI3);
  }
}

/** -n without the negative zero. */
function negative(n: number): number {
  return n === 0 ? 0 : -n;
}
