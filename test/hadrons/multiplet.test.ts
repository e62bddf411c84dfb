import { describe, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { catalogueParticle } from "../../src/hadrons/catalogue.js";
import { catalogueMultiplet, catalogueMultipletIds } from "../../src/hadrons/catalogue-multiplet.js";
import { makeHadron } from "../../src/hadrons/hadron.js";
import { assembleMultiplet, hadronOfState, isospinAveragedMassMeV } from "../../src/hadrons/multiplet.js";
import { placeOf } from "../../src/hadrons/place.js";
import { irrepDimension } from "../../src/su3/irrep.js";
import { states } from "../../src/su3/state.js";

const OCTET = { p: 1, q: 1 };
const BARYONS = { irrep: OCTET, twoJ: 1, parity: 1, baryonNumber: 1, charm: 0 } as const;

describe("multiplets of the catalogue", () => {
  test.each(catalogueMultipletIds())("%s has one hadron for each state of its irrep, in order", (id) => {
    const multiplet = catalogueMultiplet(id);
    const hadrons = states(multiplet.irrep).map((state) => hadronOfState(multiplet, state));
    expect(hadrons).toHaveLength(irrepDimension(multiplet.irrep));
    hadrons.forEach((hadron, index) => {
      expect(hadron?.content).toEqual([
        { leg: { multiplet: id, state: states(multiplet.irrep)[index] }, weight: 1 },
      ]);
    });
    expect(multiplet.members.flatMap((member) => member.hadrons)).toEqual(hadrons);
  });

  test("the antiparticles of a meson octet are in the octet, at the opposite place", () => {
    for (const id of ["pseudoscalar-octet", "vector-octet", "tensor-octet"]) {
      const hadrons = catalogueMultiplet(id).members.flatMap((member) => member.hadrons);
      for (const { name, antiparticle, charge } of hadrons) {
        const other = hadrons.find((hadron) => hadron.name === (antiparticle ?? name))!;
        expect(other.charge + charge).toBe(0);
      }
    }
  });

  test("the octet baryons by place", () => {
    const byPlace = catalogueMultiplet("baryon-octet").members.map(({ name, hadrons }) => [
      name,
      hadrons.map((hadron) => hadron.name),
    ]);
    expect(byPlace).toEqual([
      ["N", ["p", "n"]],
      ["Sigma", ["Sigma+", "Sigma0", "Sigma-"]],
      ["Lambda", ["Lambda"]],
      ["Xi", ["Xi0", "Xi-"]],
    ]);
  });

  test("every isoscalar meson says that its mixing is ignored", () => {
    const notes = catalogueMultipletIds().flatMap((id) =>
      catalogueMultiplet(id).members.filter(({ twoI, threeY }) => twoI === 0 && threeY === 0),
    );
    const mesons = notes.flatMap(({ hadrons }) => hadrons).filter(({ baryonNumber }) => baryonNumber === 0);
    expect(mesons.map(({ name }) => name)).toEqual([
      "eta",
      "eta'(958)",
      "phi(1020)",
      "omega(782)",
      "f2'(1525)",
      "f2(1270)",
    ]);
    for (const hadron of mesons)
      expect(hadron.notes.join(" ")).toMatch(/^\S+ is taken as a pure .* mixing is ignored/);
    expect(mesons[0]!.notes).toEqual(["eta is taken as a pure octet member; eta-eta' mixing is ignored."]);
  });

  test("the isospin average counts each charge state once", () => {
    const [nucleon] = catalogueMultiplet("baryon-octet").members;
    expect(isospinAveragedMassMeV(nucleon!)).toBe((938.27208816 + 939.5654205) / 2);
    const pion = catalogueMultiplet("pseudoscalar-octet").members.find(({ name }) => name === "pi")!;
    expect(isospinAveragedMassMeV(pion)).toBeCloseTo(138.039, 3);
  });

  test("an unknown id is refused with the nearest and the whole list", () => {
    expect(() => catalogueMultiplet("baryon-octett")).toThrow(
      new InputError(
        'catalogueMultiplet: id: expected a multiplet of the catalogue, got "baryon-octett". ' +
          "Did you mean baryon-octet? There are: pseudoscalar-octet, pseudoscalar-singlet, vector-octet, " +
          "vector-singlet, tensor-octet, tensor-singlet, baryon-octet, baryon-decuplet, charmed-meson-antitriplet, " +
          "charmed-baryon-antitriplet, charmed-baryon-sextet, charmed-baryon-sextet-3/2.",
      ),
    );
  });
});

describe("assembling a multiplet", () => {
  const particles = (...names: string[]) => names.map(catalogueParticle);

  test("may leave members out", () => {
    const { members } = assembleMultiplet("part", BARYONS, [
      { name: "Xi", particles: particles("Xi0", "Xi-") },
    ]);
    expect(members.map(({ name, threeY, twoI }) => [name, threeY, twoI])).toEqual([["Xi", -3, 1]]);
  });

  test("refuses a member without a place in the irrep", () => {
    expect(() => assembleMultiplet("odd", BARYONS, [{ name: "Xi", particles: particles("Xi0") }])).toThrow(
      new InputError('odd: Xi: expected an isospin multiplet of the 8, got "Y=-1 I=0".'),
    );
  });

  test("refuses a second member at one place", () => {
    const twice = [
      { name: "Lambda", particles: particles("Lambda") },
      { name: "other", particles: particles("Lambda") },
    ];
    expect(() => assembleMultiplet("odd", BARYONS, twice)).toThrow(
      new InputError(
        'odd: other: expected a place that Lambda has not taken, got "Y=0 I=0". ' +
          "An irrep has one isospin multiplet at each place.",
      ),
    );
  });

  test("refuses charge states out of order, and other quantum numbers", () => {
    expect(() => assembleMultiplet("odd", BARYONS, [{ name: "N", particles: particles("n", "p") }])).toThrow(
      new InputError(
        "n in odd: [charge, 3Y]: expected [1,3], got [0,3]. Check the place of the particle in the multiplet.",
      ),
    );
    expect(() =>
      assembleMultiplet("odd", BARYONS, [{ name: "L", particles: particles("Lambda(1520)") }]),
    ).toThrow(new InputError("odd: Lambda(1520): twoJ: expected 1, that of the multiplet, got 3."));
  });

  test("a hadron of weights that are not normalised, or of unknown spin, is refused", () => {
    const state = { irrep: OCTET, threeY: 0, twoI: 0, twoI3: 0 };
    const content = [{ leg: { multiplet: "m", state }, weight: 0.5 }];
    expect(() => makeHadron(catalogueParticle("eta"), content)).toThrow(
      new InputError(
        "eta: sum of squared weights: expected 1, got 0.25. Divide the weights by the root of their sum.",
      ),
    );
    expect(() => makeHadron(catalogueParticle("Xi(1690)0"), [])).toThrow(
      new InputError(
        "Xi(1690)0: spin and parity: expected both known, got [null,null]. State them in the study.",
      ),
    );
  });
});

describe("place of a name", () => {
  const decuplet = { p: 3, q: 0 };

  test.each([
    [OCTET, "N", 3, 1],
    [OCTET, "N(1675)", 3, 1],
    [OCTET, "Sigma(1775)", 0, 2],
    [OCTET, "Kbar", -3, 1],
    [OCTET, "eta", 0, 0],
    [decuplet, "Delta", 3, 3],
    [decuplet, "Omega", -6, 0],
    [decuplet, "Y=1 I=3/2", 3, 3],
    [{ p: 0, q: 3 }, "Theta", 6, 0],
    [{ p: 0, q: 1 }, "D", -1, 1],
    [{ p: 0, q: 1 }, "Y=2/3 I=0", 2, 0],
  ])("in %j, %s", (irrep, name, threeY, twoI) => {
    expect(placeOf(irrep, name)).toEqual({ threeY, twoI });
  });

  test("every place has a general form that reads back", () => {
    for (const id of catalogueMultipletIds()) {
      const { irrep, members } = catalogueMultiplet(id);
      for (const { name, threeY, twoI } of members) expect(placeOf(irrep, name)).toEqual({ threeY, twoI });
    }
  });

  test("a place the irrep does not have is refused with those it has", () => {
    expect(() => placeOf(OCTET, "Delta")).toThrow(
      new InputError(
        'placeOf: name: expected an isospin multiplet of the 8, got "Delta". Delta stands for Y=1 I=3/2. ' +
          "It has: Y=1 I=1/2 (N or K), Y=0 I=1 (Sigma or pi), Y=0 I=0 (Lambda or eta), Y=-1 I=1/2 (Xi or Kbar).",
      ),
    );
    expect(() => placeOf(decuplet, "constructor")).toThrow(
      new InputError(
        'placeOf: name: expected an isospin multiplet of the 10, got "constructor". ' +
          "It has: Y=1 I=3/2 (Delta), Y=0 I=1 (Sigma or pi), Y=-1 I=1/2 (Xi or Kbar), Y=-2 I=0 (Omega).",
      ),
    );
  });
});
