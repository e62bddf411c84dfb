import { expect, test } from "vitest";
import { curvatureAt, newtonStep } from "../../src/fit/curvature.js";
import { squaredForms } from "./squared-forms.js";

/** Squares of g1 + g2 and g1 - g2 measured as 4 +- 0.1 both: minima at (2, 0) and (0, 2), a saddle at (1, 1). */
const SADDLE = squaredForms(
  [
    [1, 1],
    [1, -1],
  ],
  [4, 4],
  [0.1, 0.1],
);

test("at a saddle one eigenvalue is negative and there is no Newton step, at a minimum all are positive", () => {
  const saddle = curvatureAt(SADDLE, [1, 1]);
  expect(saddle.eigenvalues[0]).toBeLessThan(-0.1);
  expect(saddle.eigenvalues[1]).toBeGreaterThan(0.1);
  expect(newtonStep(saddle, 2)).toBeUndefined();
  expect(curvatureAt(SADDLE, [2, 0]).eigenvalues.every((value) => value > 0.1)).toBe(true);
});

test("the Hessian of chi-square/2 is J^T J plus the residuals times their second derivatives", () => {
  // r = (a b - 3, a^2): H = [[b^2 + 4 a^2 + 2 a^2, a b + (a b - 3)], [.., a^2]] at (1, 2): [[10, 1], [1, 1]].
  const problem = { residuals: ([a, b]: readonly number[]) => [a! * b! - 3, a! * a!] };
  const { eigenvalues, eigenvectors, scales } = curvatureAt(problem, [1, 2]);
  const entry = (j: number, k: number) =>
    eigenvalues.reduce((sum, value, m) => sum + value * eigenvectors[m]![j]! * eigenvectors[m]![k]!, 0) *
    scales[j]! *
    scales[k]!;
  expect(entry(0, 0)).toBeCloseTo(10, 4);
  expect(entry(0, 1)).toBeCloseTo(1, 4);
  expect(entry(1, 1)).toBeCloseTo(1, 4);
});

test("on a paraboloid one Newton step reaches the minimum, held parameters stay", () => {
  const problem = { residuals: ([a, b]: readonly number[]) => [a! + b! - 3, 2 * a! - b!, b! - 1] };
  const step = newtonStep(curvatureAt(problem, [5, 5]), 2)!;
  // Normal equations [[5, -1], [-1, 3]] (a, b) = (3, 4).
  expect(5 + step[0]!).toBeCloseTo(13 / 14, 6);
  expect(5 + step[1]!).toBeCloseTo(23 / 14, 6);
  const held = newtonStep(curvatureAt(problem, [5, 5], [1]), 2)!;
  expect([5 + held[0]!, held[1]]).toEqual([expect.closeTo(8 / 5, 6), 0]);
});
