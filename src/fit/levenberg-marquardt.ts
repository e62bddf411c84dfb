import { refuse } from "../require.js";
import { curvatureAt, newtonStep } from "./curvature.js";
import { type FitEstimate, fitEstimate } from "./fit-estimate.js";
import { minimumOnKinks } from "./kinks.js";
import {
  checkArguments,
  checkJacobian,
  type FitOptions,
  type FitResult,
  type LeastSquaresProblem,
  type StoppingRule,
} from "./least-squares.js";
import { type DifferenceScheme, numericalJacobian } from "./numerical-jacobian.js";
import { type LinearModel, linearModel, trustRegionStep } from "./trust-region.js";

export type {
  FitOptions,
  FitResult,
  FitVerdicts,
  LeastSquaresProblem,
  StoppingRule,
} from "./least-squares.js";

interface Point {
  readonly parameters: number[];
  readonly residuals: number[];
  readonly chi2: number;
}

/** Chi-square cannot tell two points apart once a step promises less than this part of it. */
const CHI2_RESOLUTION = 1e-15;
/** A change of a residual by less is nothing. */
const NOTHING = 1e-10;
const REFINEMENT_STEPS = 40;
const NEWTON_STEPS = 10;
/** When so many iterations together lower chi-square by less than 1e-4 of it, Newton steps are tried. */
const STALL_ITERATIONS = 20;

const squares = (values: readonly number[]) => values.reduce((sum, value) => sum + value * value, 0);

/**
 * Least-squares fit by the Levenberg-Marquardt method in its trust-region form, with bounds by projection.
 *
 * Scales follow the largest column norms of the Jacobian seen, so the path does not depend on the units of the
 * parameters. Linear algebra is by singular values. Sources: J.J. More, Lecture Notes in Mathematics 630 (1978) 105
 * (trust region, scales); D.M. Bates and D.G. Watts, Technometrics 23 (1981) 179 (relative offset as stopping rule).
 * @param start - one finite number per parameter; moved onto the bounds where it lies outside
 * @throws InputError if the residuals or the Jacobian are not finite at the start (names the entry), if their sizes
 * disagree, or if a bound or an option makes no sense
 */
export function levenbergMarquardt(
  problem: LeastSquaresProblem,
  start: readonly number[],
  options: FitOptions = {},
): FitResult {
  checkArguments(problem, start, options);
  const search = new Search(problem, start, options);
  search.descend();
  if (options.refine ?? true) search.refine();
  const { jacobian } = problem;
  if (search.result().verdicts.stoppedBy === "no descent" && jacobian && !options.allowedPart) {
    const refit = (other: LeastSquaresProblem, from: readonly number[]) =>
      levenbergMarquardt(other, from, options);
    const settled = minimumOnKinks({ ...problem, jacobian }, search.result(), options, refit);
    if (settled !== undefined) return settled;
  }
  search.finish();
  return search.result();
}

/** One fit under way: the point reached, its Jacobian, the scales and the count of calls. */
class Search {
  private point: Point;
  private jacobian: number[][];
  private readonly scales: number[];
  private readonly typicalSizes: readonly number[];
  private iterations = 0;
  private evaluations = 0;
  private linearSolves = 0;
  private ending: "iteration limit" | "no descent" | undefined;
  /** Decomposition and verdict at the present point, until it moves. */
  private linear: LinearModel | undefined;
  private judged: FitResult | undefined;
  /** Length of the last Newton step over that of the parameters, both scaled. */
  private newtonLength = Number.POSITIVE_INFINITY;

  constructor(
    private readonly problem: LeastSquaresProblem,
    start: readonly number[],
    private readonly options: FitOptions,
  ) {
    this.typicalSizes = options.typicalSizes ?? start.map((value) => Math.abs(value) / 100 || 1);
    const point = this.pointAt(this.insideBounds(start));
    const bad = point.residuals.findIndex((value) => !Number.isFinite(value));
    if (bad >= 0) {
      refuse(`levenbergMarquardt: residual ${bad} at the start`, "a finite number", point.residuals[bad]);
    }
    this.point = point;
    this.jacobian = this.jacobianAt(point, "two-point");
    checkJacobian(this.jacobian, point.residuals.length, start.length, this.problem.jacobian !== undefined);
    this.scales = columnNorms(this.jacobian, start.length).map((norm) => (norm > 0 ? norm : 1));
  }

