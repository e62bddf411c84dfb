import { describe, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { mcNumberContent } from "./mc-number-content.js";

describe("content of a Monte Carlo number", () => {
  test.each([
    [211, 1, 0, 0],
    [-321, -1, -1, 0],
    [311, 0, 1, 0],
    [431, 1, 1, 1],
    [10213, 1, 0, 2],
    [20213, 1, 0, 2],
    [3112, -1, -1, 1],
    [-3334, 1, 3, 3],
    [4232, 1, -1, 1],
  ])("of %i: charge %i, strangeness %i", (number, charge, strangeness) => {
    expect(mcNumberContent(number)).toMatchObject({ charge, strangeness });
  });

  test("of the neutral kaons of definite lifetime: no charge, no flavour, no spin digit", () => {
    const nothing = { charge: 0, strangeness: 0, charm: 0, baryonNumber: 0, twoJ: null };
    expect([mcNumberContent(310), mcNumberContent(130)]).toEqual([nothing, nothing]);
  });

  test("spin: 2J + 1 is the last digit", () => {
    expect([111, 225, 2212, 2224, 2118].map((number) => mcNumberContent(number).twoJ)).toEqual([
      0, 4, 1, 3, 7,
    ]);
  });

  test.each([22, 11, 0, 1.5, 12, 99999999])("%d is refused, being no hadron", (number) => {
    expect(() => mcNumberContent(number)).toThrow(
      new InputError(
        `mcNumberContent: mcNumber: expected the Monte Carlo number of a meson or baryon, got ${number}.`,
      ),
    );
  });
});
