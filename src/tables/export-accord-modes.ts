import { WHOLE } from "../completion/parts-per-billion.js";
import { couplet } from "../gen/couplet.js";
import type { HadronNumbers } from "./export-numbers.js";

import v1 = couplet.v1;

/** A set of stable or narrow daughters, with the part of the parent's width that ends in it. */
export interface FinalState {
  /** In parts per 10^9; whole for a row as it stands, any number for one made of several tables. */
  readonly parts: number;
  readonly daughters: readonly string[];
  /** The row it comes from, and where an unstable daughter was replaced by its decays: by which. */
  readonly comment: string;
}

/** What a parent's rows end in, and the rows that cannot be written. */
export interface FinalStates {
  readonly states: readonly FinalState[];
  readonly leftOut: readonly { readonly row: string; readonly parts: number; readonly reason: string }[];
}

type Parent = v1.Parent.$Properties;
type Row = v1.Row.$Properties;

/** A chain of decays never gets this long: every step loses mass. */
const LONGEST_CHAIN = 12;

/**
 * What the rows of a table's parents end in where daughters have their nominal masses: an open row as it stands, a row
 * that is open only through the width of a daughter as the final states of that daughter's own table.
 */
export class FinalStateFinder {
  readonly #parents: ReadonlyMap<string, Parent>;
  readonly #numbers: HadronNumbers;

  constructor(parents: readonly Parent[], numbers: HadronNumbers) {
    this.#parents = new Map(parents.map((parent) => [parent.hadron!.name!, parent]));
    this.#numbers = numbers;
  }

  of(parent: Parent): FinalStates {
    return this.#of(parent, 0);
  }

  #of(parent: Parent, depth: number): FinalStates {
    const states: FinalState[] = [];
    const leftOut: { row: string; parts: number; reason: string }[] = [];
    for (const row of parent.rows ?? []) {
      const parts = row.partsPerBillion ?? 0;
      const found = this.#rowStates(row, parts, parent.hadron?.mass ?? 0, depth);
      states.push(...found.states);
      const missing = parts - found.states.reduce((sum, state) => sum + state.parts, 0);
      // A part that is lost to rounding of doubles has no reason of its own.
      if (missing > 0.5 || found.states.length === 0) {
        leftOut.push({ row: row.id!, parts: missing, reason: found.reason });
      }
    }
    return { states, leftOut };
  }

  #rowStates(
    row: Row,
    parts: number,
    massMeV: number,
    depth: number,
  ): { states: FinalState[]; reason: string } {
    const daughters = (row.daughters ?? []).map(({ name }) => name!);
    const none = (reason: string) => ({ states: [], reason });
    if (row.kinematics === v1.Kinematics.KINEMATICS_CLOSED) return none("closed at the nominal mass");
    if (daughters.length === 0) return none("no daughters are named");
    if (parts === 0) return none("below one part in 10^9");
    if (row.kinematics !== v1.Kinematics.KINEMATICS_FOLDED) {
      return { states: [{ parts, daughters, comment: row.id! }], reason: "" };
    }
    return this.#expanded({ parts, daughters, comment: row.id! }, massMeV, depth);
  }

  /** A state whose daughters are too heavy, with the widest of them replaced by its decays until all are light enough. */
  #expanded(state: FinalState, massMeV: number, depth: number): { states: FinalState[]; reason: string } {
    if (this.#massOf(state.daughters) < massMeV) return { states: [state], reason: "" };
    const broad = this.#widest(state.daughters);
    if (broad === undefined || depth > LONGEST_CHAIN) {
      return { states: [], reason: "open only through the width of a daughter that has no table here" };
    }
    const { states } = this.#of(broad.parent, depth + 1);
    const found = states.map((inner) => {
      const daughters = inner.daughters.map((name) =>
        broad.conjugate ? this.#numbers.conjugateName(name) : name,
      );
      const replaced = {
        parts: (state.parts * inner.parts) / WHOLE,
        daughters: [...state.daughters.filter((_, k) => k !== broad.index), ...daughters],
        comment: `${state.comment}, ${state.daughters[broad.index]} -> ${daughters.join(" ")}`,
      };
      return this.#expanded(replaced, massMeV, depth + 1);
    });
    return { states: found.flatMap((each) => each.states), reason: "a daughter's table has no final state" };
  }

  #massOf(names: readonly string[]): number {
    return names.reduce((sum, name) => sum + this.#numbers.massMeV(name), 0);
  }

  /** The daughter of largest width that the file has a table of, its own or its antiparticle's. */
  #widest(
    names: readonly string[],
  ): { index: number; parent: Parent; conjugate: boolean; widthMeV: number } | undefined {
    const found = names.flatMap((name, index) => {
      const own = this.#parents.get(name);
      const parent = own ?? this.#parents.get(this.#numbers.conjugateName(name));
      if (parent === undefined) return [];
      return [{ index, parent, conjugate: own === undefined, widthMeV: parent.totalWidth ?? 0 }];
    });
    return found.sort((a, b) => b.widthMeV - a.widthMeV)[0];
  }
}
