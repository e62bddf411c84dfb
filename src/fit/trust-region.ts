import { singularValues } from "./singular-values.js";

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
  /** S, descending, without those below `relativeRank` of the largest. */
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
  const rows = residuals.length;
  const scaled = new Float64Array(rows * columns.length);
  for (let i = 0; i < rows; i++) {
    const row = jacobian[i]!;
    for (let k = 0; k < columns.length; k++) scaled[k * rows + i] = row[columns[k]!]! / scales[k]!;
  }
  const { values, scaledLeft, right } = singularValues(scaled, rows);
  const isKept = (value: number) => value > relativeRank * values[0]! && value > 0;
  const rank = values.filter(isKept).length;
  const projection = (k: number) => {
    const vector = scaledLeft[k]!;
    let sum = 0;
    for (let i = 0; i < rows; i++) sum += residuals[i]! * vector[i]!;
    return sum / values[k]!;
  };
  return {
    columns,
    scales,
    singularValues: values.slice(0, rank),
    projections: values.slice(0, rank).map((_, k) => projection(k)),
    rightVectors: columns.map((_, row) => right.slice(0, rank).map((vector) => vector[row]!)),
    nullVectors: right.slice(rank).map((vector) => [...vector]),
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
