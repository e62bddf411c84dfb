import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { isSameModel, widthModel, widthModelDefinitions } from "../../src/widths/width-model.js";

const SEED = 11;
const BARYON = {
  parent: { twoJ: 3, parity: 1 },
  daughters: [
    { twoJ: 1, parity: 1 },
    { twoJ: 0, parity: -1 },
  ],
} as const;

describe("width models", () => {
  test("model a is the power of the momentum it says, with M_ref = q_ref = 1 GeV", () => {
    const q = 227.325 / 1000;
    const expectedMeV = 1000 * q ** 3 * (1000 / 1232) ** 2;
    expect(widthModel("a").kinematicFactorMeV(1232, 938.919, 138.039, { L: 1 }) / expectedMeV).toBeCloseTo(
      1,
      5,
    );
  });

  test("model b tends to model a with n = 1 at momenta far below its range", () => {
    const far = { rangeMeV: 10_000 };
    const b = widthModel("b", far).kinematicFactorMeV(1000, 600, 399, { L: 2 });
    const a = widthModel("a", { n: 1 }).kinematicFactorMeV(1000, 600, 399, { L: 2 });
    // (q/X)^4 against (q/1 GeV)^4, and M_N against 1 GeV.
    expect((b / a) * 1e4 * (1000 / 938.9)).toBeCloseTo(1, 4);
  });

  test("model c tends to phase space q M_ref/M at momenta far above 1/R", () => {
    const K = widthModel("c", { radiusFm: 10 }).kinematicFactorMeV(10_000, 900, 100, { L: 3 });
    expect(K / ((4958.7 * 1000) / 10_000)).toBeCloseTo(1, 3);
  });

  test.each(["a", "b", "c"])("model %s follows the threshold law q^(2L+1)", (id) => {
    const model = widthModel(id);
    for (const L of [0, 1, 2, 3, 4]) {
      const near = model.kinematicFactorMeV(1000 + 1e-6, 600, 400, { L });
      const nearer = model.kinematicFactorMeV(1000 + 1e-8, 600, 400, { L });
      expect(Math.log10(near / nearer)).toBeCloseTo(2 * L + 1, 4);
    }
  });

  test("every model is 0 below threshold and finite above it, whatever the masses", () => {
    const mass = fc.double({ min: 0.1, max: 1e4, noNaN: true });
    const wave = { a: { L: 2 }, b: { L: 3 }, c: { L: 4 }, d: { L: 2, ...BARYON } } as const;
    const property = fc.property(mass, mass, mass, (parent, first, second) => {
      for (const [id, vertex] of Object.entries(wave)) {
        const K = widthModel(id).kinematicFactorMeV(parent, first, second, vertex);
        expect(Number.isFinite(K)).toBe(true);
        expect(K > 0).toBe(parent > first + second);
      }
    });
    fc.assert(property, { seed: SEED });
  });

  test("ids are unique, and every default lies in its range", () => {
    const definitions = widthModelDefinitions();
    expect(definitions.map(({ id }) => id)).toEqual(["a", "b", "c", "d", "e"]);
    for (const { id, options } of definitions) {
      expect(widthModel(id).options).toEqual(Object.fromEntries(options.map((o) => [o.name, o.default])));
    }
  });

  test("a model that does not exist is refused with the ones that do", () => {
    expect(() => widthModel("z")).toThrow(
      new InputError(
        'widthModel: id: expected one of a, b, c, d, e, got "z". Choose from: a (power of the momentum), ' +
          "b (momentum with a range), c (centrifugal barrier), d (effective Lagrangian, baryon to spin-1/2 baryon " +
          "and spinless meson), e (effective Lagrangian, mesons).",
      ),
    );
  });

  test("an unknown option, a value out of range and a fraction for an integer are refused", () => {
    expect(() => widthModel("b", { X: 0.35 })).toThrow(
      new InputError(
        'width model b: option: expected an option among rangeMeV, nucleonMassMeV, got "X". ' +
          "Remove it or mend its name.",
      ),
    );
    expect(() => widthModel("b", { rangeMeV: 0.35 })).toThrow(
      new InputError(
        "width model b: rangeMeV: expected a number from 1 to 10000 MeV, got 0.35. " +
          "It is X, the momentum where the growth with q^2L ends; the default is 350 MeV.",
      ),
    );
    expect(() => widthModel("a", { n: 1.5 })).toThrow(
      new InputError(
        "width model a: n: expected an integer from 0 to 2, got 1.5. It is power of M_ref/M; the default is 2.",
      ),
    );
  });

  test("two models are the same for a vertex where every option that concerns it is", () => {
    const d = (options: Record<string, number>) => widthModel("d", options);
    const octet = { ...BARYON, parent: { twoJ: 1, parity: 1 } } as const;
    const same = (one: Record<string, number>, other: Record<string, number>, of: object) =>
      isSameModel(d(one), d(other), { L: 1, ...of });
    expect(same({}, { derivativeForm: 0, scaleMeV: 139.57 }, octet)).toBe(true);
    expect(same({}, { derivativeForm: 1 }, octet)).toBe(false);
    expect(same({}, { derivativeForm: 1 }, BARYON)).toBe(true);
    expect(same({ derivativeForm: 1 }, { derivativeForm: 1, scaleMeV: 1000 }, octet)).toBe(false);
    const [baryon, meson] = BARYON.daughters;
    const vector = { ...meson, twoJ: 2 };
    for (const daughters of [
      [baryon, vector],
      [{ ...baryon, twoJ: 3 }, meson],
    ])
      expect(same({}, { derivativeForm: 1 }, { ...octet, daughters })).toBe(true);
    expect(isSameModel(widthModel("b"), widthModel("c"), { L: 1 })).toBe(false);
    expect(isSameModel(widthModel("a"), widthModel("a", { n: 2 }), { L: 1 })).toBe(true);
  });

  test("a wave that is no wave is refused", () => {
    expect(() => widthModel("a").kinematicFactorMeV(1000, 1, 1, { L: 0.5 })).toThrow(
      new InputError(
        "width model a: L: expected an integer from 0 to 12, got 0.5. Give the orbital angular momentum.",
      ),
    );
  });
});