  /** Trust-region iterations until chi-square can tell no more. */
  descend(): void {
    const limit = this.options.maximumIterations ?? 1000;
    let radius = (this.options.initialRadius ?? 1) * (this.scaledLength(this.point.parameters) || 1);
    // Where digits beyond the tolerance are not wanted, the descent ends with it.
    const wanted = this.options.refine === false ? (this.options.offsetTolerance ?? 0) : 0;
    const enough = Math.max(wanted, Math.sqrt(CHI2_RESOLUTION));
    const history: number[] = [];
    while (this.iterations < limit) {
      history.push(this.point.chi2);
      if (history.length > STALL_ITERATIONS && history[0]! - this.point.chi2 <= 1e-4 * this.point.chi2) {
        if (this.newtonSteps()) return;
        history.length = 0;
      } else if (history.length > STALL_ITERATIONS) history.shift();
      const model = this.model();
      if (offset(model, this.point) <= enough || this.point.chi2 === 0) return;
      if (this.gaussNewtonLength(model) <= 1e-13 * this.size()) return;
      this.iterations++;
      const next = this.descentFrom(model, radius);
      if (next === undefined) break;
      radius = next;
    }
    this.ending = this.iterations < limit ? "no descent" : "iteration limit";
  }

  /** Shrinks the trust region until a step lowers chi-square, takes it, and returns the radius for the next. */
  private descentFrom(model: LinearModel, startRadius: number): number | undefined {
    let radius = startRadius;
    const smallest = 1e-16 * this.scaledLength(this.point.parameters);
    while (radius > smallest && radius > Number.MIN_VALUE) {
      const whole = trustRegionStep(model, radius, this.scales.length);
      const part = this.options.allowedPart?.(this.point.parameters, whole.step) ?? 1;
      const step = whole.step.map((value) => part * value);
      const length = part * whole.length;
      const { damping } = whole;
      const trial = this.pointAt(
        this.insideBounds(this.point.parameters.map((value, j) => value + step[j]!)),
      );
      const moved = trial.parameters.map((value, j) => value - this.point.parameters[j]!);
      const predicted = this.point.chi2 - squares(this.linearised(moved));
      const ratio = (this.point.chi2 - trial.chi2) / predicted;
      if (predicted > 0 && ratio > 1e-4 && trial.chi2 < this.point.chi2 && this.moveTo(trial, "two-point")) {
        if (ratio < 0.25) return length / 2;
        return ratio > 0.75 || damping === 0 ? Math.max(radius, 2 * length) : radius;
      }
      // Far outside the region where the linear model holds, or where nothing is finite: shrink faster.
      radius = Math.min(radius, length) * (Number.isFinite(ratio) && ratio > -10 ? 0.4 : 0.1);
    }
    return undefined;
  }

  /**
   * Undamped steps as long as they lower the relative offset, which stays exact where chi-square is rounded.
   *
   * A few steps on two-point derivatives come first where derivatives are numerical: the extrapolated ones are dear.
   */
  refine(): void {
    if (this.ending !== "iteration limit" && !this.problem.jacobian) this.undampedSteps("two-point");
    if (!this.problem.jacobian) {
      const jacobian = this.jacobianAt(this.point, "extrapolated");
      if (jacobian.every((row) => row.every(Number.isFinite))) this.stand(this.point, jacobian);
    }
    if (this.ending === "iteration limit") return;
    this.undampedSteps("extrapolated");
  }

  /** Newton steps if nothing else converged. */
  finish(): void {
    if (this.result().verdicts.stoppedBy === "no descent") this.newtonSteps();
  }

