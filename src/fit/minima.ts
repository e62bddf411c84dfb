import { requireInteger, requirePositive } from "../require.js";
import { chiSquareProbability } from "./chi-square.js";
import { type CouplingBlock, flipBlock, standsInReportedSign } from "./coupling-blocks.js";
import { curvatureAt, unscaledStep } from "./curvature.js";
import {
  type FitResult,
  type FitVerdicts,
  type LeastSquaresProblem,
  levenbergMarquardt,
} from "./levenberg-marquardt.js";
import type { MinimaProblem } from "./minima-problem.js";
import { type MinimaStart, minimaStarts } from "./minima-starts.js";
import { sameValley } from "./valley.js";

type Vector = readonly number[];

export type { MinimaProblem } from "./minima-problem.js";

/** One minimum of chi-square. */
export interface Minimum {
  /** Each block of couplings in the sign in which its first coupling that is not negligible is positive. */
  readonly parameters: number[];
  readonly chi2: number;
  /** Residuals minus parameters, not counting degenerate directions; never below 0. */
  readonly ndf: number;
  /** Of a larger chi-square by chance; 1 where `ndf` is 0. */
  readonly probability: number;
  /** (J^T J)^-1, not rescaled. */
  readonly covariance: number[][];
  readonly verdicts: FitVerdicts;
  readonly residuals: number[];
}

/** Choices for the search. */
export interface MinimaOptions {
  /** Minima this far above the best are listed, the others counted. Default 9; Infinity lists all. */
  readonly deltaChi2?: number;
  /** Whether to start beside every wall of each cell too; slower, and finds minima in cells that hold several. Default true. */
  readonly walls?: boolean;
  /** Refuse when more starts than this could be needed. Default 20000. */
  readonly maximumStarts?: number;
  /** Stops between two fits, by throwing the signal's reason. */
  readonly signal?: AbortSignal;
  /** Called after each fit. */
  readonly onProgress?: (done: number, total: number) => void;
}

/** Every distinct minimum found. */
export interface Minima {
  /** Best first. If no fit converged: the best of them, with verdicts that say so. */
  readonly minima: Minimum[];
  /** How many more there are above `deltaChi2`. */
  readonly otherMinima: number;
  /** Fits made from the enumerated starts. */
  readonly starts: number;
  /** How many of them did not converge. */
  readonly unconverged: number;
}

/** Two points are one minimum when every block of couplings, and every nuisance parameter, agrees to this part. */
const SAME_MINIMUM = 1e-3;
/** Scaled curvature below which a stationary point is no minimum; rounding and differences stay far below it. */
const SADDLE_CURVATURE = -1e-4;

/**
 * Every distinct minimum of chi-square for observables that feel real amplitudes l_k . g up to their signs.
 *
 * Each pattern of signs that some g can have is a cell of the hyperplanes l_k . g = 0; there are at most
 * sum_(i<p) 2 C(n-1, i) of them, not 2^n. In one cell of each pair +- fits begin at the linear least-squares solution
 * for its signs, deep inside, and beside each wall; the results are gathered into distinct minima. Stationary points
 * that are no minima are left downhill. Where a direction is degenerate its valley is listed once, with the direction in
 * the verdicts. Not proven to be complete, since chi-square need not be convex in a cell; tested against random starts.
 * @throws LimitError beforehand if the starts could exceed `maximumStarts`
 * @throws InputError if the problem does not fit together, or a residual is not finite at a start
 */
export function findMinima(problem: MinimaProblem, options: MinimaOptions = {}): Minima {
  const deltaChi2 = options.deltaChi2 ?? 9;
  requirePositive("findMinima: deltaChi2", Math.min(deltaChi2, Number.MAX_VALUE));
  requireInteger("findMinima: maximumStarts", options.maximumStarts ?? 20_000, 1);
  const all = minimaStarts(problem, options.maximumStarts ?? 20_000);
  const { blocks } = all;
  const starts = options.walls === false ? all.starts.filter(({ kind }) => kind !== "wall") : all.starts;
  const gathering = new Gathering(problem, blocks, starts);
  for (const [done, start] of starts.entries()) {
    options.signal?.throwIfAborted();
    const fit = fitFrom(problem, start);
    if (fit) gathering.add(fit);
    options.onProgress?.(done + 1, starts.length);
  }
  const found = gathering.finished();
  const limit = (found[0]?.chi2 ?? 0) + deltaChi2;
  const minima = found.filter((fit, rank) => rank === 0 || fit.chi2 <= limit).map(asMinimum);
  return {
    minima,
    otherMinima: found.length - minima.length,
    starts: starts.length,
    unconverged: gathering.unconverged,
  };
}

