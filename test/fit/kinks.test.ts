import fc from "fast-check";
import { expect, test } from "vitest";
import { asymmetricKink, asymmetricSigma } from "../../src/fit/asymmetric-sigma.js";
import type { LeastSquaresProblem } from "../../src/fit/least-squares.js";
import { levenbergMarquardt } from "../../src/fit/levenberg-marquardt.js";

/** A measurement of a . x: value, lower and upper error. */
type Line = {
  readonly a: readonly number[];
  readonly value: number;
  readonly below: number;
  readonly above: number;
};

/** Linear predictions with asymmetric errors; derivatives by the chain rule, on the inner side where the slope jumps. */
function problemOf(lines: readonly Line[]): LeastSquaresProblem {
  const predicted = ({ a }: Line, x: readonly number[]) => a.reduce((sum, c, j) => sum + c * x[j]!, 0);
  const residual = (line: Line, x: readonly number[]) => {
    const p = predicted(line, x);
    return (p - line.value) / asymmetricSigma(line.value, line.below, line.above, p);
  };
  return {
    residuals: (x) => lines.map((line) => residual(line, x)),
    jacobian: (x) =>
      lines.map((line) => {
        const { value, below, above } = line;
        const distance = predicted(line, x) - value;
        const sigma = asymmetricSigma(value, below, above, value + distance);
        const inside = distance > -below && distance < above;
        const slope = inside ? (above - below) / (above + below) : 0;
        return line.a.map((c) => (c * (1 - (distance * slope) / sigma)) / sigma);
      }),
    kinks: lines.flatMap(({ below, above }, i) => {
      const kink = asymmetricKink(below, above);
      return kink === undefined ? [] : [{ residual: i, ...kink }];
    }),
  };
}

const chi2Of = ({ residuals }: LeastSquaresProblem, x: readonly number[]) =>
  residuals(x).reduce((sum, r) => sum + r * r, 0);

/** No direction leads down: chi2 around x is not lower, but for the 1e-8 by which a kink is missed. */
function isMinimum(problem: LeastSquaresProblem, x: readonly number[]): boolean {
  const here = chi2Of(problem, x);
  const length = 1e-5;
  return Array.from({ length: 360 }, (_, k) => (k * Math.PI) / 180).every((angle) => {
    const step = [length * Math.cos(angle), length * Math.sin(angle)];
    return (
      chi2Of(
        problem,
        x.map((value, j) => value + step[j]!),
      ) >=
      here - 0.02 * length
    );
  });
}

test("a minimum where the slope of one residual jumps is found and called one", () => {
  // At x = 1.5 the first pulls with 0.67 (inside) to 2 (outside) to the left, the second with 1.2 to the right.
  const problem = problemOf([
    { a: [1], value: 1, below: 0.1, above: 0.5 },
    { a: [1], value: 2.7, below: 1, above: 1 },
  ]);
  const { parameters, verdicts, chi2 } = levenbergMarquardt(problem, [0]);
  expect(parameters[0]).toBeCloseTo(1.5, 7);
  expect(chi2).toBeCloseTo(1 + 1.2 ** 2, 7);
  expect(verdicts).toMatchObject({ converged: true, stoppedBy: "kink" });
});

test("without the kinks the same fit does not converge", () => {
  const { kinks: _, ...problem } = problemOf([
    { a: [1], value: 1, below: 0.1, above: 0.5 },
    { a: [1], value: 2.7, below: 1, above: 1 },
  ]);
  expect(levenbergMarquardt(problem, [0]).verdicts.stoppedBy).toBe("no descent");
});

test("a minimum on two kinks at once", () => {
  const problem = problemOf([
    { a: [1, 0], value: 1, below: 0.1, above: 0.5 },
    { a: [0, 1], value: -1, below: 0.8, above: 0.1 },
    { a: [1, 1], value: -0.1, below: 1, above: 1 },
    { a: [1, -1], value: 4.3, below: 1, above: 1 },
  ]);
  // The others pull with -1.2 on x and 0.8 on y; the kinks hold 0.67 to 2 at x = 1.5 and -0.28 to -1.25 at y = -1.8.
  const { parameters, verdicts } = levenbergMarquardt(problem, [0, 0]);
  expect(parameters[0]).toBeCloseTo(1.5, 7);
  expect(parameters[1]).toBeCloseTo(-1.8, 7);
  expect(verdicts.stoppedBy).toBe("kink");
  expect(isMinimum(problem, parameters)).toBe(true);
});

const thousandths = (min: number, max: number) => fc.integer({ min, max }).map((n) => n / 1000);

test("every fit of random asymmetric data converges, and to a minimum", () => {
  const error = thousandths(50, 2000);
  const coefficient = thousandths(-2000, 2000);
  const line = fc.record({
    a: fc.tuple(coefficient, coefficient),
    value: thousandths(-1000, 1000),
    below: error,
    above: error,
  });
  const free = (sign: number): Line => ({ a: [1, sign], value: 0.3, below: 3, above: 3 });
  let kinks = 0;
  fc.assert(
    fc.property(fc.array(line, { minLength: 2, maxLength: 6 }), (lines) => {
      const problem = problemOf([...lines, free(1), free(-1)]);
      const { parameters, verdicts } = levenbergMarquardt(problem, [0.1, -0.2]);
      if (verdicts.stoppedBy === "kink") kinks++;
      return verdicts.converged && isMinimum(problem, parameters);
    }),
    { numRuns: 500, seed: 5 },
  );
  expect(kinks).toBeGreaterThan(3);
});
