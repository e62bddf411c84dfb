import { negateRoot, type SignedRoot, signedRoot } from "../exact/signed-root.js";
import { type MatrixState, octetMatrixStates } from "../su3/matrix-phases.js";
import { conjugateState, type State, sameState } from "../su3/state.js";

/** Id of the matrix convention, as tables name it; see `MatrixConvention`. */
export const MATRIX_CONVENTION = "couplet-matrix-v1";

/** The Lagrangian whose vertices are the octet couplings in the matrix convention, in one line. */
export const OCTET_LAGRANGIAN = "L = sqrt2 { D Tr(Bbar {M, B}) + F Tr(Bbar [M, B]) }";

/** One entry of the 3x3 matrix of an octet: the states it holds, each with its coefficient. */
export interface MatrixEntry {
  readonly row: 1 | 2 | 3;
  readonly column: 1 | 2 | 3;
  readonly parts: readonly { readonly state: State; readonly times: SignedRoot }[];
}

/**
 * Phases of states as matrices and tensors: |Y, I, I3> of `deswart-v1` = phase times basis state.
 *
 * An octet is a traceless 3x3 matrix, rows quark, columns antiquark; (p, 0) a symmetric tensor with p upper indices,
 * whose normalised components all have phase +1 (the decuplet: T_111 = Delta++, T_112 = Delta+/sqrt3); (0, q) the
 * conjugate of one, phase -1 for each ubar. Other irreps have no form here. The sign of a whole octet is free; three of
 * them meet in a vertex, and this choice gives the Lagrangian `OCTET_LAGRANGIAN` with g_S and g_A positive multiples
 * of D and F. Then Sigma+, p, n, Xi0 (pi+, K+, K0, K0bar) are minus, the others plus their matrix.
 * Source: J. J. de Swart, Rev. Mod. Phys. 35 (1963) 916, for the phases of states (provenance: memory; the phases
 * against matrices are derived from the action of the generators).
 */
export class MatrixConvention {
  readonly #octet: readonly MatrixState[] = octetMatrixStates();

  /** The phase of a state, or undefined where its irrep has no matrix or tensor form here. */
  phase(state: State): 1 | -1 | undefined {
    const { p, q } = state.irrep;
    if (q === 0) return 1;
    if (p === 0) return conjugateState(state).phase;
    const matrix = this.#octet.find((entry) => sameState(entry.state, state));
    return matrix === undefined ? undefined : this.#octetPhase(matrix);
  }

  /** The phase of a coupling between states, the product of theirs; undefined if one of them has none. */
  couplingPhase(vertex: readonly State[]): 1 | -1 | undefined {
    const phases = vertex.map((state) => this.phase(state));
    return phases.every((phase) => phase !== undefined)
      ? phases.reduce<1 | -1>((product, phase) => (product === phase ? 1 : -1), 1)
      : undefined;
  }

  /** A coefficient between states in this convention, from the one in `deswart-v1`; null where it is not defined. */
  coefficient(c: SignedRoot, vertex: readonly State[]): SignedRoot | null {
    const phase = this.couplingPhase(vertex);
    return phase === undefined ? null : phase === 1 ? c : negateRoot(c);
  }

  /** The layout of an octet's matrix, entry by entry; basis states, so without their phases. */
  octetLayout(): MatrixEntry[] {
    return ([1, 2, 3] as const).flatMap((row) =>
      ([1, 2, 3] as const).map((column) => ({ row, column, parts: this.#partsAt(row, column) })),
    );
  }

  /** The states of the octet with their phases, in the order of `states`. */
  octetPhases(): { state: State; phase: 1 | -1 }[] {
    return this.#octet.map((matrix) => ({ state: matrix.state, phase: this.#octetPhase(matrix) }));
  }

  /** `octetMatrixStates` has p and K+ positive. */
  #octetPhase({ phase }: MatrixState): 1 | -1 {
    return phase === 1 ? -1 : 1;
  }

  #partsAt(row: number, column: number): MatrixEntry["parts"] {
    return this.#octet.flatMap(({ state, entries, square }) => {
      const entry = entries[row - 1]![column - 1]!;
      return entry === 0 ? [] : [{ state, times: signedRoot(entry, entry * entry, square) }];
    });
  }
}