/**
 * The fit from one start. From inside a cell it first goes without crossing a wall; if a wall stops it, only the start
 * deep inside goes on freely, since the cells beyond have starts of their own.
 */
function fitFrom(problem: MinimaProblem, { parameters, kind }: MinimaStart): FitResult | undefined {
  if (kind === "linear") return quickFit(problem, parameters);
  const settled = levenbergMarquardt(problem, parameters, {
    ...QUICK_FIT,
    maximumIterations: 60,
    allowedPart: insideCell(problem, parameters),
  });
  if (settled.verdicts.converged) return settled;
  return kind === "deep" ? quickFit(problem, settled.parameters) : undefined;
}

/** The part of a step that stays inside a cell: nine tenths of the way to its nearest wall, 0 once beside one. */
function insideCell(problem: MinimaProblem, start: Vector) {
  const value = (form: Vector, at: Vector) => form.reduce((sum, entry, j) => sum + entry * at[j]!, 0);
  const distances = problem.forms.map((form) => Math.abs(value(form, start)));
  return (parameters: Vector, step: Vector) => {
    let part = 1;
    for (const [k, form] of problem.forms.entries()) {
      const [here, change] = [value(form, parameters), value(form, step)];
      if (here * change >= 0) continue;
      if (Math.abs(here) < 1e-3 * distances[k]!) return 0;
      part = Math.min(part, (-0.9 * here) / change);
    }
    return part;
  };
}

/** No refinement of the last digits; the small first radius keeps a fit near its start at first. */
const QUICK_FIT = { refine: false, initialRadius: 0.1 } as const;

function quickFit(problem: MinimaProblem, start: Vector): FitResult {
  return levenbergMarquardt(problem, start, { ...QUICK_FIT, maximumIterations: 300 });
}

/** The minimum that a full fit reaches from one point, with all its digits; see its verdicts for whether it is one. */
export function minimumNear(problem: LeastSquaresProblem, start: Vector): Minimum {
  return asMinimum(levenbergMarquardt(problem, start, { initialRadius: 0.1 }));
}

function asMinimum(fit: FitResult): Minimum {
  const { parameters, chi2, covariance, verdicts, residuals } = fit;
  const determined = parameters.length - verdicts.degenerateDirections.length;
  const ndf = Math.max(0, residuals.length - determined);
  return {
    parameters,
    chi2,
    ndf,
    probability: chiSquareProbability(chi2, ndf),
    covariance,
    verdicts,
    residuals,
  };
}

/** The distinct minima met so far. */
class Gathering {
  private readonly distinct: FitResult[] = [];
  /** Of each block: its largest size among the starts; a block a million times smaller is 0. */
  private readonly typicalSizes: readonly number[];
  private best: FitResult | undefined;
  unconverged = 0;

  constructor(
    private readonly problem: MinimaProblem,
    private readonly blocks: readonly CouplingBlock[],
    starts: readonly MinimaStart[],
  ) {
    this.typicalSizes = blocks.map((block) =>
      starts.reduce((most, { parameters }) => Math.max(most, blockSize(parameters, block)), 0),
    );
  }

  /** Keeps a fit's result if it is a minimum not met before; from a saddle, goes on downhill. */
  add(fit: FitResult, descents = 3): void {
    if (!fit.verdicts.converged) {
      this.unconverged++;
      if (this.best === undefined || fit.chi2 < this.best.chi2) this.best = fit;
      return;
    }
    const turned = this.inReportedSigns(fit);
    if (this.distinct.some((other) => this.same(other, turned))) return;
    const curvature = curvatureAt(this.problem, turned.parameters, turned.verdicts.atBound);
    if (!(curvature.eigenvalues[0]! < SADDLE_CURVATURE)) {
      this.distinct.push(turned);
      return;
    }
    if (descents === 0) return;
    const downhill = unscaledStep(curvature, curvature.eigenvectors[0]!, turned.parameters.length);
    for (const side of [0.3, -0.3]) {
      const start = turned.parameters.map((value, j) => value + side * downhill[j]!);
      this.add(quickFit(this.problem, start), descents - 1);
    }
  }

