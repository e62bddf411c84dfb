import { describe, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { integrate, integrateAcross } from "../../src/widths/quadrature.js";

describe("adaptive Gauss-Kronrod quadrature", () => {
  test("one interval integrates polynomials up to degree 23 exactly, and not degree 24", () => {
    for (let n = 0; n <= 24; n++) {
      const { value, evaluations } = integrate((x) => x ** n, [-1, 1], { maxIntervals: 1 });
      const exact = n % 2 === 0 ? 2 / (n + 1) : 0;
      expect(evaluations).toBe(15);
      if (n < 24) expect(Math.abs(value - exact)).toBeLessThan(4e-16 * 15);
      else expect(Math.abs(value - exact)).toBeGreaterThan(1e-12);
    }
  });

  test("the Gauss rule inside it is exact up to degree 13: the error estimate is rounding there, and not above", () => {
    for (let n = 0; n <= 14; n += 2) {
      const { error, value } = integrate((x) => x ** n, [-1, 1], { maxIntervals: 1 });
      if (n <= 12) expect(error).toBeLessThan(60 * Number.EPSILON * value);
      else expect(error).toBeGreaterThan(1e-9);
    }
  });

  test.each<[string, (x: number) => number, number[], number]>([
    ["exp", Math.exp, [0, 1], Math.E - 1],
    ["1/(1+25x^2)", (x) => 1 / (1 + 25 * x * x), [-1, 1], (2 * Math.atan(5)) / 5],
    ["|x - 1/3| with its corner as a point", (x) => Math.abs(x - 1 / 3), [0, 1 / 3, 1], 5 / 18],
    ["cos 10x", (x) => Math.cos(10 * x), [0, 1], Math.sin(10) / 10],
    ["ln x", Math.log, [0, 1], -1],
  ])(
    "%s comes out to the error asked for, and the estimate is no smaller than the error",
    (_, f, points, exact) => {
      for (const relativeError of [1e-4, 1e-8, 1e-12]) {
        const { value, error } = integrate(f, points, { relativeError });
        expect(error).toBeLessThanOrEqual(relativeError * Math.abs(value));
        expect(Math.abs(value - exact)).toBeLessThanOrEqual(error + 1e-15);
      }
    },
  );

  test("an integral it cannot do comes back with a large error estimate, not with a wrong claim", () => {
    const { value, error } = integrate((x) => 1 / Math.sqrt(x), [0, 1], {
      relativeError: 1e-12,
      maxIntervals: 10,
    });
    expect(error).toBeGreaterThan(1e-4);
    expect(Math.abs(value - 2)).toBeLessThan(3 * error);
  });

  test("refuses an accuracy that is none", () => {
    expect(() => integrate(Math.exp, [0, 1], { relativeError: 0 })).toThrow(
      new InputError("integrate: relativeError: expected a finite number > 0, got 0."),
    );
    expect(() => integrate(Math.exp, [0, 1], { maxIntervals: 0 })).toThrow(
      new InputError("integrate: maxIntervals: expected an integer >= 1, got 0."),
    );
  });
});

describe("quadrature across thresholds and peaks", () => {
  test.each([
    [1.5, 1.5, Math.PI / 8],
    [0.5, 0.5, Math.PI],
    // B(5/2, 7/2) = (3/4 sqrt pi)(15/8 sqrt pi)/5!
    [2.5, 3.5, (45 / 32) * (Math.PI / 120)],
  ])("half-integer powers at both ends, x^(%f-1) (1-x)^(%f-1), to 1e-13 in 200 values", (p, q, exact) => {
    const f = (x: number) => x ** (p - 1) * (1 - x) ** (q - 1);
    const options = { relativeError: 1e-12 };
    const { value, evaluations } = integrateAcross(f, [0, 1], { at: 0.5, halfWidth: 1 }, options);
    // 1 - x has lost digits near 1, where (1-x)^(-1/2) is largest.
    expect(Math.abs(value / exact - 1)).toBeLessThan(q < 1 ? 1e-8 : 1e-13);
    if (q > 1) expect(evaluations).toBeLessThan(200);
  });

  test.each([1, 1e-2, 1e-4, 1e-6])(
    "a Breit-Wigner peak of half width %f costs no more than a broad one",
    (g) => {
      const f = (w: number) => g / Math.PI / ((w - 1) ** 2 + g * g);
      const { value, evaluations } = integrateAcross(f, [0, 3], { at: 1, halfWidth: g });
      const exact = (Math.atan(2 / g) + Math.atan(1 / g)) / Math.PI;
      // The distance from the peak is only as exact as w itself.
      expect(Math.abs(value / exact - 1)).toBeLessThan(Math.max(1e-10, 1e-15 / g));
      expect(evaluations).toBeLessThan(100);
    },
  );

  test("a square-root threshold inside the range is a point of it", () => {
    const f = (w: number) => Math.sqrt(Math.max(0, w - 2));
    const { value, evaluations } = integrateAcross(f, [1, 2, 5], { at: 3, halfWidth: 1 });
    expect(Math.abs(value / ((2 / 3) * 3 ** 1.5) - 1)).toBeLessThan(1e-12);
    expect(evaluations).toBeLessThan(200);
  });

  test("refuses a peak without a width", () => {
    expect(() => integrateAcross(Math.exp, [0, 1], { at: 0.5, halfWidth: 0 })).toThrow(
      new InputError(
        "integrateAcross: halfWidth: expected a finite number > 0, got 0. Give the half width of the peak.",
      ),
    );
  });
});
