import { describe, expect, test } from "vitest";
import {
  antisymmetricCouplingOfF,
  fAndD,
  fAndDForm,
  hasFAndD,
  symmetricCouplingOfD,
} from "../../src/couplings/f-and-d.js";
import { InputError } from "../../src/errors.js";
import {
  divideRoots,
  equalRoots,
  formatRoot,
  multiplyRoots,
  parseRoot,
  rootToNumber,
} from "../../src/exact/signed-root.js";
import { BARYONS, MESONS, makerOf, placeOfMember, schemeOf } from "./schemes.js";

const maker = makerOf("8", ["8", "8"]);
const NO_ERRORS = [
  [0, 0],
  [0, 0],
];

function form(parent: string, baryon: string, meson: string) {
  const place = placeOfMember(BARYONS, parent);
  const finals = [placeOfMember(BARYONS, baryon), placeOfMember(MESONS, meson)] as const;
  return fAndDForm(maker.isospinForm(place, finals).terms, maker.scheme);
}

/**
 * Isospin-summed squares of the octet in units of g = F + D, as functions of a = F/(F+D).
 * Source: J. J. de Swart, Rev. Mod. Phys. 35 (1963) 916, the couplings of its table of baryon-baryon-meson constants,
 * squared and summed over charges; provenance: memory, checked with traces of matrices.
 */
const SQUARES: [string, string, string, (a: number) => number][] = [
  ["N", "N", "pi", () => 3],
  ["N", "N", "eta", (a) => (4 * a - 1) ** 2 / 3],
  ["N", "Sigma", "K", (a) => 3 * (1 - 2 * a) ** 2],
  ["N", "Lambda", "K", (a) => (1 + 2 * a) ** 2 / 3],
  ["Sigma", "N", "Kbar", (a) => 2 * (1 - 2 * a) ** 2],
  ["Sigma", "Lambda", "pi", (a) => (4 * (1 - a) ** 2) / 3],
  ["Sigma", "Sigma", "pi", (a) => 8 * a ** 2],
  ["Sigma", "Sigma", "eta", (a) => (4 * (1 - a) ** 2) / 3],
  ["Sigma", "Xi", "K", () => 2],
  ["Lambda", "N", "Kbar", (a) => (2 * (1 + 2 * a) ** 2) / 3],
  ["Lambda", "Sigma", "pi", (a) => 4 * (1 - a) ** 2],
  ["Lambda", "Lambda", "eta", (a) => (4 * (1 - a) ** 2) / 3],
  ["Lambda", "Xi", "K", (a) => (2 * (4 * a - 1) ** 2) / 3],
  ["Xi", "Sigma", "Kbar", () => 3],
  ["Xi", "Lambda", "Kbar", (a) => (4 * a - 1) ** 2 / 3],
  ["Xi", "Xi", "pi", (a) => 3 * (1 - 2 * a) ** 2],
  ["Xi", "Xi", "eta", (a) => (1 + 2 * a) ** 2 / 3],
];

