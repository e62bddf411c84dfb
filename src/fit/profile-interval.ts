import { EigenvalueDecomposition, Matrix } from "ml-matrix";
import { requirePositive } from "../require.js";
import { type FitResult, type LeastSquaresProblem, levenbergMarquardt } from "./levenberg-marquardt.js";
import { maximumOnSphere } from "./quadratic-on-sphere.js";

type Vector = readonly number[];

/** A number computed from the parameters, with its derivatives. */
export type GradedFunction = (parameters: Vector) => { readonly value: number; readonly gradient: Vector };

/** One end of an interval. */
export interface ProfileEnd {
  /** Infinite where the end is open, undefined where none was found. */
  readonly value: number | undefined;
  /**
   * `crossed`: the least chi-square with this value is the wanted one. `least`: the function's least possible value is
   * still inside. `open`: chi-square never gets that high. `not found`: the fits did not settle, or met a lower minimum.
   */
  readonly kind: "crossed" | "least" | "open" | "not found";
}

/** Values of a function that chi-square allows. */
export interface ProfileInterval {
  readonly lower: ProfileEnd;
  readonly upper: ProfileEnd;
}

/** What is needed of a minimum. */
export interface ProfiledMinimum extends Pick<FitResult, "parameters" | "chi2" | "covariance"> {
  readonly verdicts: Pick<FitResult["verdicts"], "degenerateDirections">;
}

/** Choices for a profile. */
export interface ProfileOptions {
  /** Least value the function can have at all, such as 0 for a width. */
  readonly least?: number;
}

/** The penalty holds the function ten times as tightly as chi-square itself does. */
const STIFFNESS = 0.1;
/** A penalty this tight tells whether the least possible value can be reached. */
const STIFF = 1e-4;
const MAXIMUM_FITS = 40;
/** Relative agreement of sqrt(delta chi-square); the slope then mends what is left, to its square. */
const CLOSE = 3e-4;
/** Where chi-square has kinks fits stop a little beside the profile: this relative width of the bracket must do. */
const NARROW = 2e-3;
/** Beyond so many times the expected width of the interval an end counts as open. */
const FAR = 1e4;

/**
 * Interval of all values of a function f whose profile (the least chi-square with that value) is at most `deltaChi2`
 * above the minimum: 1 for 68.3 %, 4 for 95.4 %.
 *
 * Each end is found by fits with one more residual (f - t)/s. Whatever t and s are, such a fit ends on the profile
 * itself, at f* with the slope d chi2/df = 2 (t - f*)/s^2, so t is led to the wanted height by Newton's method. The first
 * start is where the quadratic model of f is largest on the ellipsoid of the covariance: it works where f is stationary
 * in the parameters, as a width at the zero of its amplitude is, and linear errors vanish.
 * Source of the interval: S.S. Wilks, Ann. Math. Stat. 9 (1938) 60; F. James and M. Roos, Comput. Phys. Commun. 10 (1975)
 * 343. Only the region connected with this minimum is seen.
 * @param minimum - a minimum of the problem, with its covariance not rescaled
 * @param deltaChi2 - > 0
 * @throws InputError if `deltaChi2` is not positive
 */
export function profileInterval(
  problem: LeastSquaresProblem,
  minimum: ProfiledMinimum,
  f: GradedFunction,
  deltaChi2: number,
  options: ProfileOptions = {},
): ProfileInterval {
  requirePositive("profileInterval: deltaChi2", deltaChi2);
  if (!isDetermined(minimum, f(minimum.parameters).gradient)) {
    const lower: ProfileEnd =
      options.least === undefined
        ? { value: Number.NEGATIVE_INFINITY, kind: "open" }
        : { value: options.least, kind: "least" };
    return { lower, upper: { value: Number.POSITIVE_INFINITY, kind: "open" } };
  }
  const height = Math.sqrt(deltaChi2);
  const shape = shapeAt(minimum, f, height);
  if (shape.variation === 0) {
    const value = f(minimum.parameters).value;
    return { lower: { value, kind: "crossed" }, upper: { value, kind: "crossed" } };
  }
  const profile = new Profile(problem, minimum, f, shape, height, options.least);
  return { lower: profile.end(-1), upper: profile.end(1) };
}

