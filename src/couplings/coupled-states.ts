import { type SignedRoot, ZERO_ROOT } from "../exact/signed-root.js";
import { su3ClebschGordan } from "../su3/clebsch-gordan.js";
import {
  hasMultiplet,
  type Irrep,
  type IsospinMultiplet,
  isospinMultiplets,
  sameIrrep,
} from "../su3/irrep.js";
import { type IsoscalarTable, isoscalarTable } from "../su3/isoscalar-factors.js";
import type { CouplingStep } from "../su3/product.js";
import type { State } from "../su3/state.js";

/** A state reached by coupling others, and the exact SU(3) Clebsch-Gordan coefficient it is reached with. */
export interface ReachedState {
  readonly state: State;
  readonly value: SignedRoot;
}

/** One factor of a product with its isospin multiplet. */
export interface Placed extends IsospinMultiplet {
  readonly irrep: Irrep;
}

/**
 * Couples states by exact isoscalar factors, each table computed once, when it is first asked for.
 *
 * Phases: convention `deswart-v1`, the left state first.
 */
export class StateCoupler {
  readonly #tables: { left: Irrep; right: Irrep; into: Irrep; table: IsoscalarTable }[] = [];

  /** The isoscalar factor of a coupling step for given isospin multiplets; 0 where their labels forbid it. */
  isoscalarFactor(left: Placed, right: Placed, step: CouplingStep, reached: IsospinMultiplet): SignedRoot {
    if (!hasMultiplet(step.irrep, reached)) return ZERO_ROOT;
    const channel = { threeY1: left.threeY, twoI1: left.twoI, threeY2: right.threeY, twoI2: right.twoI };
    return this.#table(left.irrep, right.irrep, step.irrep).factor(step.irrep, step.copy, reached, channel);
  }

  /** Every state of one copy of an irrep that two states couple to: the same Y and I3, all isospins, no zeros. */
  couple(left: State, right: State, step: CouplingStep): ReachedState[] {
    const threeY = left.threeY + right.threeY;
    const twoI3 = left.twoI3 + right.twoI3;
    const table = this.#table(left.irrep, right.irrep, step.irrep);
    return isospinMultiplets(step.irrep)
      .filter((place) => place.threeY === threeY && place.twoI >= Math.abs(twoI3))
      .map(({ twoI }) => {
        const state = { irrep: step.irrep, threeY, twoI, twoI3 };
        return { state, value: su3ClebschGordan(left, right, state, step.copy, table) };
      })
      .filter(({ value }) => value.sign !== 0);
  }

  #table(left: Irrep, right: Irrep, into: Irrep): IsoscalarTable {
    const known = this.#tables.find(
      (entry) => sameIrrep(entry.left, left) && sameIrrep(entry.right, right) && sameIrrep(entry.into, into),
    );
    if (known !== undefined) return known.table;
    const table = isoscalarTable(left, right, { into });
    this.#tables.push({ left, right, into, table });
    return table;
  }
}