describe("F and D", () => {
  test("the factors to g_S and g_A are sqrt(20/3) and sqrt(12)", () => {
    expect([symmetricCouplingOfD(), antisymmetricCouplingOfF()].map(formatRoot)).toEqual([
      "sqrt(20/3)",
      "sqrt(12)",
    ]);
  });

  test("are those of the Review of Particle Physics, D = (sqrt30/40) g1 and F = (sqrt6/24) g2 with g = sqrt8 g_S, g_A", () => {
    // S. Navas et al. (Particle Data Group), Phys. Rev. D 110, 030001 (2024), review "SU(3) isoscalar factors and
    // representation matrices"; provenance: memory.
    const one = parseRoot("1");
    const ofD = multiplyRoots(parseRoot("sqrt(30/1600)"), parseRoot("sqrt(8)"));
    const ofF = multiplyRoots(parseRoot("sqrt(6/576)"), parseRoot("sqrt(8)"));
    expect(equalRoots(divideRoots(one, symmetricCouplingOfD()), ofD)).toBe(true);
    expect(equalRoots(divideRoots(one, antisymmetricCouplingOfF()), ofF)).toBe(true);
  });

  test("the nucleon couples to the pion by sqrt(3) (D + F), and Sigma to Sigma pi by F alone", () => {
    expect(Object.values(form("N", "N", "pi")).map(formatRoot)).toEqual(["sqrt(3)", "sqrt(3)"]);
    expect(form("Sigma", "Sigma", "pi").D).toEqual(parseRoot("0"));
    expect(form("Sigma", "Lambda", "pi").F).toEqual(parseRoot("0"));
  });

  test.each(SQUARES)(
    "%s -> %s %s has the square of de Swart for every alpha",
    (parent, baryon, meson, square) => {
      const { D, F } = form(parent, baryon, meson);
      for (const a of [0.4, -0.24, 0, 1, 0.25, -0.5, 2.5]) {
        const amplitude = (1 - a) * rootToNumber(D) + a * rootToNumber(F);
        expect(amplitude ** 2).toBeCloseTo(square(a), 12);
      }
    },
  );

  // Squares at two alphas as numbers, in the order above; from an independent program with traces of matrices.
  test.each([
    [0.4, [3, 0.12, 0.12, 1.08, 0.08, 0.48, 1.28, 0.48, 2, 2.16, 1.44, 0.48, 0.24, 3, 0.12, 0.12, 1.08]],
    [
      -0.24,
      [
        3, 1.2805333333, 6.5712, 0.0901333333, 4.3808, 2.0501333333, 0.4608, 2.0501333333, 2, 0.1802666667,
        6.1504, 2.0501333333, 2.5610666667, 3, 1.2805333333, 6.5712, 0.0901333333,
      ],
    ],
  ] as const)("at alpha = %d all 17 squares have the numbers of an independent program", (a, expected) => {
    for (const [k, [parent, baryon, meson]] of SQUARES.entries()) {
      const { D, F } = form(parent, baryon, meson);
      expect(((1 - a) * rootToNumber(D) + a * rootToNumber(F)) ** 2).toBeCloseTo(expected[k]!, 9);
    }
  });

  // Signs of A(N Kbar) A(f), which reactions measure; exact algebra, numbers from an independent program.
  test.each([
    [-0.24, [-2.99686905, 1.4208, -1.05295399]],
    [0.4, [-0.19595918, -0.32, -1.76363261]],
  ] as const)(
    "at alpha = %d the products with N Kbar of Lambda pi, Sigma pi (I = 1, 0) are %j",
    (a, expected) => {
      const amplitude = (parent: string, baryon: string, meson: string) => {
        const { D, F } = form(parent, baryon, meson);
        return (1 - a) * rootToNumber(D) + a * rootToNumber(F);
      };
      const [sigma, lambda] = ["Sigma", "Lambda"].map((parent) => amplitude(parent, "N", "Kbar")) as [
        number,
        number,
      ];
      const products = [
        sigma * amplitude("Sigma", "Lambda", "pi"),
        sigma * amplitude("Sigma", "Sigma", "pi"),
        lambda * amplitude("Lambda", "Sigma", "pi"),
      ];
      for (const [k, product] of products.entries()) expect(product).toBeCloseTo(expected[k]!, 7);
    },
  );

  test("a singlet has Sigma pi + against N Kbar, a decuplet Lambda pi + and Sigma pi -: other signs than the octet's", () => {
    const sign = (irrep: string, parent: string, baryon: string) => {
      const place = placeOfMember(BARYONS, parent);
      const single = makerOf(irrep, ["8", "8"]);
      const c = (b: string, m: string) =>
        rootToNumber(
          single.isospinForm(place, [placeOfMember(BARYONS, b), placeOfMember(MESONS, m)]).terms[0]!.c,
        );
      return Math.sign(c("N", "Kbar") * c(baryon, "pi"));
    };
    expect([
      sign("1", "Lambda", "Sigma"),
      sign("10", "Sigma", "Lambda"),
      sign("10", "Sigma", "Sigma"),
    ]).toEqual([1, 1, -1]);
  });

  test("every channel is covered once", () => {
    expect(new Set(SQUARES.map(([...labels]) => labels.slice(0, 3).join(" "))).size).toBe(17);
  });

  test("with the meson before the baryon F changes its sign, and only F", () => {
    const nucleon = placeOfMember(BARYONS, "N");
    const pion = placeOfMember(MESONS, "pi");
    const turned = fAndDForm(maker.isospinForm(nucleon, [pion, nucleon]).terms, maker.scheme);
    const ratio = rootToNumber(turned.F) / rootToNumber(turned.D);
    expect(ratio).toBeCloseTo(-1, 12);
  });

  test("F/D is (sqrt5/3) g_A/g_S", () => {
    expect(fAndD(1, 1, NO_ERRORS).fOverD!.value).toBeCloseTo(0.7453559924999299, 12);
  });

  test("the two alphas add up to 1, with the same error", () => {
    const { alphaF, alphaD } = fAndD(1.3, 0.4, [
      [0.01, 0.002],
      [0.002, 0.03],
    ]);
    expect(alphaF!.value + alphaD!.value).toBeCloseTo(1, 14);
    expect(alphaF!.error).toBeCloseTo(alphaD!.error, 14);
  });

  test("errors are those of finite differences", () => {
    const covariance = [
      [0.01, 0.004],
      [0.004, 0.03],
    ];
    const at = (gS: number, gA: number) => fAndD(gS, gA, NO_ERRORS);
    const h = 1e-6;
    for (const key of ["D", "F", "fOverD", "alphaF", "alphaD"] as const) {
      const slopeS = (at(1.3 + h, 0.4)[key]!.value - at(1.3 - h, 0.4)[key]!.value) / (2 * h);
      const slopeA = (at(1.3, 0.4 + h)[key]!.value - at(1.3, 0.4 - h)[key]!.value) / (2 * h);
      const expected = Math.sqrt(slopeS ** 2 * 0.01 + 2 * slopeS * slopeA * 0.004 + slopeA ** 2 * 0.03);
      expect(fAndD(1.3, 0.4, covariance)[key]!.error / expected).toBeCloseTo(1, 7);
    }
  });

  test("a ratio whose denominator is 0 is null, not NaN", () => {
    expect(fAndD(0, 1, NO_ERRORS)).toMatchObject({ fOverD: null, alphaF: { value: 1 } });
    expect(fAndD(0, 0, NO_ERRORS)).toMatchObject({ fOverD: null, alphaF: null, alphaD: null });
  });

  test("are defined for strong decays of an octet into two octets only", () => {
    expect(hasFAndD(schemeOf("8", ["8", "8"]))).toBe(true);
    expect(hasFAndD(schemeOf("10", ["8", "8"]))).toBe(false);
    expect(hasFAndD(schemeOf("8", ["8", "8", "8"]))).toBe(false);
    expect(() => fAndDForm([], schemeOf("8", ["27", "27"]))).toThrow(
      new InputError(
        'fAndDForm: scheme: expected a strong decay of an octet into two octets, got ["8","27","27"].',
      ),
    );
    expect(() => fAndD(1, Number.NaN, NO_ERRORS)).toThrow(
      new InputError(
        "fAndD: expected two finite couplings and their 2 x 2 covariance, got [1,NaN,[[0,0],[0,0]]].",
      ),
    );
  });
});