/** Whether no direction that the data leave free changes the function. */
function isDetermined({ verdicts }: ProfiledMinimum, gradient: Vector): boolean {
  return verdicts.degenerateDirections.every((direction) => {
    const terms = direction.map((value, j) => value * gradient[j]!);
    const sum = terms.reduce((total, term) => total + term, 0);
    return Math.abs(sum) <= 1e-6 * terms.reduce((total, term) => total + Math.abs(term), 0);
  });
}

/** A function to second order around a minimum, in coordinates u where chi-square is u^2: parameters = minimum + S u. */
interface Shape {
  readonly axes: readonly Vector[];
  readonly gradient: Vector;
  readonly hessian: readonly Vector[];
  /** How much the function can vary over the ellipsoid, at most; 0 if not at all. */
  readonly variation: number;
}

function shapeAt({ parameters, covariance }: ProfiledMinimum, f: GradedFunction, height: number): Shape {
  const axes = principalAxes(covariance);
  const along = (gradient: Vector) => axes.map((axis) => dot(axis, gradient));
  const gradient = along(f(parameters).gradient);
  const step = 1e-3;
  const hessian = axes.map((axis) => {
    const at = (sign: number) => along(f(moved(parameters, axis, sign * step)).gradient);
    const [high, low] = [at(1), at(-1)];
    return high.map((value, k) => (value - low[k]!) / (2 * step));
  });
  const symmetric = hessian.map((row, j) => row.map((value, k) => (value + hessian[k]![j]!) / 2));
  const curvature = Math.hypot(...symmetric.flat());
  const variation = height * Math.hypot(...gradient) + (height * height * curvature) / 2;
  return { axes, gradient, hessian: symmetric, variation };
}

/** Rows s_k with sum of s_k s_k^T the covariance; directions without variance left out. */
function principalAxes(covariance: readonly Vector[]): number[][] {
  const sigma = covariance.map((row, j) => Math.sqrt(row[j]!) || 1);
  const correlation = covariance.map((row, j) => row.map((value, k) => value / (sigma[j]! * sigma[k]!)));
  const { realEigenvalues, eigenvectorMatrix } = new EigenvalueDecomposition(new Matrix(correlation), {
    assumeSymmetric: true,
  });
  return realEigenvalues.flatMap((value, k) => {
    if (value <= 1e-12) return [];
    return [eigenvectorMatrix.getColumn(k).map((entry, j) => entry * sigma[j]! * Math.sqrt(value))];
  });
}

/** A point of the profile: the function's value there, sqrt(chi2 - minimum), and the slope of that against the value. */
interface ProfilePoint {
  readonly parameters: Vector;
  readonly value: number;
  readonly height: number;
  readonly slope: number;
}

class Profile {
  private readonly value: number;

  constructor(
    private readonly problem: LeastSquaresProblem,
    private readonly minimum: ProfiledMinimum,
    private readonly f: GradedFunction,
    private readonly shape: Shape,
    private readonly height: number,
    private readonly least: number | undefined,
  ) {
    this.value = f(minimum.parameters).value;
  }

  /** The end below (-1) or above (1) the value at the minimum. */
  end(side: 1 | -1): ProfileEnd {
    const { gradient, hessian, variation } = this.shape;
    const u = maximumOnSphere(
      gradient.map((value) => side * value),
      hessian.map((row) => row.map((value) => side * value)),
      this.height,
    );
    const start = this.startAlong(side, u);
    if (side < 0 && this.least !== undefined && this.reachesLeast())
      return { value: this.least, kind: "least" };
    const expected =
      dot(gradient, u) +
      dot(
        u,
        hessian.map((row) => dot(row, u)),
      ) /
        2;
    const first = Math.max(side * expected, 0.1 * variation);
    return this.crossing(side, start, first);
  }

