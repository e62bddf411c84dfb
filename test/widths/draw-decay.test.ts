import { describe, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { drawChannel, drawDaughterMasses, drawMassesJointly } from "../../src/widths/draw-decay.js";
import { cumulativeAt, drawGrid, drawMass } from "../../src/widths/draw-mass.js";
import { foldedFactor, lowestMassMeV, type TwoBodyChannel } from "../../src/widths/folded-width.js";
import { integrateOverLineShape, type LineShape } from "../../src/widths/line-shape.js";
import { parentLineShape } from "../../src/widths/parent-line-shape.js";
import { powerWidth } from "../../src/widths/running-width.js";
import { widthModel } from "../../src/widths/width-model.js";
import { seededIntegers } from "../support/seeded-integers.js";
import { kolmogorovSmirnov, ONE_IN_A_MILLION } from "./kolmogorov-smirnov.js";
import { barrier, NUCLEON_MEV, oneChannel, PION_MEV, phaseSpace, resonance } from "./resonances.js";

const SEED = 4;

function uniformNumbers(): () => number {
  const random = seededIntegers(SEED);
  return () => random.below(2 ** 31) / 2 ** 31;
}

describe("drawing a channel", () => {
  const channels = [
    oneChannel(1530, 67.5, [NUCLEON_MEV, PION_MEV], 0),
    oneChannel(1530, 63, [NUCLEON_MEV, 547.862], 0),
    powerWidth(19.5, 1530, NUCLEON_MEV + 2 * PION_MEV, 0),
  ];

  test("mass first, channel at that mass: the shares of 50,000 decays are the integrated fractions", () => {
    const { shape, integratedFractions } = parentLineShape(1530, channels);
    const grid = drawGrid(shape);
    const uniform = uniformNumbers();
    const counts = [0, 0, 0];
    const n = 50_000;
    for (let k = 0; k < n; k++) counts[drawChannel(channels, drawMass(grid, uniform()), uniform())]!++;
    integratedFractions.forEach((fraction, k) => {
      const sigma = Math.sqrt(fraction * (1 - fraction) * n);
      // Passed by chance by one true channel in 1.7 million.
      expect(Math.abs(counts[k]! - fraction * n)).toBeLessThan(5 * sigma);
    });
    // The nominal fraction of N eta is not what comes out.
    expect(Math.abs(counts[1]! - 0.42 * n)).toBeGreaterThan(5 * Math.sqrt(0.42 * 0.58 * n));
  });

  test("never gives a closed channel, whatever u, and refuses a mass at which nothing is open", () => {
    expect([0, 0.5, 1 - 2 ** -53].map((u) => drawChannel(channels, 1100, u))).toEqual([0, 0, 0]);
    expect(drawChannel(channels, 1530, 1 - 2 ** -53)).toBe(2);
    expect(() => drawChannel(channels, 1000, 0.5)).toThrow(
      new InputError("drawChannel: massMeV: expected a mass at which a channel is open, got 1000."),
    );
  });
});

/** Cumulative distribution of one daughter's mass, by integration with the other integrated out; at 200 masses. */
function marginal(channel: TwoBodyChannel, which: 0 | 1, M: number): (w: number) => number {
  const shape = channel.daughters[which] as LineShape;
  const other = channel.daughters[1 - which]!;
  const weight = (w: number) =>
    foldedFactor({ ...channel, daughters: [w, other] }, M, { relativeError: 1e-7 }).value;
  const [low, high] = [shape.windowMeV[0], Math.min(M - lowestMassMeV(other), shape.windowMeV[1])];
  const masses = Array.from({ length: 201 }, (_, k) => low + ((high - low) * k) / 200);
  const chances = [0];
  for (let k = 1; k <= 200; k++) {
    const range = { fromMeV: masses[k - 1]!, toMeV: masses[k]! };
    chances.push(
      chances[k - 1]! + integrateOverLineShape(shape, weight, range, { relativeError: 1e-6 }).value,
    );
  }
  return (w) => {
    const at = ((w - low) / (high - low)) * 200;
    const k = Math.min(199, Math.floor(at));
    return (chances[k]! + (at - k) * (chances[k + 1]! - chances[k]!)) / chances[200]!;
  };
}

describe("drawing the masses of unstable daughters", () => {
  const pair = (shape: LineShape, other: number | LineShape, L = 0, model = phaseSpace): TwoBodyChannel => ({
    model,
    vertex: { L },
    daughters: [shape, other],
  });
  const Delta = resonance("Delta");
  const rho = resonance("rho");
  const cases: [string, TwoBodyChannel, number][] = [
    ["Lambda(1520) -> Sigma(1385) pi", pair(resonance("Sigma(1385)"), PION_MEV), 1519.5],
    ["N(1520) -> Delta pi, D wave", pair(Delta, PION_MEV, 2, barrier), 1515],
    ["N(1520) -> rho N, far below its nominal threshold", pair(rho, NUCLEON_MEV), 1515],
    ["Delta pi at 1300 MeV, where only the tail is left", pair(Delta, PION_MEV), 1300],
    ["Delta rho at 1900 MeV", pair(Delta, rho), 1900],
  ];

  test.each(cases)(
    "%s: passes a Kolmogorov-Smirnov test that fails a true sample once in a million",
    (_, channel, M) => {
      const grids = channel.daughters.map((d) => (typeof d === "number" ? undefined : drawGrid(d)));
      const uniform = uniformNumbers();
      const sample = Array.from({ length: 20_000 }, () =>
        drawDaughterMasses(channel, [grids[0], grids[1]], M, uniform),
      );
      for (const masses of sample) expect(masses[0] + masses[1]).toBeLessThan(M);
      for (const which of [0, 1] as const) {
        if (typeof channel.daughters[which] === "number") continue;
        const masses = sample.map((both) => both[which]);
        expect(kolmogorovSmirnov(masses, marginal(channel, which, M))).toBeLessThan(ONE_IN_A_MILLION);
        // Without the weight K the sample would fail.
        const plain = Array.from({ length: 20_000 }, () => drawMass(grids[which]!, uniform()));
        const lightEnough = plain.filter((w) => w < M - lowestMassMeV(channel.daughters[1 - which]!));
        expect(kolmogorovSmirnov(lightEnough, marginal(channel, which, M))).toBeGreaterThan(ONE_IN_A_MILLION);
      }
    },
  );

  test("K at the lowest masses is a bound in every model", () => {
    const half = { twoJ: 1, parity: 1 } as const;
    const spinless = { twoJ: 0, parity: -1 } as const;
    const vector = { twoJ: 2, parity: -1 } as const;
    const vertices = [0, 1, 2, 3, 4].flatMap((L) => [
      ...["a", "b", "c"].map((id) => ({ id, vertex: { L }, first: 1077 })),
      {
        id: "d",
        vertex: { L, parent: { twoJ: 2 * L + 1, parity: 1 }, daughters: [half, spinless] },
        first: 1077,
      },
    ]);
    const axial = { L: 0, parent: { twoJ: 2, parity: 1 }, daughters: [vector, spinless] };
    for (const { id, vertex, first } of [...vertices, { id: "e", vertex: axial, first: 280 }]) {
      const model = widthModel(id);
      const K = (M: number, w1: number, w2: number) => model.kinematicFactorMeV(M, w1, w2, vertex as never);
      for (const M of [1300, 1600, 2000, 2400]) {
        for (let w1 = first; w1 < M - 138; w1 += 20) {
          const isSpecial = id === "d" && vertex.L === 0 && first < M / 2;
          expect(K(M, w1, 138)).toBeLessThanOrEqual(K(M, first, 138) * (isSpecial ? 1.01 : 1));
          expect(K(M, first, 138 + (w1 - first) / 2)).toBeLessThanOrEqual(K(M, first, 138));
        }
      }
    }
  });

  test("where next to nothing passes the bound, the masses nearest to it follow the density too", () => {
    const grid = drawGrid(Delta);
    const uniform = uniformNumbers();
    const light = (w: number) => (w < Delta.massMeV ? 1 : 0);
    const K = ([w]: readonly number[]) => (w === grid.originMeV ? 1e30 : light(w!));
    const sample = Array.from(
      { length: 40 },
      () => drawMassesJointly([grid, PION_MEV], K, 3000, uniform)[0]!,
    );
    const half = cumulativeAt(grid, Delta.massMeV);
    const right = (w: number) => Math.min(1, cumulativeAt(grid, w) / half);
    expect(kolmogorovSmirnov(sample, right)).toBeLessThan(ONE_IN_A_MILLION);
    expect(kolmogorovSmirnov(sample, (w) => cumulativeAt(grid, w))).toBeGreaterThan(ONE_IN_A_MILLION);
  });

  test("two stable daughters keep their masses and take no random number", () => {
    const stable: TwoBodyChannel = {
      model: phaseSpace,
      vertex: { L: 0 },
      daughters: [NUCLEON_MEV, PION_MEV],
    };
    const never = () => {
      throw new Error("a random number was taken");
    };
    expect(drawDaughterMasses(stable, [undefined, undefined], 1500, never)).toEqual([NUCLEON_MEV, PION_MEV]);
  });

  test("refuses a closed channel, and an unstable daughter without a grid", () => {
    const channel = pair(Delta, PION_MEV);
    expect(() => drawDaughterMasses(channel, [drawGrid(Delta), undefined], 1200, Math.random)).toThrow(
      new InputError("drawDaughterMasses: parentMeV: expected a mass above 1214.997, got 1200."),
    );
    expect(() => drawDaughterMasses(channel, [undefined, undefined], 1500, Math.random)).toThrow(
      new InputError('drawDaughterMasses: grid of daughter 1: expected a draw grid, got "none".'),
    );
  });
});
