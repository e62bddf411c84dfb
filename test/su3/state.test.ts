import { describe, expect, test } from "vitest";
import { InputError, LimitError } from "../../src/errors.js";
import { irrepDimension, parseIrrep, triality } from "../../src/su3/irrep.js";
import {
  conjugateState,
  requireState,
  type State,
  sameState,
  states,
  threeCharge,
} from "../../src/su3/state.js";
import { irrepsUpTo } from "../support/irreps-up-to.js";
import { type IrrepSpace, irrepSpace } from "../support/ladder-space.js";

describe("states", () => {
  test("are as many as the dimension, all different and all accepted", () => {
    for (const irrep of irrepsUpTo(7)) {
      const list = states(irrep);
      expect(new Set(list.map(({ threeY, twoI, twoI3 }) => `${threeY},${twoI},${twoI3}`)).size).toBe(
        irrepDimension(irrep),
      );
      for (const state of list) requireState("test", state);
    }
  });

  test("of the octet are p, n, Sigma+, Sigma0, Sigma-, Lambda, Xi0, Xi- with their charges", () => {
    const charges = states(parseIrrep("8")).map((state) => threeCharge(state) / 3);
    expect(charges).toEqual([1, 0, 1, 0, -1, 0, 0, -1]);
  });

  test("of the triplet and antitriplet have the charges of quarks and antiquarks", () => {
    expect(states(parseIrrep("3")).map(threeCharge)).toEqual([2, -1, -1]);
    expect(states(parseIrrep("3bar")).map(threeCharge)).toEqual([1, 1, -2]);
  });

  test("have integer 3Q, congruent modulo 3 to twice the triality", () => {
    for (const irrep of irrepsUpTo(6)) {
      for (const state of states(irrep)) {
        expect(Number.isInteger(threeCharge(state))).toBe(true);
        expect((((threeCharge(state) - 2 * triality(irrep)) % 3) + 3) % 3).toBe(0);
      }
    }
  });

  test("that do not exist are refused", () => {
    const octet = parseIrrep("8");
    expect(() => requireState("here", { irrep: octet, threeY: 3, twoI: 2, twoI3: 0 })).toThrow(
      new InputError("here: (threeY, twoI): expected an isospin multiplet of (1, 1), got [3,2]."),
    );
    expect(() => requireState("here", { irrep: octet, threeY: 3, twoI: 1, twoI3: 0 })).toThrow(
      new InputError("here: twoI3: expected a number from -1 to 1 in steps of 2, got 0."),
    );
  });

  test("of too large an irrep are refused", () => {
    expect(() => states({ p: 200, q: 200 })).toThrow(
      new LimitError(
        "states: expected at most 1000000 states, got 8120601 in (200, 200). Choose a smaller irrep.",
      ),
    );
  });
});

describe("conjugation", () => {
  test("twice gives the state back with phase 1", () => {
    for (const irrep of irrepsUpTo(5)) {
      for (const state of states(irrep)) {
        const once = conjugateState(state);
        const twice = conjugateState(once.state);
        expect(sameState(twice.state, state)).toBe(true);
        expect(once.phase * twice.phase).toBe(1);
      }
    }
  });

  test("makes the antitriplet (dbar, -ubar; sbar)", () => {
    const phases = states(parseIrrep("3")).map((state) => conjugateState(state).phase);
    expect(phases).toEqual([-1, 1, 1]);
  });

  test("takes every matrix element of a generator to minus its transpose", () => {
    for (const irrep of irrepsUpTo(4)) {
      const space = irrepSpace(irrep);
      const conjugateSpace = irrepSpace({ p: irrep.q, q: irrep.p });
      for (const generator of ["I+", "V+", "U+"] as const) {
        for (let b = 0; b < space.size; b++) {
          for (const [a, value] of space.images[generator][b]!) {
            const [from, to] = [conjugateOf(space, irrep, a), conjugateOf(space, irrep, b)];
            const image = conjugateSpace.images[generator][indexOf(conjugateSpace, from.state)]!;
            const element = image.get(indexOf(conjugateSpace, to.state))!;
            expect(Math.sign(Number(element.num)) * from.phase * to.phase).toBe(
              -Math.sign(Number(value.num)),
            );
          }
        }
      }
    }
  });
});

function conjugateOf(space: IrrepSpace, irrep: { p: number; q: number }, i: number) {
  return conjugateState({ irrep, threeY: space.threeY[i]!, twoI: space.twoI[i]!, twoI3: space.twoI3[i]! });
}

function indexOf(space: IrrepSpace, state: State): number {
  return space.threeY.findIndex(
    (threeY, i) => threeY === state.threeY && space.twoI[i] === state.twoI && space.twoI3[i] === state.twoI3,
  );
}
