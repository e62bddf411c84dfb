import type { State } from "../su3/state.js";

/** One component of an operator: a pure state of an irrep of SU(3), with its real weight. */
export interface OperatorPart {
  readonly state: State;
  readonly weight: number;
}

/**
 * What turns the initial state into the final one, by its flavour: a weighted sum of components.
 *
 * Exact forms are made for one component at a time; the weights enter where amplitudes are evaluated.
 */
export interface Operator {
  readonly name: string;
  readonly parts: readonly OperatorPart[];
  /** Whether its reduced couplings may have phases: false for interactions that conserve T, without final-state phases. */
  readonly complex: boolean;
}

/** The strong interaction in the limit of exact SU(3): the singlet. */
export const STRONG: Operator = {
  name: "strong",
  parts: [{ state: { irrep: { p: 0, q: 0 }, threeY: 0, twoI: 0, twoI3: 0 }, weight: 1 }],
  complex: false,
};
