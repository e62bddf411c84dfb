import { expect, test } from "vitest";
import { maximumOnSphere } from "../../src/fit/quadratic-on-sphere.js";
import { seededUniform } from "./squared-forms.js";

const value = (g: readonly number[], h: readonly (readonly number[])[], u: readonly number[]) =>
  u.reduce((sum, x, j) => sum + x * (g[j]! + u.reduce((inner, y, k) => inner + (h[j]![k]! * y) / 2, 0)), 0);

test("no random point of the sphere is higher, in 40 problems of 1 to 5 dimensions (seed 3)", () => {
  const uniform = seededUniform(3);
  for (let round = 0; round < 40; round++) {
    const n = 1 + (round % 5);
    const g = Array.from({ length: n }, () => (round % 4 === 0 ? 0 : uniform()));
    const half = Array.from({ length: n }, () => Array.from({ length: n }, uniform));
    const h = half.map((row, j) => row.map((x, k) => x + half[k]![j]!));
    const radius = 0.5 + (round % 3);
    const best = maximumOnSphere(g, h, radius);
    expect(Math.hypot(...best)).toBeCloseTo(radius, 9);
    const top = value(g, h, best);
    for (let k = 0; k < 150; k++) {
      const direction = Array.from({ length: n }, uniform);
      const scale = radius / Math.hypot(...direction);
      const other = direction.map((x) => scale * x);
      expect(value(g, h, other)).toBeLessThan(top + 1e-9);
    }
  }
});

test("a gradient of 0 leads along the uppermost eigenvector, no curvature along the gradient", () => {
  expect(
    maximumOnSphere(
      [0, 0],
      [
        [1, 0],
        [0, 2],
      ],
      3,
    ).map(Math.abs),
  ).toEqual([0, 3]);
  const [x, y] = maximumOnSphere(
    [3, -4],
    [
      [0, 0],
      [0, 0],
    ],
    1,
  );
  expect(x).toBeCloseTo(0.6, 9);
  expect(y).toBeCloseTo(-0.8, 9);
});
