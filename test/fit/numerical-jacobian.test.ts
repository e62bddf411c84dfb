import { expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { numericalJacobian } from "../../src/fit/numerical-jacobian.js";

const POINTS = [0.001, 0.7, 3, 40];
const FUNCTIONS: [name: string, f: (x: number) => number, slope: (x: number) => number][] = [
  ["exp(-x)", (x) => Math.exp(-x), (x) => -Math.exp(-x)],
  ["x^5", (x) => x ** 5, (x) => 5 * x ** 4],
  ["sin(10 x)", (x) => Math.sin(10 * x), (x) => 10 * Math.cos(10 * x)],
  ["sqrt(x)", (x) => Math.sqrt(x), (x) => 0.5 / Math.sqrt(x)],
  ["1/(1+x^2)", (x) => 1 / (1 + x * x), (x) => (-2 * x) / (1 + x * x) ** 2],
];

/** Largest error over functions and points, relative to the larger of the slope and |f/x|, which rounding sets. */
function worstError(scheme: "two-point" | "extrapolated"): { error: number; at: string } {
  let worst = { error: 0, at: "" };
  for (const [name, f, slope] of FUNCTIONS) {
    for (const x of POINTS) {
      const value = numericalJacobian(([t]) => [f(t!)], [x], { scheme })[0]![0]!;
      const error = Math.abs(value - slope(x)) / Math.max(Math.abs(slope(x)), Math.abs(f(x) / x));
      if (!(error <= worst.error)) worst = { error, at: `${name} at ${x}` };
    }
  }
  return worst;
}

test("two-point derivatives are good to 1e-6 and extrapolated ones to 1e-11 on five functions over four decades", () => {
  const [fast, exact] = [worstError("two-point"), worstError("extrapolated")];
  console.log(
    `two-point ${fast.error.toExponential(1)} (${fast.at}); extrapolated ${exact.error.toExponential(1)} (${exact.at})`,
  );
  expect(fast.error).toBeLessThan(1e-6);
  expect(exact.error).toBeLessThan(1e-11);
});

test("rows are outputs and columns are parameters, and a linear map comes back", () => {
  const map = ([a, b, c]: readonly number[]) => [a! + 2 * b!, 3 * b! - c!];
  const jacobian = numericalJacobian(map, [1, -5, 0]);
  const expected = [
    [1, 2, 0],
    [0, 3, -1],
  ];
  for (const [i, row] of expected.entries()) {
    for (const [j, value] of row.entries()) expect(jacobian[i]![j]).toBeCloseTo(value, 11);
  }
});

test("steps never leave the bounds: at a bound they go to one side, for a square root at its edge too", () => {
  const asked: number[] = [];
  const f = ([x]: readonly number[]) => {
    asked.push(x!);
    return [Math.exp(x!)];
  };
  for (const [x, lower, upper] of [
    [1, 1, 2],
    [2, 1, 2],
    [1.5, 1.4999, 1.5001],
  ] as const) {
    for (const [scheme, error] of [
      ["two-point", 1e-8],
      ["extrapolated", 1e-10],
    ] as const) {
      const slope = numericalJacobian(f, [x], { scheme, bounds: [{ lower, upper }] })[0]![0]!;
      expect(Math.abs(slope / Math.exp(x) - 1)).toBeLessThan(error);
      expect(Math.min(...asked)).toBeGreaterThanOrEqual(lower);
      expect(Math.max(...asked)).toBeLessThanOrEqual(upper);
      asked.length = 0;
    }
  }
});

test("samples where the function is not finite are left out", () => {
  const slope = numericalJacobian(([x]) => [x! > 1.02 ? Number.NaN : x! ** 2], [1])[0]![0]!;
  expect(slope).toBeCloseTo(2, 9);
});

test("a function whose number of outputs changes is refused in words", () => {
  expect(() => numericalJacobian(([x]) => (x! > 1 ? [1, 2] : [1]), [1])).toThrow(
    new InputError("numericalJacobian: expected 1 outputs at every point, got 2."),
  );
});
