import type { SignedRoot } from "../exact/signed-root.js";
import { couplet } from "../gen/couplet.js";
import { su3ClebschGordan } from "../su3/clebsch-gordan.js";
import type { IsoscalarTable } from "../su3/isoscalar-factors.js";
import { type State, states } from "../su3/state.js";
import { producerName } from "../version.js";
import { exactMessage } from "./exact-message.js";
import { sealBytes } from "./sealed-bytes.js";

import v1 = couplet.v1;

/** Lowest minor version of the schema a reader of our factor tables must know. */
export const FACTORS_SCHEMA_MINOR = 0;

/** A full SU(3) coefficient between states. */
export interface StateCoefficient {
  readonly product: State;
  readonly copy: number;
  readonly left: State;
  readonly right: State;
  readonly value: SignedRoot;
}

/** Every nonzero full coefficient of a table, in the order of irreps, copies, product states, then left states. */
export function* stateCoefficients(table: IsoscalarTable): Iterable<StateCoefficient> {
  const lefts = states(table.left);
  const rights = states(table.right);
  for (const { irrep, multiplicity } of table.series) {
    for (let copy = 1; copy <= multiplicity; copy++) {
      for (const product of states(irrep)) {
        for (const left of lefts) {
          for (const right of rights) {
            if (left.threeY + right.threeY !== product.threeY || left.twoI3 + right.twoI3 !== product.twoI3)
              continue;
            const value = su3ClebschGordan(left, right, product, copy);
            if (value.sign !== 0) yield { product, copy, left, right, value };
          }
        }
      }
    }
  }
}

/** A table as the bytes of a sealed `couplet.v1.FactorTable` file. The same table gives the same bytes. */
export function encodeFactors(table: IsoscalarTable, options: { readonly states: boolean }): Uint8Array {
  return sealBytes(v1.FactorTable.encode(factorsMessage(table, options)).finish());
}

/** A table as a message, without the digest. */
export function factorsMessage(
  table: IsoscalarTable,
  options: { readonly states: boolean },
): v1.FactorTable.$Properties {
  return {
    kind: "couplet.v1.FactorTable",
    schemaMinor: FACTORS_SCHEMA_MINOR,
    producer: producerName(),
    left: { ...table.left },
    right: { ...table.right },
    convention: table.convention,
    multiplicityRule: table.multiplicityRule,
    factors: [...table.factors()].map((factor) => ({ ...factor, value: exactMessage(factor.value) })),
    states: options.states
      ? [...stateCoefficients(table)].map((c) => ({ ...c, value: exactMessage(c.value) }))
      : [],
  };
}
