import { Matrix, SingularValueDecomposition } from "ml-matrix";

/**
 * The least-squares problem linearised at a point: residuals r + J step, decomposed as J D^-1 = U S V^T.
 *
 * D holds one positive scale per column, so that nothing depends on the units of the parameters. Columns left out of
 * `columns` (parameters held at a bound) take no step.
 */
export interface LinearModel {
  /** Parameters that may move, as indices into the full vector. */
  readonly columns: readonly number[];
  /** D, one scale per entry of `columns`. */
  readonly scales: readonly number[];
  /** S, descending, without those below 1e-15 of the largest. */
  readonly singularValues: readonly number[];
  /** U^T r, one entry per singular value kept. */
  readonly projections: readonly number[];
  /** V, rows = `columns`, one column per singular value kept. */
  readonly rightVectors: readonly (readonly number[])[];
  /** The directions left out, each a row of length `columns`, in scaled coordinates. */
  readonly nullVectors: readonly (readonly number[])[];
}

/**
 * The decomposition of a linearised problem by singular values; no normal equations are formed.
 *
 * @param relativeRank - singular values below this fraction of the largest count as zero
 */
export function linearModel(
  jacobian: readonly (readonly number[])[],
  residuals: readonly number[],
  columns: readonly number[],
  scales: readonly number[],
  relativeRank = 1e-15,
): LinearModel {
  if (columns.length === 0) {
    return { columns, scales, singularValues: [], projections: [], rightVectors: [], nullVectors: [] };
  }
  // Rows of zeros complete a matrix with fewer rows than columns, so that V is square and shows the null space.
  const rows = Math.max(residuals.length, columns.length);
  const scaled = new Matrix(rows, columns.length);
  for (let i = 0; i < residuals.length; i++) {
    for (let k = 0; k < columns.length; k++) scaled.set(i, k, jacobian[i]![columns[k]!]! / scales[k]!);
  }
  const svd = new SingularValueDecomposition(scaled);
  const all = svd.diagonal;
  const kept = all.map((_, k) => k).filter((k) => all[k]! > relativeRank * all[0]! && all[k]! > 0);
  const lost = all.map((_, k) => k).filter((k) => !kept.includes(k));
  const u = svd.leftSingularVectors;
  const v = svd.rightSingularVectors;
  return {
    columns,
    scales,
    singularValues: kept.map((k) => all[k]!),
    projections: kept.map((k) => residuals.reduce((sum, r, i) => sum + r * u.get(i, k), 0)),
    rightVectors: columns.map((_, c) => kept.map((k) => v.get(c, k))),
    nullVectors: lost.map((k) => columns.map((_, c) => v.get(c, k))),
  };
}

/** A step in the parameters and its length in scaled coordinates; `damping` is 0 for the Gauss-Newton step. */
export interface TrustStep {
  readonly step: number[];
  readonly length: number;
  readonly damping: number;
}

/**
 * The step that minimises |r + J step| among those of scaled length at most `radius` (10 % tolerance).
 *
 * Source: J.J. More, Lecture Notes in Mathematics 630 (1978) 105, with the secular equation solved on singular values.
 * @param parameterCount - length of the step returned
 */
export function trustRegionStep(model: LinearModel, radius: number, parameterCount: number): TrustStep {
  const { singularValues: s, projections: b } = model;
  const coefficients = (damping: number) => s.map((value, k) => (-value * b[k]!) / (value * value + damping));
  const norm = (damping: number) => Math.hypot(...coefficients(damping));
  let damping = 0;
  if (norm(0) > 1.1 * radius) {
    // 1/norm is nearly linear in the damping, so Newton's method on it converges in a few rounds from below.
    for (let round = 0; round < 50; round++) {
      const c = coefficients(damping);
      const length = Math.hypot(...c);
      if (Math.abs(length - radius) <= 0.1 * radius) break;
      const slope = c.reduce((sum, value, k) => sum + (value * value) / (s[k]! * s[k]! + damping), 0);
      damping = Math.max(damping + ((length - radius) / radius) * ((length * length) / slope), damping / 100);
    }
  }
  const c = coefficients(damping);
  const step = new Array<number>(parameterCount).fill(0);
  model.columns.forEach((column, row) => {
    const scaled = model.rightVectors[row]!.reduce((sum, v, k) => sum + v * c[k]!, 0);
    step[column] = scaled / model.scales[row]!;
  });
  return { step, length: Math.hypot(...c), damping };
}