  /** The point at u, or nearer to the minimum where the function there is not on the side it should be. */
  private startAlong(side: 1 | -1, u: Vector): Vector {
    const { parameters } = this.minimum;
    for (let part = 1; part > 0.01; part /= 2) {
      const start = this.shape.axes.reduce<Vector>(
        (at, axis, k) => moved(at, axis, part * u[k]!),
        parameters,
      );
      if (side * (this.f(start).value - this.value) > 0) return start;
    }
    return parameters;
  }

  /** Whether the function has its least possible value somewhere in the region. */
  private reachesLeast(): boolean {
    const { variation } = this.shape;
    if (this.value - this.least! > 2 * variation) return false;
    const point = this.pointNear(this.minimum.parameters, this.least!, STIFF * variation);
    return point.height < this.height && point.value - this.least! < 0.01 * variation;
  }

  /** Newton's method for height(value) = wanted, kept between the values known to be inside and outside. */
  private crossing(side: 1 | -1, start: Vector, first: number): ProfileEnd {
    const softness = STIFFNESS * this.shape.variation;
    let from = start;
    let inside = 0;
    let outside = Number.POSITIVE_INFINITY;
    let distance = first;
    let slope = this.height / first;
    for (let fit = 0; fit < MAXIMUM_FITS; fit++) {
      const pull = softness * softness * this.height * slope;
      const point = this.pointNear(from, this.value + side * (distance + pull), softness);
      const reached = side * (point.value - this.value);
      if (!Number.isFinite(point.slope) || side * point.slope <= 0) break;
      from = point.parameters;
      slope = side * point.slope;
      const missing = (this.height - point.height) / slope;
      if (Math.abs(point.height - this.height) < CLOSE * this.height)
        return { value: this.value + side * (reached + missing), kind: "crossed" };
      if (missing > 0) inside = Math.max(inside, reached);
      else outside = Math.min(outside, reached);
      if (outside - inside < NARROW * outside)
        return { value: this.value + (side * (inside + outside)) / 2, kind: "crossed" };
      distance = Math.min(reached + missing, 4 * Math.max(reached, first));
      if (!(distance > inside && distance < outside)) {
        if (outside === Number.POSITIVE_INFINITY) distance = 2 * Math.max(inside, first);
        else distance = (inside + outside) / 2;
      }
      if (distance > FAR * this.shape.variation)
        return { value: side * Number.POSITIVE_INFINITY, kind: "open" };
    }
    return { value: undefined, kind: "not found" };
  }

  /** The point of the profile that a fit with the residual (f - target)/softness reaches. */
  private pointNear(start: Vector, target: number, softness: number): ProfilePoint {
    const { problem, f } = this;
    const penalised: LeastSquaresProblem = {
      residuals: (at) => [...problem.residuals(at), (f(at).value - target) / softness],
      bounds: problem.bounds,
      kinks: problem.kinks,
    };
    if (problem.jacobian) {
      penalised.jacobian = (at) => [
        ...problem.jacobian!(at),
        f(at).gradient.map((derivative) => derivative / softness),
      ];
    }
    const { parameters, residuals } = levenbergMarquardt(penalised, start, {
      refine: false,
      initialRadius: 0.1,
      maximumIterations: 200,
    });
    const penalty = residuals.at(-1)!;
    const excess = residuals.slice(0, -1).reduce((sum, r) => sum + r * r, 0) - this.minimum.chi2;
    // Below the minimum by more than rounding: the fit has run into another, lower one.
    const lower = excess < -1e-3 * (1 + this.minimum.chi2);
    const height = lower ? Number.NaN : Math.sqrt(Math.max(0, excess));
    return {
      parameters,
      value: target + penalty * softness,
      height,
      slope: -penalty / (softness * height),
    };
  }
}

function moved(at: Vector, direction: Vector, length: number): number[] {
  return at.map((value, j) => value + length * direction[j]!);
}

function dot(a: Vector, b: Vector): number {
  let sum = 0;
  for (let j = 0; j < a.length; j++) sum += a[j]! * b[j]!;
  return sum;
}