  /**
   * Steps by the true Hessian; says whether they converged.
   *
   * Where an amplitude vanishes, or residuals are large and curved, J^T J misleads and only these arrive.
   */
  private newtonSteps(): boolean {
    if (this.options.allowedPart) return false;
    this.judged = undefined;
    for (let round = 0; round < NEWTON_STEPS; round++) {
      const held = this.heldAtBound();
      const curvature = curvatureAt(this.problem, this.point.parameters, held, this.typicalSizes);
      if (curvature.free.length + held.length < this.scales.length) return false;
      const step = newtonStep(curvature, this.scales.length);
      if (step === undefined) return false;
      this.newtonLength = this.scaledLength(step) / this.size();
      if (this.newtonLength <= (this.options.stepTolerance ?? 1e-10)) return true;
      const trial = this.pointAt(
        this.insideBounds(this.point.parameters.map((value, j) => value + step[j]!)),
      );
      if (!(trial.chi2 <= this.point.chi2 * (1 + 1e-9)) || !this.moveTo(trial, "two-point")) return false;
    }
    return false;
  }

  private undampedSteps(scheme: DifferenceScheme): void {
    for (let round = 0; round < REFINEMENT_STEPS; round++) {
      const model = this.model();
      const before = { point: this.point, jacobian: this.jacobian, offset: offset(model, this.point) };
      if (before.offset === 0) return;
      const { step } = trustRegionStep(model, Number.POSITIVE_INFINITY, this.scales.length);
      const trial = this.pointAt(
        this.insideBounds(this.point.parameters.map((value, j) => value + step[j]!)),
      );
      // Chi-square may only rise by what rounding can explain.
      if (!(trial.chi2 <= this.point.chi2 * (1 + 1e-9)) || !this.moveTo(trial, scheme)) return;
      if (offset(this.model(), this.point) >= 0.9 * before.offset) {
        this.stand(before.point, before.jacobian);
        return;
      }
    }
  }

  /** The result at the point reached, judged with the scales of that point. */
  result(): FitResult {
    this.judged ??= this.judge();
    return this.judged;
  }

  private judge(): FitResult {
    const estimate = fitEstimate(
      this.withoutRounding(),
      this.point.residuals,
      this.heldAtBound(),
      this.options.rankTolerance,
    );
    const stoppedBy = this.stoppingRule(estimate);
    return {
      parameters: this.point.parameters,
      residuals: this.point.residuals,
      chi2: this.point.chi2,
      covariance: estimate.covariance,
      verdicts: {
        converged: stoppedBy !== "iteration limit" && stoppedBy !== "no descent",
        stoppedBy,
        iterations: this.iterations,
        evaluations: this.evaluations,
        linearSolves: this.linearSolves,
        relativeOffset: offset(estimate.model, this.point),
        atBound: this.heldAtBound(),
        covariancePositiveDefinite: estimate.degenerateDirections.length === 0,
        degenerateDirections: estimate.degenerateDirections,
      },
    };
  }

  /** The Jacobian with 0 for columns of rounding alone: no residual changes when a parameter moves as far as there is. */
  private withoutRounding(): number[][] {
    const length = Math.hypot(...this.point.parameters);
    const norms = columnNorms(this.jacobian, this.scales.length);
    const isRounding = norms.map((norm, j) => norm * Math.max(length, this.typicalSizes[j]!) < NOTHING);
    if (!isRounding.includes(true)) return this.jacobian;
    return this.jacobian.map((row) => row.map((d, j) => (isRounding[j] ? 0 : d)));
  }

  private stoppingRule(estimate: FitEstimate): StoppingRule {
    if (this.point.chi2 === 0) return "zero residuals";
    if (offset(estimate.model, this.point) <= (this.options.offsetTolerance ?? 1e-7))
      return "relative offset";
    const step = trustRegionStep(estimate.model, Number.POSITIVE_INFINITY, this.scales.length);
    const scaled = step.step.map((value, j) => value * estimate.scales[j]!);
    const length = Math.hypot(...this.point.parameters.map((value, j) => value * estimate.scales[j]!));
    if (Math.hypot(...scaled) <= (this.options.stepTolerance ?? 1e-10) * length) return "relative step";
    if (this.newtonLength <= (this.options.stepTolerance ?? 1e-10)) return "newton step";
    return this.ending ?? "no descent";
  }

