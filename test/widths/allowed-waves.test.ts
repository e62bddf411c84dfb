import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { allowedWaves } from "../../src/widths/allowed-waves.js";
import type { SpinParity } from "../../src/widths/width-model-definition.js";

const SEED = 7;

/** `3/2-` as spin and parity. */
function jp(text: string): SpinParity {
  const twoJ = text.includes("/") ? Number.parseInt(text, 10) : 2 * Number.parseInt(text, 10);
  return { twoJ, parity: text.endsWith("+") ? 1 : -1 };
}

function orbital(parent: string, first: string, second: string): number[] {
  return allowedWaves(jp(parent), jp(first), jp(second)).map(({ L }) => L);
}

describe("allowed waves", () => {
  test.each([
    ["1/2-", 0],
    ["1/2+", 1],
    ["3/2+", 1],
    ["3/2-", 2],
    ["5/2-", 2],
    ["5/2+", 3],
    ["7/2+", 3],
    ["7/2-", 4],
  ])("%s to 1/2+ 0- has the one wave L = %i", (parent, L) => {
    expect(orbital(parent, "1/2+", "0-")).toEqual([L]);
  });

  test.each([
    ["1/2-", [2]],
    ["1/2+", [1]],
    ["3/2-", [0, 2]],
    ["3/2+", [1, 3]],
    ["5/2-", [2, 4]],
    ["5/2+", [1, 3]],
  ])("%s to 3/2+ 0- has the waves L = %j", (parent, expected) => {
    expect(orbital(parent, "3/2+", "0-")).toEqual(expected);
  });

  test("3/2- to 1/2+ 1- has three waves, with both total spins", () => {
    expect(allowedWaves(jp("3/2-"), jp("1/2+"), jp("1-"))).toEqual([
      { L: 0, twoS: 3 },
      { L: 2, twoS: 1 },
      { L: 2, twoS: 3 },
    ]);
  });

  test("a pseudoscalar has no parity-conserving decay to two pseudoscalars, and one that is not", () => {
    expect(allowedWaves(jp("0-"), jp("0-"), jp("0-"))).toEqual([]);
    expect(allowedWaves(jp("0-"), jp("0-"), jp("0-"), false)).toEqual([{ L: 0, twoS: 0 }]);
  });

  test("without parity the number of waves is the number of helicity amplitudes", () => {
    const spin = fc.integer({ min: 0, max: 7 });
    const property = fc.property(spin, spin, spin, (twoJ, twoJ1, twoJ2) => {
      fc.pre((twoJ + twoJ1 + twoJ2) % 2 === 0);
      let helicities = 0;
      for (let m1 = -twoJ1; m1 <= twoJ1; m1 += 2) {
        for (let m2 = -twoJ2; m2 <= twoJ2; m2 += 2) if (Math.abs(m1 - m2) <= twoJ) helicities++;
      }
      const count = allowedWaves(
        { twoJ, parity: 1 },
        { twoJ: twoJ1, parity: 1 },
        { twoJ: twoJ2, parity: 1 },
        false,
      ).length;
      expect(count).toBe(helicities);
    });
    fc.assert(property, { seed: SEED });
  });

  test("spins that cannot add up are refused in words", () => {
    expect(() => allowedWaves(jp("1/2+"), jp("0-"), jp("0-"))).toThrow(
      new InputError(
        "allowedWaves: twice the spins: expected an even number of half-integer spins, got [1,0,0]. " +
          "Check the spins: one of the three is a baryon too many or too few.",
      ),
    );
  });
});
