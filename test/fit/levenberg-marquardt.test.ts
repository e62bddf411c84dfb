import { expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { type LeastSquaresProblem, levenbergMarquardt } from "../../src/fit/levenberg-marquardt.js";
import { seededUniform } from "./squared-forms.js";

const X = Array.from({ length: 12 }, (_, i) => i / 4);
const UNBOUNDED = { lower: Number.NEGATIVE_INFINITY, upper: Number.POSITIVE_INFINITY };

/** A decay a exp(-b x) with errors `sigma`, measured at X with seeded noise. */
function decay(sigma = 0.05, noise = 1): LeastSquaresProblem & { readonly y: number[] } {
  const uniform = seededUniform(7);
  const y = X.map((x) => 2 * Math.exp(-0.8 * x) + noise * 0.05 * uniform());
  return {
    y,
    residuals: ([a, b]) => X.map((x, i) => (a! * Math.exp(-b! * x) - y[i]!) / sigma),
    jacobian: ([a, b]) => X.map((x) => [Math.exp(-b! * x) / sigma, (-a! * x * Math.exp(-b! * x)) / sigma]),
  };
}

function relative(value: number, reference: number): number {
  return Math.abs(value - reference) / Math.abs(reference);
}

test("a straight line has the parameters and the covariance of linear least squares", () => {
  // y = a + b x at x = 0, 1, 2 with sigma 0.5: J^T J = [[12, 12], [12, 20]], inverse [[5, -3], [-3, 3]] / 24.
  const y = [1, 3, 4];
  const fit = levenbergMarquardt(
    { residuals: ([a, b]) => y.map((v, x) => (a! + b! * x - v) / 0.5) },
    [0, 0],
    {
      initialRadius: 100,
    },
  );
  expect(fit.parameters[0]).toBeCloseTo(7 / 6, 10);
  expect(fit.parameters[1]).toBeCloseTo(3 / 2, 10);
  expect(fit.chi2).toBeCloseTo(4 / 6, 10);
  const expected = [5 / 24, -3 / 24, -3 / 24, 3 / 24];
  for (const [k, value] of fit.covariance.flat().entries()) expect(value).toBeCloseTo(expected[k]!, 10);
  expect(fit.verdicts).toMatchObject({ converged: true, atBound: [], covariancePositiveDefinite: true });
});

test("planted parameters come back from exact data, with analytic and with numerical derivatives", () => {
  const problem = decay(0.05, 0);
  for (const p of [problem, { residuals: problem.residuals }]) {
    const { parameters, chi2, verdicts } = levenbergMarquardt(p, [1, 0.1]);
    expect(relative(parameters[0]!, 2)).toBeLessThan(1e-12);
    expect(relative(parameters[1]!, 0.8)).toBeLessThan(1e-12);
    expect(chi2).toBeLessThan(1e-20);
    expect(verdicts.converged).toBe(true);
  }
});

test("doubling all errors doubles the parameter errors and quarters chi-square: the covariance is not rescaled", () => {
  const [one, two] = [levenbergMarquardt(decay(0.05), [1, 0.1]), levenbergMarquardt(decay(0.1), [1, 0.1])];
  expect(relative(one.chi2, 4 * two.chi2)).toBeLessThan(1e-10);
  for (const j of [0, 1]) {
    expect(relative(one.parameters[j]!, two.parameters[j]!)).toBeLessThan(1e-9);
    expect(relative(4 * one.covariance[j]![j]!, two.covariance[j]![j]!)).toBeLessThan(1e-8);
  }
});

test("the units of the parameters change neither the path nor the result", () => {
  const { residuals, jacobian } = decay();
  const units = [1e-6, 1e4];
  const scaled: LeastSquaresProblem = {
    residuals: (p) => residuals(p.map((value, j) => value * units[j]!)),
    jacobian: (p) => jacobian!(p.map((v, j) => v * units[j]!)).map((row) => row.map((v, j) => v * units[j]!)),
  };
  const [a, b] = [
    levenbergMarquardt({ residuals, jacobian: jacobian! }, [1, 0.1]),
    levenbergMarquardt(scaled, [1 / units[0]!, 0.1 / units[1]!]),
  ];
  expect(b.verdicts.iterations).toBe(a.verdicts.iterations);
  for (const j of [0, 1]) {
    expect(relative(b.parameters[j]! * units[j]!, a.parameters[j]!)).toBeLessThan(1e-12);
    expect(relative(b.covariance[j]![j]! * units[j]! ** 2, a.covariance[j]![j]!)).toBeLessThan(1e-10);
  }
});

test("the order of the residuals changes no digit that counts", () => {
  const { residuals } = decay();
  const reversed = levenbergMarquardt({ residuals: (p) => [...residuals(p)].reverse() }, [1, 0.1]);
  const straight = levenbergMarquardt({ residuals }, [1, 0.1]);
  expect(relative(reversed.parameters[1]!, straight.parameters[1]!)).toBeLessThan(1e-11);
  expect(relative(reversed.covariance[1]![1]!, straight.covariance[1]![1]!)).toBeLessThan(1e-9);
});

test("a parameter that wants to cross its bound is held there, named, and the others are fitted beside it", () => {
  const { residuals, jacobian } = decay();
  const bounds = [UNBOUNDED, { lower: 0.9, upper: 2 }];
  const fit = levenbergMarquardt({ residuals, jacobian: jacobian!, bounds }, [1, 1.5]);
  expect(fit.parameters[1]).toBe(0.9);
  expect(fit.verdicts).toMatchObject({ converged: true, atBound: [1], covariancePositiveDefinite: true });
  const alone = levenbergMarquardt({ residuals: ([a]) => residuals([a!, 0.9]) }, [1]);
  expect(relative(fit.parameters[0]!, alone.parameters[0]!)).toBeLessThan(1e-10);
  expect(relative(fit.covariance[0]![0]!, alone.covariance[0]![0]!)).toBeLessThan(1e-9);
  expect([fit.covariance[0]![1], fit.covariance[1]![0], fit.covariance[1]![1]]).toEqual([0, 0, 0]);
});

test("bounds that are not met change nothing, and residuals are never asked outside them", () => {
  const { residuals } = decay();
  const bounds = [
    { lower: 0, upper: 3 },
    { lower: 0, upper: 1 },
  ];
  const asked: number[][] = [];
  const watched = (p: readonly number[]) => {
    asked.push([...p]);
    return residuals(p);
  };
  const inside = levenbergMarquardt({ residuals: watched, bounds }, [0, 0]);
  const free = levenbergMarquardt({ residuals }, [1, 0.1]);
  expect(relative(inside.parameters[1]!, free.parameters[1]!)).toBeLessThan(1e-10);
  expect(inside.verdicts.atBound).toEqual([]);
  for (const [j, { lower, upper }] of bounds.entries()) {
    expect(Math.min(...asked.map((p) => p[j]!))).toBeGreaterThanOrEqual(lower);
    expect(Math.max(...asked.map((p) => p[j]!))).toBeLessThanOrEqual(upper);
  }
});

test("a combination that no residual feels is reported as a unit vector, and the rest is fitted", () => {
  const fit = levenbergMarquardt(
    { residuals: ([a, b, c]) => [a! + 2 * b! - 3, c! - 1, (c! - 1.2) / 2] },
    [1, 5, 0],
  );
  expect(fit.verdicts).toMatchObject({ converged: true, covariancePositiveDefinite: false });
  expect(fit.verdicts.degenerateDirections).toHaveLength(1);
  const [direction] = fit.verdicts.degenerateDirections;
  for (const [j, value] of [2, -1, 0].entries()) expect(direction![j]).toBeCloseTo(value / Math.sqrt(5), 10);
  expect(fit.parameters[2]).toBeCloseTo(1.04, 9);
  expect(fit.covariance[2]![2]).toBeCloseTo(0.8, 9);
  expect(fit.covariance.flat().every(Number.isFinite)).toBe(true);
});

test("a parameter that nothing depends on is a degenerate direction of its own", () => {
  const { verdicts, covariance } = levenbergMarquardt({ residuals: ([a]) => [a! - 1, a! - 2] }, [0, 4]);
  expect(verdicts.degenerateDirections).toEqual([[0, 1]]);
  expect(covariance[1]).toEqual([0, 0]);
});

test("a fit that runs out of iterations is a result that says so, not an exception", () => {
  const fit = levenbergMarquardt(decay(), [50, 5], { maximumIterations: 2 });
  expect(fit.verdicts).toMatchObject({ converged: false, stoppedBy: "iteration limit", iterations: 2 });
  expect(fit.parameters.every(Number.isFinite)).toBe(true);
});

test("a minimum at infinity is never called both converged and determined: exp(-a) falls for ever", () => {
  for (const maximumIterations of [20, 1000]) {
    const fit = levenbergMarquardt({ residuals: ([a]) => [Math.exp(-a!) + 1, 1] }, [0], {
      maximumIterations,
    });
    expect(fit.verdicts.converged && fit.verdicts.covariancePositiveDefinite).toBe(false);
  }
});

test("residuals that are not finite on the way are stepped around", () => {
  // Below 0 the logarithm is NaN; the first undamped step from 5 would land there.
  const fit = levenbergMarquardt({ residuals: ([a]) => [Math.log(a!) + 2] }, [5], { initialRadius: 1000 });
  expect(fit.parameters[0]).toBeCloseTo(Math.exp(-2), 10);
});

test("a minimum where the first derivative of a residual vanishes is reached by the true Hessian", () => {
  const { parameters, chi2, verdicts } = levenbergMarquardt({ residuals: ([a]) => [a! * a! + 3, 1] }, [1.7]);
  expect(verdicts.converged).toBe(true);
  expect(Math.abs(parameters[0]!)).toBeLessThan(1e-6);
  expect(chi2).toBeCloseTo(10, 12);
});

test("arguments that make no sense are refused with the entry named", () => {
  const fine = decay();
  const cases: [() => unknown, string][] = [
    [
      () => levenbergMarquardt({ residuals: () => [0, 1, Number.NaN] }, [1]),
      "levenbergMarquardt: residual 2 at the start: expected a finite number, got NaN.",
    ],
    [
      () => levenbergMarquardt({ ...fine, jacobian: () => X.map(() => [1, Number.NaN]) }, [1, 1]),
      "levenbergMarquardt: jacobian [0][1] at the start: expected a finite number, got NaN.",
    ],
    [
      () => levenbergMarquardt({ ...fine, jacobian: () => [[1, 2]] }, [1, 1]),
      "levenbergMarquardt: jacobian: expected 12 rows, one per residual, got 1.",
    ],
    [
      () => levenbergMarquardt(fine, [1, Number.NaN]),
      "levenbergMarquardt: start 1: expected a finite number, got NaN.",
    ],
    [
      () => levenbergMarquardt({ ...fine, bounds: [UNBOUNDED] }, [1, 1]),
      "levenbergMarquardt: bounds: expected 2 intervals, one per parameter, got 1.",
    ],
    [
      () => levenbergMarquardt({ ...fine, bounds: [UNBOUNDED, { lower: 2, upper: 1 }] }, [1, 1]),
      'levenbergMarquardt: bounds 1: expected lower <= upper, got "[2, 1]".',
    ],
    [
      () => levenbergMarquardt(fine, [1, 1], { maximumIterations: 0.5 }),
      "levenbergMarquardt: maximumIterations: expected an integer >= 0, got 0.5.",
    ],
  ];
  for (const [call, message] of cases) expect(call).toThrow(new InputError(message));
});
