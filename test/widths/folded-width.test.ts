import { describe, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import {
  channelThresholdMeV,
  foldedFactor,
  foldedWidth,
  type TwoBodyChannel,
} from "../../src/widths/folded-width.js";
import { type LineShape, lineShape } from "../../src/widths/line-shape.js";
import { widthModel } from "../../src/widths/width-model.js";
import { LAMBDA_MEV, NUCLEON_MEV, oneChannel, PION_MEV, phaseSpace, resonance } from "./resonances.js";

const withPion = (shape: LineShape, model = phaseSpace, L = 0): TwoBodyChannel => ({
  model,
  vertex: { L },
  daughters: [shape, PION_MEV],
});

describe("folded factor", () => {
  // Integral of rho q/M, line shape as it is (N = 1), worked out once with an independent program; regression values.
  // R in 1/GeV; 0 for no barrier.
  test.each([
    ["Sigma(1385)", 1519.5, 0, 0.012291],
    ["Sigma(1385)", 1519.5, 1, 0.012367],
    ["Sigma(1385)", 1519.5, 5, 0.013486],
    ["Delta", 1515, 0, 0.090114],
    ["Delta", 1515, 1, 0.09063],
    ["Delta", 1515, 5, 0.095719],
  ] as const)("%s pi in an S wave at %f MeV, R = %f/GeV, is %f GeV", (name, M, R, expected) => {
    const model = R === 0 ? phaseSpace : widthModel("c", { radiusFm: R * 0.1973269804 });
    const channel = withPion(resonance(name, model, { normalised: false }));
    expect(Math.abs(foldedFactor(channel, M).value / 1000 - expected)).toBeLessThan(1e-6);
  });

  test("is positive where the decay is closed at nominal masses: Lambda(1520) -> Sigma(1385) pi", () => {
    expect(phaseSpace.kinematicFactorMeV(1519.5, 1384.6, PION_MEV, { L: 0 })).toBe(0);
    expect(foldedFactor(withPion(resonance("Sigma(1385)")), 1519.5).value).toBeGreaterThan(13);
  });

  // Tanh-sinh quadrature with 20 digits (15 for double integrals) in Python's mpmath; regression values.
  const independent: [string, TwoBodyChannel, number, number][] = [
    ["Sigma(1385) pi, S wave", withPion(resonance("Sigma(1385)")), 1519.5, 13.8806797843739],
    ["Delta pi, D wave", withPion(resonance("Delta"), widthModel("c"), 2), 1515, 12.2686136085215],
    [
      "Delta pi, D wave, 1 keV above the lowest threshold",
      withPion(resonance("Delta"), widthModel("c"), 2),
      NUCLEON_MEV + 2 * PION_MEV + 0.001,
      1.18792839679653e-27,
    ],
    [
      "Delta rho at 1600 MeV",
      { ...withPion(resonance("Delta")), daughters: [resonance("Delta"), resonance("rho")] },
      1600,
      0.0417888345585233,
    ],
    [
      "Delta rho at 1900 MeV",
      { ...withPion(resonance("Delta")), daughters: [resonance("Delta"), resonance("rho")] },
      1900,
      7.61408234201642,
    ],
  ];
  test.each(independent)(
    "%s agrees with an independent program to 1e-8, its estimate with 1e-8",
    (_, channel, M, K) => {
      const { value, error } = foldedFactor(channel, M);
      // 1 keV above 1215 MeV is only known to 2e-13/1e-3 in double precision, and enters with the fifth power.
      expect(Math.abs(value / K - 1)).toBeLessThan(1e-8);
      expect(error / value).toBeLessThan(1.2e-8);
    },
  );

  test.each([1e-5, 1e-7, 1e-9, 1e-11])(
    "a relative error of %f is kept, and its estimate is no smaller",
    (relativeError) => {
      const channel = withPion(resonance("Sigma(1385)"));
      const { value, error } = foldedFactor(channel, 1519.5, { relativeError });
      expect(error).toBeLessThanOrEqual(relativeError * value);
      expect(Math.abs(value - 13.8806797843739)).toBeLessThanOrEqual(error + 1e-12);
    },
  );

  test("tends to the factor at nominal masses as the daughter gets narrow, nearly in proportion to its width", () => {
    const nominal = phaseSpace.kinematicFactorMeV(1700, 1384.6, PION_MEV, { L: 0 });
    const deviation = (widthMeV: number) => {
      const shape = lineShape(1384.6, oneChannel(1384.6, widthMeV, [LAMBDA_MEV, PION_MEV], 1));
      return Math.abs(foldedFactor(withPion(shape), 1700).value / nominal - 1);
    };
    expect(deviation(1)).toBeLessThan(5e-3);
    for (const width of [0.1, 0.01, 0.001]) {
      expect(deviation(width / 10) / deviation(width)).toBeGreaterThan(0.05);
      expect(deviation(width / 10) / deviation(width)).toBeLessThan(0.2);
    }
  });

  test("does not care which daughter comes first, and of two stable ones it is the closed form", () => {
    const shape = resonance("rho");
    const c = widthModel("c");
    const at = (daughters: TwoBodyChannel["daughters"]) =>
      foldedFactor({ model: c, vertex: { L: 1 }, daughters }, 1800).value;
    expect(at([shape, NUCLEON_MEV])).toBe(at([NUCLEON_MEV, shape]));
    expect(at([NUCLEON_MEV, 547.862])).toBe(c.kinematicFactorMeV(1800, NUCLEON_MEV, 547.862, { L: 1 }));
    const other = resonance("Delta");
    expect(at([shape, other]) / at([other, shape])).toBeCloseTo(1, 7);
  });

  test("opens where the daughter's own decay does, with the power L + l + 2 of the distance", () => {
    const channel = withPion(resonance("Delta"), widthModel("c"), 2);
    const threshold = channelThresholdMeV(channel);
    expect(threshold).toBeCloseTo(NUCLEON_MEV + 2 * PION_MEV, 10);
    expect(foldedFactor(channel, threshold).value).toBe(0);
    const at = (x: number) => foldedFactor(channel, threshold + x).value;
    expect(Math.log10(at(0.01) / at(0.001))).toBeCloseTo(5, 3);
  });

  test("as a width it is the strength times the factor", () => {
    const channel = withPion(resonance("Delta"));
    const width = foldedWidth(channel, 3);
    expect(width.widthMeV(1515)).toBe(3 * foldedFactor(channel, 1515).value);
    expect([width.thresholdsMeV, width.sharpestMeV]).toEqual([[channelThresholdMeV(channel)], 117]);
    expect(() => foldedWidth(channel, Number.NaN)).toThrow(
      new InputError("foldedWidth: strength: expected a finite number >= 0, got NaN. Give s |A|^2."),
    );
  });
});

describe("charge states of Lambda(1520) -> Sigma(1385) pi", () => {
  // S. Navas et al. (Particle Data Group), Phys. Rev. D 110, 030001 (2024); provenance read (machine-readable file).
  const pions = { "+": 139.57039, "0": 134.9768, "-": 139.57039 };
  const sigmas = { "+": [1382.83, 36.2], "0": [1383.7, 36], "-": [1387.2, 39.4] } as const;
  const factors = (M: number) =>
    (["+-", "00", "-+"] as const).map((charges) => {
      const [sigma, pion] = [charges[0] as keyof typeof sigmas, charges[1] as keyof typeof pions];
      const [mass, width] = sigmas[sigma];
      // The pion of Sigma(1385) -> Lambda pi has the charge of the Sigma(1385).
      const shape = lineShape(mass, oneChannel(mass, width, [LAMBDA_MEV, pions[sigma]], 1));
      return foldedFactor({ model: phaseSpace, vertex: { L: 0 }, daughters: [shape, pions[pion]] }, M).value;
    });
  const sum = (values: readonly number[]) => values.reduce((total, value) => total + value, 0);

  test("share the width .33 : .40 : .27, not 1/3 each as the Clebsch-Gordan coefficients have it", () => {
    const widths = factors(1519.5);
    expect(widths.map((width) => (width / sum(widths)).toFixed(2))).toEqual(["0.33", "0.40", "0.27"]);
  });

  test("grow by half when the parent is 8 MeV heavier", () => {
    expect(sum(factors(1527.5)) / sum(factors(1519.5))).toBeCloseTo(1.49, 2);
  });
});
