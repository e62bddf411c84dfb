import { EigenvalueDecomposition, Matrix } from "ml-matrix";
import { type Bound, numericalJacobian } from "./numerical-jacobian.js";

type Vector = readonly number[];

/** Residuals whose curvature is asked for; see `LeastSquaresProblem`. */
interface CurvedProblem {
  residuals(parameters: Vector): readonly number[];
  jacobian?(parameters: Vector): readonly Vector[];
  readonly bounds?: readonly Bound[] | undefined;
}

/** The true Hessian H of chi-square/2 at a point, by its eigenvectors in scaled coordinates. */
export interface Curvature {
  /** Parameters that may move, as indices into the full vector. */
  readonly free: readonly number[];
  /** One positive scale per free parameter; the scaled Hessian has about 1 on its diagonal. */
  readonly scales: readonly number[];
  /** Ascending; negative ones mean a saddle or a maximum. */
  readonly eigenvalues: readonly number[];
  /** Rows, one per eigenvalue, in scaled coordinates. */
  readonly eigenvectors: readonly Vector[];
  /** J^T r over the free parameters, in scaled coordinates. */
  readonly gradient: readonly number[];
}

/**
 * True curvature of chi-square/2, by central differences of its gradient J^T r.
 *
 * Unlike J^T J it tells a minimum from a saddle, and does not vanish where an amplitude does.
 * @param held - parameters kept fixed; those without room for a difference inside their bounds are kept fixed too
 * @param typicalSizes - least sizes of the parameters, > 0; default a hundredth of the largest parameter
 */
export function curvatureAt(
  problem: CurvedProblem,
  parameters: Vector,
  held: readonly number[] = [],
  typicalSizes?: Vector,
): Curvature {
  const largest = Math.max(...parameters.map(Math.abs)) || 1;
  const sizes = parameters.map((value, j) => Math.max(Math.abs(value), typicalSizes?.[j] ?? largest / 100));
  const { bounds } = problem;
  const options = { scheme: "two-point", bounds, typicalSizes: sizes } as const;
  const jacobianAt = (at: Vector) =>
    problem.jacobian?.(at) ?? numericalJacobian((x) => problem.residuals(x), at, options);
  const gradientAt = (at: Vector) => {
    const [residuals, jacobian] = [problem.residuals(at), jacobianAt(at)];
    return at.map((_, j) => residuals.reduce((sum, r, i) => sum + r * jacobian[i]![j]!, 0));
  };
  const jacobian = jacobianAt(parameters);
  const norms = parameters.map((_, j) => Math.hypot(...jacobian.map((row) => row[j]!)));
  // A thousandth of the change that moves one residual by its error, and of the parameter itself.
  const steps = norms.map((norm, j) => 1e-3 * Math.min(1 / norm, sizes[j]!));
  const room = (j: number) => {
    const bound = problem.bounds?.[j];
    return !bound || Math.min(bound.upper - parameters[j]!, parameters[j]! - bound.lower) > steps[j]!;
  };
  const free = parameters.map((_, j) => j).filter((j) => !held.includes(j) && room(j));
  const hessian = free.map((j) => {
    const shifted = (sign: number) => gradientAt(parameters.with(j, parameters[j]! + sign * steps[j]!));
    const [high, low] = [shifted(1), shifted(-1)];
    return free.map((k) => (high[k]! - low[k]!) / (2 * steps[j]!));
  });
  const scales = free.map((j, row) => Math.max(norms[j]!, Math.sqrt(Math.abs(hessian[row]![row]!))) || 1);
  const gradient = gradientAt(parameters);
  return {
    free,
    scales,
    ...eigenvectors(hessian, scales),
    gradient: free.map((j, row) => gradient[j]! / scales[row]!),
  };
}

function eigenvectors(
  hessian: readonly Vector[],
  scales: Vector,
): Pick<Curvature, "eigenvalues" | "eigenvectors"> {
  if (hessian.length === 0) return { eigenvalues: [], eigenvectors: [] };
  const scaled = hessian.map((row, j) =>
    row.map((value, k) => (value + hessian[k]![j]!) / (2 * scales[j]! * scales[k]!)),
  );
  const decomposition = new EigenvalueDecomposition(new Matrix(scaled), { assumeSymmetric: true });
  const values = decomposition.realEigenvalues;
  const order = values.map((_, k) => k).sort((a, b) => values[a]! - values[b]!);
  return {
    eigenvalues: order.map((k) => values[k]!),
    eigenvectors: order.map((k) => decomposition.eigenvectorMatrix.getColumn(k)),
  };
}

/** Turns a vector over the free parameters, in scaled coordinates, into a step in all parameters. */
export function unscaledStep({ free, scales }: Curvature, scaled: Vector, parameterCount: number): number[] {
  const step = new Array<number>(parameterCount).fill(0);
  for (const [row, j] of free.entries()) step[j] = scaled[row]! / scales[row]!;
  return step;
}

/** Eigenvalues below this part of the largest cannot be told from 0, given the errors of differences. */
const FLAT = 1e-7;

/**
 * Newton's step -H^-1 J^T r, in all parameters.
 *
 * @returns undefined unless every curvature is clearly positive: there is then no minimum to step to
 */
export function newtonStep(curvature: Curvature, parameterCount: number): number[] | undefined {
  const { eigenvalues, eigenvectors, gradient } = curvature;
  const flat = FLAT * Math.max(0, ...eigenvalues.map(Math.abs));
  if (!eigenvalues.every((value) => value > flat)) return undefined;
  const scaled = gradient.map(() => 0);
  for (const [k, vector] of eigenvectors.entries()) {
    const part = vector.reduce((sum, value, row) => sum + value * gradient[row]!, 0) / eigenvalues[k]!;
    for (const [row, value] of vector.entries()) scaled[row]! -= part * value;
  }
  return unscaledStep(curvature, scaled, parameterCount);
}
