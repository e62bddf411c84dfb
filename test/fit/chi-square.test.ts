import { expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { chiSquareProbability, gaussianDeviations, scaleFactor } from "../../src/fit/chi-square.js";

function relative(value: number, reference: number): number {
  return Math.abs(value / reference - 1);
}

test("the tail reproduces the percentage points of chi-square printed in handbooks", () => {
  // M. Abramowitz, I.A. Stegun, Handbook of Mathematical Functions (1964), table 26.8: chi-square with tail Q for nu
  // degrees of freedom. Provenance: memory. The printed digits fix Q to a few times 1e-6 relative.
  const table: [nu: number, q: number, chi2: number][] = [
    [1, 0.05, 3.84146],
    [1, 0.01, 6.6349],
    [1, 0.001, 10.828],
    [2, 0.05, 5.99147],
    [2, 0.01, 9.21034],
    [3, 0.05, 7.81473],
    [4, 0.05, 9.48773],
    [5, 0.05, 11.0705],
    [5, 0.01, 15.0863],
    [10, 0.05, 18.307],
    [10, 0.01, 23.2093],
    [20, 0.05, 31.4104],
    [30, 0.01, 50.8922],
  ];
  for (const [nu, q, chi2] of table) {
    // Half a unit of the last printed digit moves Q by at most half of it, relative.
    const digitsAfterPoint = String(chi2).split(".")[1]!.length;
    expect([
      nu,
      q,
      relative(chiSquareProbability(chi2, nu), q) < 0.5 * 10 ** -digitsAfterPoint + 1e-9,
    ]).toEqual([nu, q, true]);
  }
});

/** Q for even ndf = 2 m by the finite sum exp(-y) sum_(k<m) y^k / k!, y = chi2/2 (Abramowitz and Stegun 26.4.21; provenance: memory). */
function evenTail(chi2: number, ndf: number): number {
  const y = chi2 / 2;
  let [term, sum] = [1, 0];
  for (let k = 0; k < ndf / 2; k++) {
    sum += term;
    term *= y / (k + 1);
  }
  return Math.exp(-y) * sum;
}

test("for even degrees of freedom the tail equals its finite sum, from 1e-9 to 1e-260", () => {
  let worst = { error: 0, chi2: 0, ndf: 0 };
  for (const ndf of [2, 4, 6, 10, 20, 50, 100]) {
    for (const chi2 of [1e-9, 0.01, 0.5, 1, 3, 7.5, 20, 60, 150, 400, 1200]) {
      const error = relative(chiSquareProbability(chi2, ndf), evenTail(chi2, ndf));
      if (error > worst.error) worst = { error, chi2, ndf };
    }
  }
  console.log(
    `chi-square tail: worst relative error ${worst.error.toExponential(1)} at ${worst.chi2}, ${worst.ndf}`,
  );
  expect(worst.error).toBeLessThan(2e-12);
});

test("for odd degrees of freedom the tail obeys the recurrence Q(nu+2) = Q(nu) + (chi2/2)^(nu/2) e^(-chi2/2) / Gamma(nu/2+1)", () => {
  // Abramowitz and Stegun 26.4.8, provenance: memory. Gamma(nu/2 + 1) for odd nu from Gamma(1/2) = sqrt(pi).
  for (const chi2 of [0.3, 2, 9, 40, 300]) {
    let gamma = Math.sqrt(Math.PI) / 2;
    for (let nu = 1; nu <= 21; nu += 2) {
      const step = ((chi2 / 2) ** (nu / 2) * Math.exp(-chi2 / 2)) / gamma;
      const next = chiSquareProbability(chi2, nu) + step;
      expect(relative(chiSquareProbability(chi2, nu + 2), next)).toBeLessThan(2e-12);
      gamma *= nu / 2 + 1;
    }
  }
});

test("the ends are exact: 1 at chi-square 0 and without degrees of freedom, 0 at infinity, never NaN", () => {
  expect(chiSquareProbability(0, 3)).toBe(1);
  expect(chiSquareProbability(7, 0)).toBe(1);
  expect(chiSquareProbability(Number.POSITIVE_INFINITY, 3)).toBe(0);
  expect(chiSquareProbability(1e6, 3)).toBe(0);
  expect(chiSquareProbability(1e-300, 1)).toBeCloseTo(1, 12);
});

test("a negative chi-square, NaN and half a degree of freedom are refused in words", () => {
  expect(() => chiSquareProbability(-1, 3)).toThrow(
    new InputError("chiSquareProbability: chi2: expected a number >= 0, got -1."),
  );
  expect(() => chiSquareProbability(Number.NaN, 3)).toThrow(
    new InputError("chiSquareProbability: chi2: expected a number >= 0, got NaN."),
  );
  expect(() => chiSquareProbability(1, 0.5)).toThrow(
    new InputError("chiSquareProbability: ndf: expected an integer >= 0, got 0.5."),
  );
  expect(() => gaussianDeviations(1)).toThrow(
    new InputError(
      "gaussianDeviations: confidence: expected a number between 0 and 1, ends excluded, got 1.",
    ),
  );
});

test("the Gaussian deviations for 68.27, 90, 95, 95.45, 99 and 99.73 % are the ones printed everywhere", () => {
  // Review of Particle Physics, statistics review, table of the area of the tails; provenance: memory.
  expect(gaussianDeviations(0.6826894921370859)).toBeCloseTo(1, 10);
  expect(gaussianDeviations(0.9544997361036416)).toBeCloseTo(2, 10);
  expect(gaussianDeviations(0.9973002039367398)).toBeCloseTo(3, 10);
  expect(gaussianDeviations(0.9).toFixed(4)).toBe("1.6449");
  expect(gaussianDeviations(0.95).toFixed(4)).toBe("1.9600");
  expect(gaussianDeviations(0.99).toFixed(4)).toBe("2.5758");
});

test("the scale factor is sqrt(chi2/ndf), never below 1, and undefined without degrees of freedom", () => {
  expect(scaleFactor(18, 2)).toBe(3);
  expect(scaleFactor(1, 4)).toBe(1);
  expect(scaleFactor(1, 0)).toBeUndefined();
});
