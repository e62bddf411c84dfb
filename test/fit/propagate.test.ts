import { expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { propagate } from "../../src/fit/propagate.js";

const COVARIANCE = [
  [0.04, 0.01],
  [0.01, 0.09],
];

test("the covariance of linear functions is exact: sum and difference of two correlated numbers", () => {
  const { values, covariance } = propagate(([a, b]) => [a! + b!, a! - b!], [1, 2], COVARIANCE);
  expect(values).toEqual([3, -1]);
  const expected = [
    [0.15, -0.05],
    [-0.05, 0.11],
  ];
  for (const [i, row] of expected.entries()) {
    for (const [k, value] of row.entries()) expect(covariance[i]![k]).toBeCloseTo(value, 12);
  }
});

test("relative errors of a product of independent factors add in quadrature, those of a power by the exponent", () => {
  const independent = [
    [0.04, 0],
    [0, 0.09],
  ];
  const { covariance } = propagate(([a, b]) => [a! * b!, a! ** 3], [2, 5], independent);
  expect(Math.sqrt(covariance[0]![0]!) / 10).toBeCloseTo(Math.hypot(0.2 / 2, 0.3 / 5), 11);
  expect(Math.sqrt(covariance[1]![1]!) / 8).toBeCloseTo(3 * (0.2 / 2), 11);
});

test("fractions that sum to 1 have a covariance whose rows sum to 0", () => {
  const fractions = ([a, b]: readonly number[]) => [a! / (a! + b!), b! / (a! + b!)];
  const { covariance } = propagate(fractions, [3, 7], COVARIANCE);
  for (const row of covariance) expect(Math.abs(row[0]! + row[1]!)).toBeLessThan(1e-14);
});

test("an analytic Jacobian gives what the numerical one gives, and the result is symmetric to the last bit", () => {
  const f = ([a, b]: readonly number[]) => [Math.exp(a!) * b!, Math.sin(b!), a! / b!];
  const jacobian = ([a, b]: readonly number[]) => [
    [Math.exp(a!) * b!, Math.exp(a!)],
    [0, Math.cos(b!)],
    [1 / b!, -a! / b! ** 2],
  ];
  const numerical = propagate(f, [0.3, 1.7], COVARIANCE).covariance;
  const analytic = propagate(f, [0.3, 1.7], COVARIANCE, { jacobian }).covariance;
  for (const [i, row] of analytic.entries()) {
    for (const [k, value] of row.entries()) {
      expect(Math.abs(numerical[i]![k]! - value)).toBeLessThan(1e-11 * Math.abs(value));
      expect(numerical[i]![k]).toBe(numerical[k]![i]);
    }
  }
});

test("sizes that disagree and outputs that are not finite are refused in words", () => {
  expect(() => propagate(([a]) => [a!], [1], COVARIANCE)).toThrow(
    new InputError('propagate: covariance: expected 1 x 1, one row per parameter, got "2 x 2".'),
  );
  expect(() => propagate(() => [1, Number.NaN], [1, 2], COVARIANCE)).toThrow(
    new InputError("propagate: output 1: expected a finite number, got NaN."),
  );
});