  /** The distinct minima with all their digits, best first; refined fits that coincide are joined. */
  finished(): FitResult[] {
    const refined: FitResult[] = [];
    for (const rough of this.distinct) {
      const fit = this.inReportedSigns(
        levenbergMarquardt(this.problem, rough.parameters, { initialRadius: 0.01 }),
      );
      if (!refined.some((other) => this.same(other, fit))) refined.push(fit);
    }
    if (refined.length === 0 && this.best) return [this.best];
    return refined.sort((a, b) => a.chi2 - b.chi2 || compareVectors(a.parameters, b.parameters));
  }

  /**
   * The same minimum with every block in its reported sign.
   *
   * Nuisance parameters may have to change with the sign (an amplitude that adds to the block's), so a new fit is made
   * from the turned point if chi-square differs there. A block whose sign chi-square feels is left as it is.
   */
  private inReportedSigns(fit: FitResult): FitResult {
    let result = fit;
    for (const block of this.blocks) {
      if (standsInReportedSign(result.parameters, block)) continue;
      const turned = flipBlock(result.parameters, block);
      const mirrored =
        this.mirrored(result, turned) ??
        this.fitNear(turned, result.chi2) ??
        this.fitNear(this.withNuisanceStarts(turned), result.chi2);
      if (mirrored && standsInReportedSign(mirrored.parameters, block)) result = mirrored;
    }
    return result;
  }

  /** The fit at its mirror image, if chi-square is the same there: signs turn, sizes stay. */
  private mirrored(fit: FitResult, parameters: number[]): FitResult | undefined {
    if (!this.allowed(parameters)) return undefined;
    const residuals = this.problem.residuals(parameters);
    const chi2 = residuals.reduce((sum, value) => sum + value * value, 0);
    if (!(Math.abs(chi2 - fit.chi2) <= 1e-9 * (1 + fit.chi2))) return undefined;
    const sign = parameters.map((value, j) => (value === fit.parameters[j] ? 1 : -1));
    const turn = (vector: Vector) => vector.map((value, j) => sign[j]! * value);
    const degenerateDirections = fit.verdicts.degenerateDirections.map(turn);
    return {
      parameters,
      residuals,
      chi2,
      covariance: fit.covariance.map((row, j) => turn(row).map((value) => sign[j]! * value)),
      verdicts: { ...fit.verdicts, degenerateDirections },
    };
  }

  private fitNear(start: Vector, chi2: number): FitResult | undefined {
    if (!this.allowed(start)) return undefined;
    const fit = levenbergMarquardt(this.problem, start, { ...QUICK_FIT, initialRadius: 0.01 });
    return fit.verdicts.converged && Math.abs(fit.chi2 - chi2) <= 1e-6 * (1 + chi2) ? fit : undefined;
  }

  private allowed(parameters: Vector): boolean {
    const { bounds } = this.problem;
    return !bounds || parameters.every((v, j) => v >= bounds[j]!.lower && v <= bounds[j]!.upper);
  }

  private withNuisanceStarts(parameters: Vector): number[] {
    return [...parameters.slice(0, this.problem.couplingCount), ...this.problem.nuisanceStarts];
  }

  private same(a: FitResult, b: FitResult): boolean {
    if (Math.abs(a.chi2 - b.chi2) > 1e-5 * (1 + Math.min(a.chi2, b.chi2))) return false;
    const apart = (j: number) => a.parameters[j]! - b.parameters[j]!;
    const closeBlocks = this.blocks.every((block, k) => {
      const sizes = [
        blockSize(a.parameters, block),
        blockSize(b.parameters, block),
        1e-3 * this.typicalSizes[k]!,
      ];
      return Math.hypot(...block.couplings.map(apart)) <= SAME_MINIMUM * Math.max(...sizes);
    });
    const closeNuisances = a.parameters.every((value, j) => {
      const size = Math.max(Math.abs(value), Math.abs(b.parameters[j]!), Math.sqrt(a.covariance[j]![j]!));
      return j < this.problem.couplingCount || Math.abs(apart(j)) <= SAME_MINIMUM * size;
    });
    return (closeBlocks && closeNuisances) || sameValley(this.problem, a, b, this.blocks);
  }
}

function blockSize(parameters: Vector, block: CouplingBlock): number {
  return Math.hypot(...block.couplings.map((j) => parameters[j]!));
}

function compareVectors(a: Vector, b: Vector): number {
  const at = a.findIndex((value, j) => value !== b[j]);
  return at < 0 ? 0 : a[at]! - b[at]!;
}
