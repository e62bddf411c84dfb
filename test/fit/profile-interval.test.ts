import { describe, expect, test } from "vitest";
import { type LeastSquaresProblem, levenbergMarquardt } from "../../src/fit/levenberg-marquardt.js";
import {
  type GradedFunction,
  type ProfileInterval,
  profileInterval,
} from "../../src/fit/profile-interval.js";
import { seededNormal } from "./seeded-normal.js";
import { seededUniform } from "./squared-forms.js";

/** Independent Gaussian measurements of the parameters themselves. */
function measured(values: readonly number[], sigmas: readonly number[]): LeastSquaresProblem {
  return {
    residuals: (x) => x.map((value, j) => (value - values[j]!) / sigmas[j]!),
    jacobian: (x) => x.map((_, j) => x.map((_, k) => (j === k ? 1 / sigmas[j]! : 0))),
  };
}

function intervalOf(
  problem: LeastSquaresProblem,
  start: readonly number[],
  f: GradedFunction,
  deltaChi2: number,
  least?: number,
): ProfileInterval {
  const minimum = levenbergMarquardt(problem, start);
  return profileInterval(problem, minimum, f, deltaChi2, least === undefined ? {} : { least });
}

const square: GradedFunction = ([x]) => ({ value: x! * x!, gradient: [2 * x!] });
const ratio: GradedFunction = ([x, y]) => ({ value: y! / x!, gradient: [-y! / (x! * x!), 1 / x!] });

test("for a linear function of a linear problem the profile gives the linear error, times 1 and 2 (seed 31)", () => {
  const uniform = seededUniform(31);
  for (let round = 0; round < 20; round++) {
    const rows = Array.from({ length: 7 }, () => Array.from({ length: 3 }, uniform));
    const data = rows.map(uniform);
    const weights = Array.from({ length: 3 }, uniform);
    const dot = (a: readonly number[], b: readonly number[]) => a.reduce((s, v, k) => s + v * b[k]!, 0);
    const problem = {
      residuals: (x: readonly number[]) => rows.map((row, i) => dot(row, x) - data[i]!),
      jacobian: () => rows,
    };
    const minimum = levenbergMarquardt(problem, [0, 0, 0]);
    const variance = dot(
      weights,
      minimum.covariance.map((row) => dot(row, weights)),
    );
    const f = (x: readonly number[]) => ({ value: dot(weights, x), gradient: weights });
    for (const times of [1, 2]) {
      const { lower, upper } = profileInterval(problem, minimum, f, times * times);
      const centre = dot(weights, minimum.parameters);
      const error = times * Math.sqrt(variance);
      expect([lower.kind, upper.kind]).toEqual(["crossed", "crossed"]);
      expect(Math.abs((upper.value! - centre) / error - 1)).toBeLessThan(1e-7);
      expect(Math.abs((centre - lower.value!) / error - 1)).toBeLessThan(1e-7);
    }
  }
});

test("the interval of a monotone function is the function of the interval", () => {
  const exponential: GradedFunction = ([x]) => ({ value: Math.exp(x!), gradient: [Math.exp(x!)] });
  const { lower, upper } = intervalOf(measured([0.3], [1.2]), [0], exponential, 4);
  expect(lower.value! / Math.exp(0.3 - 2.4)).toBeCloseTo(1, 6);
  expect(upper.value! / Math.exp(0.3 + 2.4)).toBeCloseTo(1, 6);
});

describe("the square of an amplitude measured as x +- 1", () => {
  test.each([
    { x: 1.5, deltaChi2: 1, lower: 0.25, kind: "crossed" },
    { x: 1.5, deltaChi2: 4, lower: 0, kind: "least" },
    { x: 0.4, deltaChi2: 1, lower: 0, kind: "least" },
    { x: 0, deltaChi2: 1, lower: 0, kind: "least" },
    { x: 1e-6, deltaChi2: 4, lower: 0, kind: "least" },
  ])("at x = $x and delta chi-square $deltaChi2 begins at $lower", ({ x, deltaChi2, lower, kind }) => {
    const interval = intervalOf(measured([x], [1]), [x], square, deltaChi2, 0);
    expect(interval.lower.kind).toBe(kind);
    expect(interval.lower.value!).toBeCloseTo(lower, 6);
    expect(interval.upper.kind).toBe("crossed");
    expect(Math.abs(interval.upper.value! / (x + Math.sqrt(deltaChi2)) ** 2 - 1)).toBeLessThan(1e-5);
  });

  test("has no linear error at x = 0, where the profile still gives the interval from 0 to 1", () => {
    expect(square([0]).gradient).toEqual([0]);
    expect(intervalOf(measured([0], [1]), [0], square, 1, 0).upper.value!).toBeCloseTo(1, 5);
  });

  // The interval in the square holds the truth a^2 when x is within 1 of +a or of -a: for a = 1 from -2 to 2, in
  // probability Phi(1) - Phi(-3) = 0.8400.
  test("covers a true square of 1 in 84.0 % of 1500 draws (seed 5; false alarm 1 in 10000)", () => {
    const normal = seededNormal(5);
    let covered = 0;
    for (let k = 0; k < 1500; k++) {
      const x = 1 + normal();
      const { lower, upper } = intervalOf(measured([x], [1]), [x], square, 1, 0);
      if (lower.value! <= 1 && upper.value! >= 1) covered++;
    }
    const standardDeviation = Math.sqrt((0.84 * 0.16) / 1500);
    expect(Math.abs(covered / 1500 - 0.84)).toBeLessThan(3.9 * standardDeviation);
  });
});

