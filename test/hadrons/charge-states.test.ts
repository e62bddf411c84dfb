import { describe, expect, test } from "vitest";
import { catalogueParticle } from "../../src/hadrons/catalogue.js";
import { chargeStateName, chargeStates } from "../../src/hadrons/charge-states.js";
import { assembleMultiplet } from "../../src/hadrons/multiplet.js";
import { placeOf } from "../../src/hadrons/place.js";

const QUANTUM = { irrep: { p: 1, q: 1 }, twoJ: 5, parity: -1, baryonNumber: 1, charm: 0 } as const;
const VALUES = {
  massMeV: 1775,
  massErrorMeV: { plus: 5, minus: 5 },
  widthMeV: 120,
  widthErrorMeV: { plus: 15, minus: 15 },
};

describe("charge states of a member", () => {
  test("of one the catalogue knows are the catalogue's own entries", () => {
    const made = chargeStates("Sigma(1775)", placeOf(QUANTUM.irrep, "Sigma"), QUANTUM, VALUES);
    expect(made).toEqual(["Sigma(1775)+", "Sigma(1775)0", "Sigma(1775)-"].map(catalogueParticle));
  });

  test("of one it does not know have no Monte Carlo number, and fill a multiplet", () => {
    const made = chargeStates("Xi(1999)", placeOf(QUANTUM.irrep, "Xi"), QUANTUM, VALUES);
    expect(made.map(({ name, mcNumber, charge }) => [name, mcNumber, charge])).toEqual([
      ["Xi(1999)0", null, 0],
      ["Xi(1999)-", null, -1],
    ]);
    const { members } = assembleMultiplet("5/2-", QUANTUM, [{ name: "Xi(1999)", particles: made }]);
    expect(members[0]!.hadrons.map(({ antiparticle }) => antiparticle)).toEqual([
      "Xi(1999)0bar",
      "Xi(1999)-bar",
    ]);
  });

  test.each([
    ["N", 1, 1, "p"],
    ["N(1675)", 1, 0, "N(1675)0"],
    ["Lambda(1830)", 0, 0, "Lambda(1830)"],
    ["Delta(1950)", 3, 2, "Delta(1950)++"],
    ["Omega(2012)", 0, -1, "Omega(2012)-"],
    ["Kbar*(892)", 1, 0, "K*(892)0bar"],
    ["Kbar*(892)", 1, -1, "K*(892)-"],
  ])("%s with 2I = %i and charge %i is %s", (name, twoI, charge, expected) => {
    expect(chargeStateName(name, twoI, charge)).toBe(expected);
  });
});
