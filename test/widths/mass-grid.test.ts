import { describe, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { foldedWidth } from "../../src/widths/folded-width.js";
import { lineShape } from "../../src/widths/line-shape.js";
import { gridWidth, gridWidthMeV, type MassGrid, massGrid } from "../../src/widths/mass-grid.js";
import { couplingWidth, powerWidth, type RunningWidth, totalWidth } from "../../src/widths/running-width.js";
import { widthModel } from "../../src/widths/width-model.js";
import type { SpinParity, Vertex } from "../../src/widths/width-model-definition.js";
import { seededIntegers } from "../support/seeded-integers.js";
import { barrier, LAMBDA_MEV, NUCLEON_MEV, oneChannel, PION_MEV, resonance } from "./resonances.js";

const SEED = 5;

/** The rule of `MassGrid`, written again as a reader would; 0 below threshold. */
function readWidth(
  { thresholdMeV, distancesMeV: d, logWidths: y, slopes: s }: MassGrid,
  mass: number,
): number {
  const x = mass - thresholdMeV;
  if (x <= 0) return 0;
  const t = Math.log(x);
  if (x < d[0]!) return Math.exp(y[0]! + s[0]! * (t - Math.log(d[0]!)));
  let k = 0;
  while (k < d.length - 2 && d[k + 1]! <= x) k++;
  const h = Math.log(d[k + 1]!) - Math.log(d[k]!);
  const u = (t - Math.log(d[k]!)) / h;
  const D = y[k + 1]! - y[k]!;
  const [a, b] = [h * s[k]!, h * s[k + 1]!];
  return Math.exp(y[k]! + u * (a + u * (3 * D - 2 * a - b + u * (a + b - 2 * D))));
}

/** Largest relative error of a grid at distances from 1 keV to the top, spread evenly in their logarithm at random. */
function worstError(grid: MassGrid, width: RunningWidth, topMeV: number, draws: number): number {
  const random = seededIntegers(SEED);
  const reach = Math.log((topMeV - grid.thresholdMeV) / 1e-3);
  let worst = 0;
  for (let k = 0; k <= draws; k++) {
    const part = k === draws ? 1 : random.below(2 ** 30) / 2 ** 30;
    const mass = Math.min(grid.thresholdMeV + 1e-3 * Math.exp(reach * part), topMeV);
    worst = Math.max(worst, Math.abs(readWidth(grid, mass) / width.widthMeV(mass) - 1));
  }
  return worst;
}

const pseudoscalar: SpinParity = { twoJ: 0, parity: -1 };
const half: SpinParity = { twoJ: 1, parity: 1 };
const vector: SpinParity = { twoJ: 2, parity: -1 };
const baryon = (twoJ: number, L: number): Vertex => ({
  L,
  parent: { twoJ, parity: 1 },
  daughters: [half, pseudoscalar],
});

const OPEN: [string, string, Vertex, number, number][] = [
  ...["a", "b", "c"].flatMap((id) =>
    [0, 1, 2, 3, 4].flatMap((L): [string, string, Vertex, number, number][] => [
      [`${id}, L = ${L}, N pi`, id, { L }, NUCLEON_MEV, PION_MEV],
      [`${id}, L = ${L}, pi pi`, id, { L }, 139.57, 139.57],
      [`${id}, L = ${L}, N gamma`, id, { L }, NUCLEON_MEV, 0],
    ]),
  ),
  ...[0, 1, 2, 3, 4].map((L): [string, string, Vertex, number, number] => [
    `d, L = ${L}`,
    "d",
    baryon(2 * L + 1, L),
    NUCLEON_MEV,
    PION_MEV,
  ]),
  ...[1, 2, 3, 4].map((L): [string, string, Vertex, number, number] => [
    `d, L = ${L}, unlike parity`,
    "d",
    baryon(2 * L - 1, L),
    LAMBDA_MEV,
    495.644,
  ]),
  [
    "e, scalar",
    "e",
    { L: 0, parent: pseudoscalar, daughters: [pseudoscalar, pseudoscalar] },
    139.57,
    547.862,
  ],
  ["e, vector", "e", { L: 1, parent: vector, daughters: [pseudoscalar, pseudoscalar] }, 493.677, 493.677],
  [
    "e, tensor",
    "e",
    { L: 2, parent: { twoJ: 4, parity: 1 }, daughters: [pseudoscalar, pseudoscalar] },
    139.57,
    139.57,
  ],
  ["e, vector to vector", "e", { L: 1, parent: vector, daughters: [vector, pseudoscalar] }, 782.66, 134.977],
  [
    "e, axial",
    "e",
    { L: 0, parent: { twoJ: 2, parity: 1 }, daughters: [vector, pseudoscalar] },
    775.26,
    139.57,
  ],
];

describe("mass grid of an open channel", () => {
  test.each(OPEN)(
    "model %s: below 1e-4 from 1 keV to 1.5 GeV with at most 40 points",
    (_, id, vertex, m1, m2) => {
      const width = couplingWidth({ model: widthModel(id), vertex, firstMeV: m1, secondMeV: m2 }, 1);
      const top = m1 + m2 + 1500;
      const grid = massGrid(width, top);
      expect(worstError(grid, width, top, 2000)).toBeLessThan(1e-4);
      expect(grid.distancesMeV.length).toBeLessThanOrEqual(40);
      // q^(2L+1) goes with the square root of the distance, and with the distance itself if a daughter is a photon.
      expect(grid.slopes[0]).toBeCloseTo((vertex.L + 0.5) * (m2 === 0 ? 2 : 1), 3);
    },
  );

  test("a barrier of 10 fm, where the law bends soonest, is followed too", () => {
    const model = widthModel("c", { radiusFm: 10 });
    const width = couplingWidth({ model, vertex: { L: 4 }, firstMeV: 139.57, secondMeV: 139.57 }, 1);
    expect(worstError(massGrid(width, 2500), width, 2500, 5000)).toBeLessThan(1e-4);
  });

  test("below 1 keV the threshold law goes on, at and below the threshold the width is 0", () => {
    const width = couplingWidth(
      { model: barrier, vertex: { L: 2 }, firstMeV: NUCLEON_MEV, secondMeV: PION_MEV },
      7,
    );
    const grid = massGrid(width, 2000);
    const mass = grid.thresholdMeV + 1e-6;
    expect(gridWidthMeV(grid, mass) / width.widthMeV(mass)).toBeCloseTo(1, 4);
    expect([grid.thresholdMeV, 500].map((w) => gridWidthMeV(grid, w))).toEqual([0, 0]);
  });

  test("keeps a narrower accuracy when asked: 1e-6 before rounding to floats", () => {
    const width = couplingWidth(
      { model: barrier, vertex: { L: 1 }, firstMeV: NUCLEON_MEV, secondMeV: PION_MEV },
      1,
    );
    const grid = massGrid(width, 2000, { relativeError: 1e-5 });
    expect(worstError(grid, width, 2000, 2000)).toBeLessThan(1e-5);
  });
});

describe("mass grid of a folded channel", () => {
  test.each([
    ["Delta", 0],
    ["Delta", 2],
    ["Sigma(1385)", 0],
    ["rho", 1],
    ["K*", 4],
    ["phi", 0],
    ["omega", 3],
  ] as const)(
    "%s with a stable baryon or pion, L = %i: below 1e-4 from 1 keV above the soft threshold",
    (name, L) => {
      const shape = resonance(name);
      const other = shape.massMeV > 1200 ? PION_MEV : LAMBDA_MEV;
      const width = foldedWidth({ model: barrier, vertex: { L }, daughters: [shape, other] }, 1);
      const top = other + shape.massMeV + 800;
      const grid = massGrid(width, top);
      expect(worstError(grid, width, top, 300)).toBeLessThan(1e-4);
      expect(grid.distancesMeV.length).toBeLessThanOrEqual(90);
      // L + 1/2 of the decay, l + 1/2 of the daughter, and one integral; all daughters here have l = 1.
      expect(grid.slopes[0]).toBeCloseTo(L + 3, 2);
    },
  );

  test("a daughter with an S-wave threshold of its own inside its window: N(1535) pi", () => {
    const channels = [
      oneChannel(1530, 70, [NUCLEON_MEV, PION_MEV], 0),
      oneChannel(1530, 80, [NUCLEON_MEV, 547.862], 0),
    ];
    const daughters = [lineShape(1530, totalWidth(channels)), PION_MEV] as const;
    const width = foldedWidth({ model: barrier, vertex: { L: 0 }, daughters }, 1);
    expect(worstError(massGrid(width, 2300), width, 2300, 300)).toBeLessThan(1e-4);
  });

  test("two unstable daughters: Delta rho", () => {
    const daughters = [resonance("Delta"), resonance("rho")] as const;
    const width = foldedWidth({ model: barrier, vertex: { L: 0 }, daughters }, 1);
    const grid = massGrid(width, 2300);
    expect(worstError(grid, width, 2300, 15)).toBeLessThan(1e-4);
    expect(grid.slopes[0]).toBeCloseTo(5.5, 3);
  });
});

describe("mass grid as data", () => {
  const width = couplingWidth(
    { model: barrier, vertex: { L: 1 }, firstMeV: NUCLEON_MEV, secondMeV: PION_MEV },
    1,
  );
  const grid = massGrid(width, 2000);

  test("holds 32-bit floats only, so that packed floats lose nothing, and reaches the top mass", () => {
    for (const values of [grid.distancesMeV, grid.logWidths, grid.slopes]) {
      expect(values.map(Math.fround)).toEqual(values);
    }
    expect(() => gridWidthMeV(grid, 2000)).not.toThrow();
  });

  test("is read the same by the rule written down for readers, to 1e-12", () => {
    const random = seededIntegers(SEED);
    for (let k = 0; k < 1000; k++) {
      const mass = 1070 + (930 * random.below(2 ** 30)) / 2 ** 30;
      expect(Math.abs(gridWidthMeV(grid, mass) - readWidth(grid, mass))).toBeLessThanOrEqual(
        1e-12 * readWidth(grid, mass),
      );
    }
  });

  test("has no points to spare: without every second one the error is above 1e-4", () => {
    const everySecond = (values: readonly number[]) => values.filter((_, k) => k % 2 === 0);
    const { thresholdMeV, distancesMeV, logWidths, slopes } = grid;
    const thin = {
      thresholdMeV,
      distancesMeV: everySecond(distancesMeV),
      logWidths: everySecond(logWidths),
      slopes: everySecond(slopes),
    };
    const top = thresholdMeV + thin.distancesMeV.at(-1)!;
    expect(worstError(thin, width, Math.min(top, 2000), 2000)).toBeGreaterThan(1e-4);
  });

  test("takes the place of the width it was made from", () => {
    const stand = gridWidth(grid);
    expect(stand.thresholdsMeV).toEqual(width.thresholdsMeV);
    expect(stand.widthMeV(1500)).toBe(gridWidthMeV(grid, 1500));
  });

  test("refuses masses above its end, a width of zero, a top at the threshold, and a sum of thresholds", () => {
    expect(() => gridWidthMeV(grid, 2001)).toThrow(
      new InputError(
        `gridWidthMeV: massMeV: expected a mass up to ${grid.thresholdMeV + grid.distancesMeV.at(-1)!}, got 2001. ` +
          "The grid ends there.",
      ),
    );
    expect(() => massGrid(powerWidth(0, 1200, 1000, 0), 1300)).toThrow(
      new InputError(
        `massGrid: width in MeV, 0.001000 MeV above threshold: expected a number > 0, got 0. ` +
          "Leave out channels without a coupling.",
      ),
    );
    expect(() => massGrid(width, 1000)).toThrow(
      new InputError("massGrid: topMeV: expected a mass above 1076.959 MeV, got 1000."),
    );
    const cusp = totalWidth([width, oneChannel(1600, 50, [NUCLEON_MEV, 547.862], 0)]);
    expect(() => massGrid(cusp, 2000)).toThrow(
      new InputError(
        'massGrid: width, 409.8 MeV above threshold: expected a smooth function of the mass, got "a corner". ' +
          "Make one grid for each partial width.",
      ),
    );
  });
});
