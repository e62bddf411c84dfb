import { describe, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { cumulativeAt, type DrawGrid, drawGrid, drawMass } from "../../src/widths/draw-mass.js";
import { integrateOverLineShape, type LineShape, lineShape } from "../../src/widths/line-shape.js";
import { powerWidth, totalWidth } from "../../src/widths/running-width.js";
import { seededIntegers } from "../support/seeded-integers.js";
import { kolmogorovSmirnov, ONE_IN_A_MILLION } from "./kolmogorov-smirnov.js";
import { NUCLEON_MEV, oneChannel, PION_MEV, resonance } from "./resonances.js";

const SEED = 20;

/** N pi and N eta in S waves with a constant rest: a threshold inside the window, and a density > 0 at its start. */
const N1535 = lineShape(
  1530,
  totalWidth([
    oneChannel(1530, 67.5, [NUCLEON_MEV, PION_MEV], 0),
    oneChannel(1530, 63, [NUCLEON_MEV, 547.862], 0),
    powerWidth(19.5, 1530, NUCLEON_MEV + PION_MEV, 0),
  ]),
);

const SHAPES: [string, LineShape][] = [
  ...(["Delta", "rho", "omega", "phi", "f2", "N(1535)"] as const).map((name): [string, LineShape] => [
    name,
    resonance(name),
  ]),
  ["N(1535) with three channels", N1535],
  ["J/psi", lineShape(3096.9, oneChannel(3096.9, 0.0926, [139.57, 139.57], 1))],
];

/** Chance of a mass up to w by direct integration. */
const chanceUpTo = (shape: LineShape, w: number) =>
  integrateOverLineShape(shape, () => 1, { toMeV: w }).value / integrateOverLineShape(shape, () => 1).value;

/** The rule of `DrawGrid`, written again as a reader would. */
function readMass({ originMeV, distancesMeV: x, cumulative: F, power }: DrawGrid, u: number): number {
  if (u < F[0]!) return originMeV + x[0]! * (u / F[0]!) ** (1 / power);
  let k = 0;
  while (k < F.length - 2 && F[k + 1]! <= u) k++;
  const v = Math.log(u / F[k]!) / Math.log(F[k + 1]! / F[k]!);
  return originMeV + x[k]! * (x[k + 1]! / x[k]!) ** v;
}

describe("drawing a mass", () => {
  test.each(SHAPES)(
    "%s: the distribution drawn from is within 2e-5 of the line shape, and 0.1 % of F",
    (_, shape) => {
      const grid = drawGrid(shape);
      for (let k = 0; k < 500; k++) {
        // Half of them spread evenly in the logarithm, from 1e-6 up.
        const u = k < 250 ? 1e-6 ** (1 - (k + 0.5) / 250) : (k - 249.5) / 250;
        const F = chanceUpTo(shape, drawMass(grid, u));
        expect(Math.abs(F - u)).toBeLessThan(2e-5);
        expect(Math.abs(F / u - 1)).toBeLessThan(1e-3);
      }
      expect(grid.distancesMeV.length).toBeLessThan(700);
    },
  );

  test.each(["Delta", "rho", "phi"] as const)(
    "50,000 masses of %s pass a Kolmogorov-Smirnov test that fails a true sample once in a million",
    (name) => {
      const shape = resonance(name);
      const grid = drawGrid(shape);
      const random = seededIntegers(SEED);
      const sample = Array.from({ length: 50_000 }, () => drawMass(grid, random.below(2 ** 31) / 2 ** 31));
      // The integral piece by piece between 2,000 masses; a straight line between them is exact enough.
      const steps = Array.from({ length: 2001 }, (_, k) =>
        drawMass(grid, k === 2000 ? 1 - 2 ** -31 : k / 2000),
      );
      const chances = steps.map((w) => chanceUpTo(shape, w));
      const interpolated = (w: number): number => {
        const after = Math.max(
          1,
          steps.findIndex((step) => step > w),
        );
        const [a, b] = [steps[after - 1]!, steps[after]!];
        return chances[after - 1]! + ((chances[after]! - chances[after - 1]!) * (w - a)) / (b - a);
      };
      expect(kolmogorovSmirnov(sample, interpolated)).toBeLessThan(ONE_IN_A_MILLION);
      // It can fail: a thirtieth of the width to the side is seen.
      const shifted = sample.map((w) => w + shape.widthMeV / 30);
      const inside = shifted.filter((w) => w < steps.at(-1)!);
      expect(kolmogorovSmirnov(inside, interpolated)).toBeGreaterThan(ONE_IN_A_MILLION);
    },
  );

  test("starts with the power l + 3/2 of the distance from an open threshold, and 1 for a constant width", () => {
    expect(drawGrid(resonance("N(1535)")).power).toBeCloseTo(1.5, 3);
    expect(drawGrid(resonance("Delta")).power).toBeCloseTo(2.5, 1);
    expect(drawGrid(lineShape(1530, powerWidth(50, 1530, 1200, 0))).power).toBeCloseTo(1, 3);
  });

  test("holds 32-bit floats only, ascending, the last chance 1 and the last mass in the window", () => {
    for (const [, shape] of SHAPES) {
      const { originMeV, distancesMeV, cumulative, power } = drawGrid(shape);
      expect(originMeV + distancesMeV.at(-1)!).toBeLessThanOrEqual(shape.windowMeV[1]);
      for (const values of [distancesMeV, cumulative]) {
        expect(values.map(Math.fround)).toEqual(values);
        expect(values.every((value, k) => value > (values[k - 1] ?? 0))).toBe(true);
      }
      expect(Math.fround(power)).toBe(power);
      expect(cumulative.at(-1)).toBe(1);
    }
  });

  test("is read the same by the rule written down for readers, and inverted by the cumulative distribution", () => {
    const grid = drawGrid(resonance("rho"));
    const random = seededIntegers(SEED);
    for (let k = 0; k < 1000; k++) {
      const u = (random.below(2 ** 30) / 2 ** 30) ** (1 + (k % 5));
      const mass = drawMass(grid, u);
      expect(Math.abs(mass / readMass(grid, u) - 1)).toBeLessThan(1e-12);
      expect(Math.abs(cumulativeAt(grid, mass) - u)).toBeLessThan(1e-11);
    }
    const end = grid.originMeV + grid.distancesMeV.at(-1)!;
    expect([grid.originMeV - 1, grid.originMeV, end, end + 1].map((w) => cumulativeAt(grid, w))).toEqual([
      0, 0, 1, 1,
    ]);
    expect(drawMass(grid, 0)).toBe(grid.originMeV);
  });

  test("refuses a state too narrow for floats, and a number that is no chance", () => {
    const narrow = lineShape(1000, powerWidth(1e-3, 1000, 500, 0));
    expect(() => drawGrid(narrow)).toThrow(
      new InputError(
        "drawGrid: width in MeV: expected at least 0.005, got 0.001. Draw the nominal mass of so narrow a state.",
      ),
    );
    const grid = drawGrid(resonance("rho"));
    expect(() => drawMass(grid, 1)).toThrow(
      new InputError("drawMass: u: expected a number from 0 up to 1, got 1."),
    );
  });
});
