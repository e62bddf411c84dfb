import { refuse, requireInteger, requirePositive } from "../require.js";
import type { Bound } from "./numerical-jacobian.js";

/** A sum of squares to be minimised; residuals are (predicted - measured) / error where a covariance is wanted. */
export interface LeastSquaresProblem {
  residuals(parameters: readonly number[]): readonly number[];
  /** Rows = residuals, columns = parameters; numerical derivatives stand in where it is absent. */
  jacobian?(parameters: readonly number[]): readonly (readonly number[])[];
  readonly bounds?: readonly Bound[] | undefined;
  /** Where residuals get steeper at once; they matter only with a Jacobian. */
  readonly kinks?: readonly Kink[] | undefined;
}

/** A residual whose slope jumps up, away from 0, where it has the value `at`: there can be a minimum. */
export interface Kink {
  /** Index of the residual. */
  readonly residual: number;
  /** Not 0. */
  readonly at: number;
  /** Slope before the kink in units of that beyond, 0 to 1. */
  readonly innerSlope: number;
}

/** Choices for one fit; every default is stated. */
export interface FitOptions {
  /** Default 1000. */
  readonly maximumIterations?: number;
  /** Converged when |U^T r| <= this times |r|, U spanning the columns of the Jacobian. Default 1e-7. Given and without `refine`, it also ends the descent. */
  readonly offsetTolerance?: number;
  /** Converged when the scaled Gauss-Newton step is at most this times the scaled parameters. Default 1e-10. */
  readonly stepTolerance?: number;
  /** Singular values of the column-normalised Jacobian below this fraction of the largest are degenerate. Default 1e-9. */
  readonly rankTolerance?: number;
  /** First trust radius in units of the scaled length of the start. Default 1. */
  readonly initialRadius?: number;
  /** Least sizes by which numerical steps are measured, > 0. Default |start| / 100, and 1 where the start is 0. */
  readonly typicalSizes?: readonly number[];
  /** The part of a step, 0 to 1, that may be taken from a point; for a search that must not leave a region. */
  readonly allowedPart?: (parameters: readonly number[], step: readonly number[]) => number;
  /** Ends with undamped steps on extrapolated derivatives, for the last digits. Default true. */
  readonly refine?: boolean;
}

/** The test that ended a fit; `kink` is a minimum where the slope of a residual jumps; the last two mean that it did not converge. */
export type StoppingRule =
  | "zero residuals"
  | "relative offset"
  | "relative step"
  | "newton step"
  | "kink"
  | "iteration limit"
  | "no descent";

/** Separate answers about one fit. */
export interface FitVerdicts {
  readonly converged: boolean;
  readonly stoppedBy: StoppingRule;
  readonly iterations: number;
  /** Calls of `residuals`, those for numerical derivatives included. */
  readonly evaluations: number;
  /** Linearised problems solved; Newton steps by the true Hessian not counted. */
  readonly linearSolves: number;
  /** |U^T r| / |r| at the end; 0 at a stationary point. */
  readonly relativeOffset: number;
  /** Indices of the parameters held at a bound that the fit would like to cross. */
  readonly atBound: readonly number[];
  /** False if a free parameter, or a combination of them, is not determined. */
  readonly covariancePositiveDefinite: boolean;
  /** Unit vectors in the space of the parameters along which no residual changes to first order. */
  readonly degenerateDirections: readonly (readonly number[])[];
}

/** What a fit found, as plain data. A fit that did not converge is a result too: see `verdicts`. */
export interface FitResult {
  readonly parameters: number[];
  readonly residuals: number[];
  /** Sum of the squared residuals. */
  readonly chi2: number;
  /**
   * (J^T J)^-1, never rescaled by chi2/ndf: errors follow from the errors put into the residuals alone. Rows and
   * columns of parameters held at a bound are 0; degenerate directions are left out.
   */
  readonly covariance: number[][];
  readonly verdicts: FitVerdicts;
}

/** Refuses a start, bounds or options that make no sense; throws InputError naming the entry. */
export function checkArguments(
  problem: LeastSquaresProblem,
  start: readonly number[],
  options: FitOptions,
): void {
  start.forEach((value, j) => {
    if (!Number.isFinite(value)) refuse(`levenbergMarquardt: start ${j}`, "a finite number", value);
  });
  const { bounds } = problem;
  if (bounds && bounds.length !== start.length) {
    refuse("levenbergMarquardt: bounds", `${start.length} intervals, one per parameter`, bounds.length);
  }
  bounds?.forEach(({ lower, upper }, j) => {
    if (!(lower <= upper))
      refuse(`levenbergMarquardt: bounds ${j}`, "lower <= upper", `[${lower}, ${upper}]`);
  });
  requireInteger("levenbergMarquardt: maximumIterations", options.maximumIterations ?? 1, 0);
  requirePositive("levenbergMarquardt: initialRadius", options.initialRadius ?? 1);
  requirePositive("levenbergMarquardt: offsetTolerance", options.offsetTolerance ?? 1);
  requirePositive("levenbergMarquardt: stepTolerance", options.stepTolerance ?? 1);
  requirePositive("levenbergMarquardt: rankTolerance", options.rankTolerance ?? 1);
  const sizes = options.typicalSizes;
  if (sizes && sizes.length !== start.length) {
    refuse("levenbergMarquardt: typicalSizes", `${start.length} numbers, one per parameter`, sizes.length);
  }
  for (const [j, size] of sizes?.entries() ?? [])
    requirePositive(`levenbergMarquardt: typicalSizes ${j}`, size);
}

/** Refuses a Jacobian of the wrong shape or with an entry that is not finite; throws InputError naming the entry. */
export function checkJacobian(
  jacobian: readonly (readonly number[])[],
  rows: number,
  columns: number,
  analytic: boolean,
): void {
  const where = analytic ? "levenbergMarquardt: jacobian" : "levenbergMarquardt: numerical derivative";
  if (jacobian.length !== rows) refuse(where, `${rows} rows, one per residual`, jacobian.length);
  jacobian.forEach((row, i) => {
    if (row.length !== columns)
      refuse(`${where} row ${i}`, `${columns} columns, one per parameter`, row.length);
    const bad = row.findIndex((value) => !Number.isFinite(value));
    if (bad >= 0) refuse(`${where} [${i}][${bad}] at the start`, "a finite number", row[bad]);
  });
}