test("the sum of two squares at their common zero reaches as far as the longer axis of the ellipse", () => {
  // x and y with errors 1 and 1 and correlation 0.6: the covariance has the eigenvalues 1.6 and 0.4.
  const problem: LeastSquaresProblem = {
    residuals: ([x, y]) => [(x! + y!) / Math.sqrt(3.2), (x! - y!) / Math.sqrt(0.8)],
    jacobian: () => [
      [1 / Math.sqrt(3.2), 1 / Math.sqrt(3.2)],
      [1 / Math.sqrt(0.8), -1 / Math.sqrt(0.8)],
    ],
  };
  const sum: GradedFunction = ([x, y]) => ({ value: x! * x! + y! * y!, gradient: [2 * x!, 2 * y!] });
  const { lower, upper } = intervalOf(problem, [0.1, 0.2], sum, 1, 0);
  expect(lower).toEqual({ value: 0, kind: "least" });
  expect(upper.value!).toBeCloseTo(1.6, 5);
});

describe("the ratio of two Gaussian numbers", () => {
  // E.C. Fieller, J. R. Stat. Soc. B 16 (1954) 175: the roots r of (y - r x)^2 = delta (s_y^2 + r^2 s_x^2).
  const fieller = (x: number, y: number, sx: number, sy: number, delta: number) => {
    const [a, b, c] = [x * x - delta * sx * sx, -2 * x * y, y * y - delta * sy * sy];
    const root = Math.sqrt(b * b - 4 * a * c);
    return [(-b - root) / (2 * a), (-b + root) / (2 * a)] as const;
  };

  test.each([
    { x: 3, y: 2, delta: 1 },
    { x: 3, y: 2, delta: 4 },
    { x: -2.4, y: 0.1, delta: 4 },
  ])("x = $x, y = $y, delta chi-square $delta: the ends are Fieller's", ({ x, y, delta }) => {
    const [low, high] = fieller(x, y, 1, 0.5, delta);
    const { lower, upper } = intervalOf(measured([x, y], [1, 0.5]), [x, y], ratio, delta);
    expect(Math.abs(lower.value! / low - 1)).toBeLessThan(1e-5);
    expect(Math.abs(upper.value! / high - 1)).toBeLessThan(1e-5);
  });

  test("is open above where the denominator may vanish", () => {
    const { upper } = intervalOf(measured([1.5, 6], [1, 0.5]), [1.5, 6], ratio, 4);
    expect(upper).toEqual({ value: Number.POSITIVE_INFINITY, kind: "open" });
  });
});

test("a combination that the data leave free is open on both sides, one that they fix is not", () => {
  const problem: LeastSquaresProblem = {
    residuals: ([x, y]) => [x! + y! - 1, 0.5 * (x! + y! - 1.2)],
    jacobian: () => [
      [1, 1],
      [0.5, 0.5],
    ],
  };
  const linear =
    (weights: readonly number[]): GradedFunction =>
    (p) => ({
      value: weights.reduce((sum, w, j) => sum + w * p[j]!, 0),
      gradient: weights,
    });
  expect(intervalOf(problem, [0, 0], linear([1, 0]), 1)).toEqual({
    lower: { value: Number.NEGATIVE_INFINITY, kind: "open" },
    upper: { value: Number.POSITIVE_INFINITY, kind: "open" },
  });
  const { lower, upper } = intervalOf(problem, [0, 0], linear([1, 1]), 1);
  expect((upper.value! - lower.value!) / 2).toBeCloseTo(1 / Math.sqrt(1.25), 7);
});

test("a function that does not depend on the parameters has an interval of length 0", () => {
  const constant: GradedFunction = () => ({ value: 3, gradient: [0] });
  expect(intervalOf(measured([1], [1]), [0], constant, 1)).toEqual({
    lower: { value: 3, kind: "crossed" },
    upper: { value: 3, kind: "crossed" },
  });
});

test("a height that is not positive is refused", () => {
  expect(() => intervalOf(measured([1], [1]), [0], square, 0)).toThrow(
    "profileInterval: deltaChi2: expected a finite number > 0, got 0.",
  );
});
