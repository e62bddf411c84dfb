import { expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { asymmetricSigma, upperLimitSigma } from "../../src/fit/measurement-errors.js";

test("the asymmetric error is the lower one below the measurement, the upper one above, and linear between", () => {
  expect(asymmetricSigma(10, 1, 3, 5)).toBe(1);
  expect(asymmetricSigma(10, 1, 3, 9)).toBe(1);
  expect(asymmetricSigma(10, 1, 3, 13)).toBe(3);
  expect(asymmetricSigma(10, 1, 3, 99)).toBe(3);
  expect(asymmetricSigma(10, 1, 3, 11)).toBe(2);
  expect(asymmetricSigma(10, 2, 2, 10.7)).toBe(2);
});

test("an upper limit of 1 is a half-Gaussian of sigma 0.607957 at 90 % and 0.510213 at 95 %", () => {
  // 1/1.644854 and 1/1.959964, the two-sided Gaussian points of any statistics table; provenance: memory.
  expect(upperLimitSigma(1, 0.9).toFixed(6)).toBe("0.607957");
  expect(upperLimitSigma(1, 0.95).toFixed(6)).toBe("0.510213");
  expect(upperLimitSigma(20, 0.9)).toBeCloseTo(20 * upperLimitSigma(1, 0.9), 12);
});

test("errors that are no errors are refused with their row", () => {
  const cases: [() => unknown, string][] = [
    [() => asymmetricSigma(1, 0, 1, 1), "asymmetricSigma: below: expected a finite number > 0, got 0."],
    [() => asymmetricSigma(1, 1, -1, 1), "asymmetricSigma: above: expected a finite number > 0, got -1."],
    [() => upperLimitSigma(0, 0.9), "upperLimitSigma: limit: expected a finite number > 0, got 0."],
  ];
  for (const [call, message] of cases) expect(call).toThrow(new InputError(message));
});
