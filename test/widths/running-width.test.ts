import { describe, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { breakupMomentumMeV } from "../../src/widths/breakup-momentum.js";
import { couplingWidth, powerWidth, totalWidth, widthThrough } from "../../src/widths/running-width.js";
import { widthModel } from "../../src/widths/width-model.js";

const pion = 138.039;
const nucleon = 938.919;
const DELTA_MEV = 1232;
const channel = (model = widthModel("c", { radiusFm: 0.9866349 }), L = 1) => ({
  model,
  vertex: { L },
  firstMeV: nucleon,
  secondMeV: pion,
});

describe("running widths", () => {
  test("model c gives the barrier form (k/k0)^3 (m0/w) (1 + R^2 k0^2)/(1 + R^2 k^2) of a P wave, R = 5/GeV", () => {
    const width = widthThrough(channel(), 117, DELTA_MEV);
    const k0 = breakupMomentumMeV(DELTA_MEV, nucleon, pion);
    for (const w of [1080, 1150, 1232, 1400, 2000]) {
      const k = breakupMomentumMeV(w, nucleon, pion);
      const R = 5 / 1000;
      const expected = 117 * (k / k0) ** 3 * (DELTA_MEV / w) * ((1 + (R * k0) ** 2) / (1 + (R * k) ** 2));
      expect(width.widthMeV(w) / expected).toBeCloseTo(1, 7);
    }
  });

  test("model a with n = 1 gives the form without a barrier, (k/k0)^(2l+1) m0/w", () => {
    const width = widthThrough(channel(widthModel("a", { n: 1 }), 2), 117, DELTA_MEV);
    const ratio = breakupMomentumMeV(1500, nucleon, pion) / breakupMomentumMeV(DELTA_MEV, nucleon, pion);
    expect(width.widthMeV(1500) / (117 * ratio ** 5 * (DELTA_MEV / 1500))).toBeCloseTo(1, 13);
  });

  test("a width through a coupling is s |A|^2 K, above and below the nominal mass, and 0 below threshold", () => {
    const width = couplingWidth(channel(), 2.5);
    expect(width.widthMeV(1300)).toBe(
      2.5 * channel().model.kinematicFactorMeV(1300, nucleon, pion, { L: 1 }),
    );
    expect(width.widthMeV(1000)).toBe(0);
    expect(width.thresholdsMeV).toEqual([nucleon + pion]);
  });

  test("a total is the sum of its parts, with every threshold once and in order", () => {
    const parts = [powerWidth(20, DELTA_MEV, 1214, 0), widthThrough(channel(), 117, DELTA_MEV)];
    const total = totalWidth([...parts, widthThrough(channel(), 3, DELTA_MEV)]);
    expect(total.thresholdsMeV).toEqual([nucleon + pion, 1214]);
    expect(total.widthMeV(DELTA_MEV)).toBeCloseTo(140, 10);
    expect(total.widthMeV(1214)).toBeCloseTo((parts[1]!.widthMeV(1214) * 120) / 117, 10);
  });

  test("a power width meets its value at m0 and its law elsewhere", () => {
    const width = powerWidth(20, 1500, 1200, 2);
    expect([1200, 1350, 1500, 1800].map((w) => width.widthMeV(w))).toEqual([0, 5, 20, 80]);
  });

  test("refuses a channel closed at the mass its width is given for, and values out of range", () => {
    expect(() => widthThrough(channel(), 10, 1000)).toThrow(
      new InputError(
        "widthThrough: atMassMeV: expected a mass above the threshold 1076.958, got 1000. " +
          "Give the coupling of a channel that is closed at the nominal mass.",
      ),
    );
    expect(() => couplingWidth(channel(), -1)).toThrow(
      new InputError("couplingWidth: strength: expected a finite number >= 0, got -1. Give s |A|^2."),
    );
    expect(() => powerWidth(20, 1500, 1600, 0)).toThrow(
      new InputError(
        "powerWidth: atMassMeV - thresholdMeV: expected a finite number > 0, got -100. The channel is closed.",
      ),
    );
    expect(() => powerWidth(20, 1500, 1200, -1)).toThrow(
      new InputError("powerWidth: power: expected a finite number >= 0, got -1."),
    );
  });
});
