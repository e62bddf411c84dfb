import { fitEstimate } from "./fit-estimate.js";
import type { FitOptions, FitResult, Kink, LeastSquaresProblem } from "./least-squares.js";

/** Numerical derivatives across a kink would be of neither side. */
type SteepProblem = LeastSquaresProblem & Required<Pick<LeastSquaresProblem, "jacobian">>;

/** How close a residual must be to its kink for a stuck fit to be stuck there. */
const NEAR = 1e-3;

/** Weight of a residual that is held at its kink: it misses it by the inverse square. */
const WEIGHT = 1e4;

/** What the slopes on both sides of a kink leave to rounding. */
const TOLERANCE = 1e-3;

/** How often a fit that was let go may get stuck again. */
const ROUNDS = 10;

/**
 * The minimum that a fit stuck on kinks comes to, or undefined if it comes to none.
 *
 * Where the slope of a residual r jumps up at r = k, chi-square can have its minimum on the surface r = k, and no step that
 * follows one slope arrives. There r^2 is replaced by (W (r - k))^2: the fit stays on the surface, and the force that holds
 * it, in units of the outer slope, W^2 (r - k)/k, tells whether it is a minimum: it lies between the inner slope and the
 * outer one, 1. A kink with another force lets go, and the fit goes on from there.
 * Source: optimality of a piecewise smooth function, 0 in its subdifferential (R.T. Rockafellar, Convex Analysis, 1970;
 * provenance: memory).
 * @param refit - fits a problem from a start, by the same options
 */
export function minimumOnKinks(
  problem: SteepProblem,
  stuck: FitResult,
  options: FitOptions,
  refit: (problem: LeastSquaresProblem, start: readonly number[]) => FitResult,
): FitResult | undefined {
  let at = stuck;
  for (let round = 0; round < ROUNDS; round++) {
    let kinks = (problem.kinks ?? []).filter(
      ({ residual, at: kink }) => Math.abs(at.residuals[residual]! - kink) < NEAR * Math.abs(kink),
    );
    if (kinks.length === 0) return undefined;
    let { parameters } = at;
    while (kinks.length > 0) {
      const settled = refit(heldAt(problem, kinks), parameters);
      if (!settled.verdicts.converged) return undefined;
      parameters = settled.parameters;
      const residuals = [...problem.residuals(parameters)];
      const staying = kinks.filter((kink) => holds(kink, residuals[kink.residual]!));
      if (staying.length === kinks.length) return atMinimum(problem, settled, residuals, options);
      kinks = staying;
    }
    const free = refit({ ...problem, kinks: undefined }, parameters);
    if (free.verdicts.converged) return free;
    if (!(free.chi2 < at.chi2)) return undefined;
    at = free;
  }
  return undefined;
}

/** Whether the force on a residual that is held is one that its kink can exert. */
function holds({ at, innerSlope }: Kink, residual: number): boolean {
  const force = (WEIGHT ** 2 * (residual - at)) / at;
  return force >= innerSlope - TOLERANCE && force <= 1 + TOLERANCE;
}

/** The problem with residuals held at their kinks. */
function heldAt(problem: SteepProblem, kinks: readonly Kink[]): LeastSquaresProblem {
  const { bounds } = problem;
  const others = problem.kinks?.filter((kink) => !kinks.includes(kink));
  const held = new Map(kinks.map(({ residual, at }) => [residual, at]));
  return {
    bounds,
    kinks: others,
    residuals: (parameters) =>
      problem.residuals(parameters).map((r, i) => (held.has(i) ? WEIGHT * (r - held.get(i)!) : r)),
    jacobian: (parameters) =>
      problem.jacobian(parameters).map((row, i) => (held.has(i) ? row.map((d) => WEIGHT * d) : row)),
  };
}

/** What a fit says of the point; errors come from the slopes beyond the kinks. */
function atMinimum(
  problem: SteepProblem,
  { parameters, verdicts }: FitResult,
  residuals: number[],
  { rankTolerance }: FitOptions,
): FitResult {
  const estimate = fitEstimate(problem.jacobian(parameters), residuals, verdicts.atBound, rankTolerance);
  const { covariance, degenerateDirections } = estimate;
  const covariancePositiveDefinite = degenerateDirections.length === 0;
  return {
    parameters,
    residuals,
    chi2: residuals.reduce((sum, r) => sum + r * r, 0),
    covariance,
    verdicts: { ...verdicts, stoppedBy: "kink", degenerateDirections, covariancePositiveDefinite },
  };
}
