import { describe, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { integrateOverLineShape, lineShape } from "../../src/widths/line-shape.js";
import { powerWidth, totalWidth } from "../../src/widths/running-width.js";
import { LAMBDA_MEV, oneChannel, PION_MEV, phaseSpace, resonance } from "./resonances.js";

describe("line shape", () => {
  test("of a constant width has N = 1 but for its tail, 2 Gamma/(pi W) above W", () => {
    const [mass, width, widths] = [1000, 100, 1e6];
    const { normalisation } = lineShape(mass, powerWidth(width, mass, 0, 0), { windowWidths: widths });
    const tail = (2 * width) / Math.PI / (mass + widths * width);
    expect(Math.abs(normalisation + tail - 1)).toBeLessThan(1e-10);
  });

  test("is 2 w^2 Gamma/pi/[(m0^2-w^2)^2 + w^2 Gamma^2] divided by N, and 2/(pi Gamma N) at the peak", () => {
    const Delta = resonance("Delta");
    expect(Delta.densityPerMeV(1232) * Delta.normalisation * 117).toBeCloseTo(2 / Math.PI, 12);
    const [w, G] = [1150, Delta.running.widthMeV(1150)];
    const plain = (2 * w * w * G) / Math.PI / ((1232 ** 2 - w * w) ** 2 + (w * G) ** 2);
    expect((Delta.densityPerMeV(w) * Delta.normalisation) / plain).toBeCloseTo(1, 12);
  });

  test.each(["Delta", "Sigma(1385)", "rho", "phi", "f2", "N(1535)"] as const)(
    "of %s is a distribution over its window, from threshold to m0 + 10 Gamma",
    (name) => {
      const shape = resonance(name);
      expect(Math.abs(integrateOverLineShape(shape, () => 1).value - 1)).toBeLessThan(1e-9);
      expect(shape.windowMeV).toEqual([shape.running.thresholdsMeV[0], shape.massMeV + 10 * shape.widthMeV]);
      expect(shape.densityPerMeV(shape.windowMeV[0])).toBe(0);
      expect(shape.densityPerMeV(shape.windowMeV[1] + 0.1)).toBe(0);
    },
  );

  test("N of an independent program: Delta, Sigma(1385) with one and with two channels, rho", () => {
    // Tanh-sinh quadrature with 20 digits in Python's mpmath; regression values.
    expect(resonance("Delta").normalisation).toBeCloseTo(0.98381338006797, 11);
    expect(resonance("Sigma(1385)").normalisation).toBeCloseTo(0.97158964178867, 11);
    expect(resonance("rho").normalisation).toBeCloseTo(0.95941471706627, 11);
    const two = totalWidth([
      oneChannel(1384.6, 0.88 * 37.2, [LAMBDA_MEV, PION_MEV], 1),
      oneChannel(1384.6, 0.12 * 37.2, [1193.154, PION_MEV], 1),
    ]);
    expect(lineShape(1384.6, two).normalisation).toBeCloseTo(0.9855069358553, 11);
  });

  test("without a barrier a P-wave tail is so heavy that N of Sigma(1385) up to 3 GeV is 1.33, with one 1.04", () => {
    const windowWidths = (3000 - 1384.6) / 37.2;
    expect(resonance("Sigma(1385)", phaseSpace, { windowWidths }).normalisation).toBeCloseTo(1.33, 2);
    expect(resonance("Sigma(1385)", undefined, { windowWidths }).normalisation).toBeCloseTo(1.04, 2);
  });

  test("can be had as it is, with N = 1", () => {
    const shape = resonance("Delta", undefined, { normalised: false });
    expect(shape.normalisation).toBe(1);
    expect(integrateOverLineShape(shape, () => 1).value).toBeCloseTo(0.98381338006797, 9);
  });

  test("refuses a state with no channel open at its mass, and a window without a width", () => {
    const closed = powerWidth(10, 1500, 1300, 0);
    expect(() => lineShape(1200, closed)).toThrow(
      new InputError(
        "lineShape: width in MeV at the nominal mass: expected a number > 0, got 0. " +
          "At least one channel must be open at the nominal mass.",
      ),
    );
    expect(() => lineShape(1500, closed, { windowWidths: 0 })).toThrow(
      new InputError("lineShape: windowWidths: expected a finite number > 0, got 0. 10 is usual."),
    );
  });
});
