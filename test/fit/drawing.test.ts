import { describe, expect, test } from "vitest";
import { asymmetricSigma, drawnMeasurement } from "../../src/fit/asymmetric-sigma.js";
import { quantile } from "../../src/fit/quantile.js";
import { normalNumbers } from "../../src/fit/random-normal.js";

describe("normal numbers", () => {
  test("10000 of them have mean 0, variance 1 and 68.3 % within 1 (seed 12; false alarm 1 in 5000 together)", () => {
    const normal = normalNumbers(12, 0);
    const values = Array.from({ length: 10_000 }, normal);
    const mean = values.reduce((sum, z) => sum + z, 0) / 10_000;
    const variance = values.reduce((sum, z) => sum + z * z, 0) / 10_000;
    const within = values.filter((z) => Math.abs(z) < 1).length / 10_000;
    expect(Math.abs(mean)).toBeLessThan(4 / 100);
    expect(Math.abs(variance - 1)).toBeLessThan((4 * Math.SQRT2) / 100);
    expect(Math.abs(within - 0.6827)).toBeLessThan((4 * Math.sqrt(0.683 * 0.317)) / 100);
  });

  test("the first numbers of 5000 neighbouring experiments are as random as those of one (seeds 1 and 2)", () => {
    for (const seed of [1, 2]) {
      const firsts = Array.from({ length: 5000 }, (_, index) => normalNumbers(seed, index)());
      expect(new Set(firsts).size).toBe(5000);
      const products = firsts.slice(1).map((z, k) => z * firsts[k]!);
      const correlation = products.reduce((sum, product) => sum + product, 0) / products.length;
      expect(Math.abs(correlation)).toBeLessThan(4 / Math.sqrt(5000));
    }
  });

  test("seed and index alone decide, and both matter", () => {
    expect(normalNumbers(5, 9)()).toBe(normalNumbers(5, 9)());
    expect(normalNumbers(5, 9)()).not.toBe(normalNumbers(5, 10)());
    expect(normalNumbers(5, 9)()).not.toBe(normalNumbers(6, 9)());
  });
});

describe("a drawn measurement with errors +2 -1", () => {
  test("lies half of the time on either side, by the error that the prediction sees", () => {
    expect(drawnMeasurement(10, 1, 2, 1.5)).toBe(11.5);
    expect(drawnMeasurement(10, 1, 2, -1.5)).toBe(7);
  });

  test("has the residual |z| from one error on, and less than that between", () => {
    for (const z of [-3, -1, 1, 2.5]) {
      const drawn = drawnMeasurement(10, 1, 2, z);
      expect(Math.abs((10 - drawn) / asymmetricSigma(drawn, 1, 2, 10))).toBeCloseTo(Math.abs(z), 12);
    }
    const near = drawnMeasurement(10, 1, 2, -0.5);
    expect((10 - near) / asymmetricSigma(near, 1, 2, 10)).toBeCloseTo(1 / (1 + 2 / 3), 12);
  });
});

test("quantiles lie on straight lines between the ordered values", () => {
  expect([0, 0.25, 0.5, 0.9, 1].map((part) => quantile([1, 2, 4, 8, 16], part))).toEqual([1, 2, 4, 12.8, 16]);
  expect(quantile([3], 0.16)).toBe(3);
  expect(() => quantile([], 0.5)).toThrow("quantile: sorted: expected at least one value, got 0.");
});
