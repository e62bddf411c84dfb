import { describe, expect, test } from "vitest";
import { foldedWidth } from "../../src/widths/folded-width.js";
import { integrateOverLineShape } from "../../src/widths/line-shape.js";
import { gridWidth, massGrid } from "../../src/widths/mass-grid.js";
import { channelFractions, parentLineShape } from "../../src/widths/parent-line-shape.js";
import { powerWidth } from "../../src/widths/running-width.js";
import { NUCLEON_MEV, oneChannel, PION_MEV, phaseSpace, resonance } from "./resonances.js";

const ETA_MEV = 547.862;
const N1535 = [
  oneChannel(1530, 0.45 * 150, [NUCLEON_MEV, PION_MEV], 0, phaseSpace),
  oneChannel(1530, 0.42 * 150, [NUCLEON_MEV, ETA_MEV], 0, phaseSpace),
  powerWidth(0.13 * 150, 1530, NUCLEON_MEV + PION_MEV, 0),
];

describe("line shape of a parent with many channels", () => {
  test("fractions of N(1535) change from .45/.42/.13 to .48/.37/.14 over the line shape", () => {
    const { nominalFractions, integratedFractions, shape } = parentLineShape(1530, N1535);
    for (const [k, fraction] of [0.45, 0.42, 0.13].entries()) {
      expect(nominalFractions[k]).toBeCloseTo(fraction, 12);
    }
    // Direct sums over 400,000 masses by an independent program: .4838, .3729, .1433; regression values.
    for (const [k, fraction] of [0.4838, 0.3729, 0.1433].entries()) {
      expect(integratedFractions[k]).toBeCloseTo(fraction, 4);
    }
    expect(shape.windowMeV).toEqual([NUCLEON_MEV + PION_MEV, 1530 + 3 * 150]);
    expect(shape.running.thresholdsMeV).toEqual([NUCLEON_MEV + PION_MEV, NUCLEON_MEV + ETA_MEV]);
  });

  test("the window decides: up to m0 + 10 Gamma the eta share is .40", () => {
    const { integratedFractions } = parentLineShape(1530, N1535, { windowWidths: 10 });
    expect(integratedFractions[1]).toBeCloseTo(0.403, 3);
  });

  test("both kinds of fractions add up to 1, also with a folded channel given as a grid", () => {
    const daughters = [resonance("Delta"), PION_MEV] as const;
    const folded = foldedWidth({ model: phaseSpace, vertex: { L: 0 }, daughters }, 0.2);
    const channels = [
      oneChannel(1515, 66, [NUCLEON_MEV, PION_MEV], 2),
      gridWidth(massGrid(folded, 1515 + 3 * 200)),
      powerWidth(20, 1515, NUCLEON_MEV + 2 * PION_MEV, 2),
    ];
    const parent = parentLineShape(1515, channels);
    for (const fractions of [parent.nominalFractions, parent.integratedFractions]) {
      expect(fractions.reduce((sum, fraction) => sum + fraction, 0)).toBeCloseTo(1, 9);
    }
    const direct = parentLineShape(1515, [channels[0]!, folded, channels[2]!]);
    direct.integratedFractions.forEach((fraction, k) => {
      // The grid's own accuracy.
      expect(Math.abs(parent.integratedFractions[k]! / fraction - 1)).toBeLessThan(1e-4);
    });
  });

  test("tends to the nominal fractions as the parent gets narrow", () => {
    const narrow = N1535.map(({ thresholdsMeV, widthMeV }) => ({
      thresholdsMeV,
      widthMeV: (w: number) => widthMeV(w) / 1e4,
    }));
    const { nominalFractions, integratedFractions } = parentLineShape(1530, narrow);
    nominalFractions.forEach((fraction, k) => {
      expect(Math.abs(integratedFractions[k]! - fraction)).toBeLessThan(1e-4);
    });
  });

  test("fractions at one mass are those of the running widths, and 0 where nothing is open", () => {
    expect(channelFractions(N1535, 1480)[1]).toBe(0);
    expect(channelFractions(N1535, 1000)).toEqual([0, 0, 0]);
  });

  test("without normalisation the fractions are the same", () => {
    const plain = parentLineShape(1530, N1535, { normalised: false });
    const { integratedFractions, shape } = parentLineShape(1530, N1535);
    expect(plain.shape.normalisation).toBe(1);
    expect(integrateOverLineShape(shape, () => 1).value).toBeCloseTo(1, 9);
    plain.integratedFractions.forEach((fraction, k) => {
      expect(fraction).toBeCloseTo(integratedFractions[k]!, 9);
    });
  });
});