  private pointAt(parameters: number[]): Point {
    this.evaluations++;
    const residuals = [...this.problem.residuals(parameters)];
    if (this.point !== undefined && residuals.length !== this.point.residuals.length) {
      refuse(
        "levenbergMarquardt: residuals",
        `${this.point.residuals.length} at every point`,
        residuals.length,
      );
    }
    const chi2 = squares(residuals);
    return { parameters, residuals, chi2: Number.isFinite(chi2) ? chi2 : Number.POSITIVE_INFINITY };
  }

  private jacobianAt(point: Point, scheme: DifferenceScheme): number[][] {
    if (this.problem.jacobian) return this.problem.jacobian(point.parameters).map((row) => [...row]);
    const { bounds } = this.problem;
    const counted = (parameters: readonly number[]) => {
      this.evaluations++;
      return this.problem.residuals(parameters);
    };
    return numericalJacobian(counted, point.parameters, { scheme, bounds, typicalSizes: this.typicalSizes });
  }

  /** Moves to a point unless the Jacobian is not finite there; says whether it did. */
  private moveTo(point: Point, scheme: DifferenceScheme): boolean {
    const jacobian = this.jacobianAt(point, scheme);
    if (!jacobian.every((row) => row.every(Number.isFinite))) return false;
    this.stand(point, jacobian);
    this.newtonLength = Number.POSITIVE_INFINITY;
    columnNorms(jacobian, this.scales.length).forEach((norm, j) => {
      this.scales[j] = Math.max(this.scales[j]!, norm);
    });
    return true;
  }

  private stand(point: Point, jacobian: number[][]): void {
    this.point = point;
    this.jacobian = jacobian;
    this.linear = undefined;
    this.judged = undefined;
  }

  private model(): LinearModel {
    this.linear ??= this.decomposed();
    return this.linear;
  }

  private decomposed(): LinearModel {
    this.linearSolves++;
    const held = this.heldAtBound();
    const columns = this.scales.map((_, j) => j).filter((j) => !held.includes(j));
    return linearModel(
      this.jacobian,
      this.point.residuals,
      columns,
      columns.map((j) => this.scales[j]!),
    );
  }

  private linearised(step: readonly number[]): number[] {
    return this.point.residuals.map((r, i) =>
      step.reduce((sum, value, j) => sum + value * this.jacobian[i]![j]!, r),
    );
  }

  private gradient(): number[] {
    return this.scales.map((_, j) =>
      this.point.residuals.reduce((sum, r, i) => sum + r * this.jacobian[i]![j]!, 0),
    );
  }

  /** Parameters on a bound with chi-square falling towards the outside. */
  private heldAtBound(): number[] {
    const { bounds } = this.problem;
    if (!bounds) return [];
    const gradient = this.gradient();
    return this.point.parameters.flatMap((value, j) => {
      const { lower, upper } = bounds[j]!;
      const held = (value <= lower && gradient[j]! >= 0) || (value >= upper && gradient[j]! <= 0);
      return held ? [j] : [];
    });
  }

  private insideBounds(parameters: readonly number[]): number[] {
    const { bounds } = this.problem;
    if (!bounds) return [...parameters];
    return parameters.map((value, j) => Math.min(Math.max(value, bounds[j]!.lower), bounds[j]!.upper));
  }

  private scaledLength(vector: readonly number[]): number {
    return Math.hypot(...vector.map((value, j) => value * this.scales[j]!));
  }

  /** Scaled length of the parameters, none counted below its typical size. */
  private size(): number {
    return this.scaledLength(
      this.point.parameters.map((v, j) => Math.max(Math.abs(v), this.typicalSizes[j]!)),
    );
  }

  private gaussNewtonLength(model: LinearModel): number {
    return trustRegionStep(model, Number.POSITIVE_INFINITY, this.scales.length).length;
  }
}

/** |U^T r| / |r|: the part of the residuals that a change of the free parameters could still remove. */
function offset(model: LinearModel, point: Point): number {
  return point.chi2 === 0 ? 0 : Math.hypot(...model.projections) / Math.sqrt(point.chi2);
}

function columnNorms(jacobian: readonly (readonly number[])[], columns: number): number[] {
  const squared = new Array<number>(columns).fill(0);
  for (const row of jacobian) for (let j = 0; j < columns; j++) squared[j]! += row[j]! * row[j]!;
  return squared.map(Math.sqrt);
}
