import { type LinearModel, linearModel } from "./trust-region.js";

/** Covariance and degenerate directions read off a Jacobian. */
export interface FitEstimate {
  /** (J^T J)^-1 over the free parameters; rows and columns of held ones are 0. */
  readonly covariance: number[][];
  /** Unit vectors in the space of the parameters that change no residual to first order. */
  readonly degenerateDirections: number[][];
  /** Column norms of the Jacobian, 1 where a column is 0; one per parameter. */
  readonly scales: number[];
  /** The decomposition it was read from, over the free parameters. */
  readonly model: LinearModel;
}

/**
 * Covariance (J^T J)^-1 and degenerate directions, by singular values of the Jacobian with columns of norm 1.
 *
 * Directions with a singular value below `rankTolerance` times the largest are degenerate: they are returned and left
 * out of the covariance, which then is that of the determined combinations only.
 * @param held - indices of the parameters held fixed
 * @param rankTolerance - default 1e-9
 */
export function fitEstimate(
  jacobian: readonly (readonly number[])[],
  residuals: readonly number[],
  held: readonly number[],
  rankTolerance = 1e-9,
): FitEstimate {
  const count = jacobian[0]?.length ?? 0;
  const scales = Array.from({ length: count }, (_, j) => Math.hypot(...jacobian.map((row) => row[j]!)) || 1);
  const free = scales.map((_, j) => j).filter((j) => !held.includes(j));
  const model = linearModel(
    jacobian,
    residuals,
    free,
    free.map((j) => scales[j]!),
    rankTolerance,
  );
  const covariance = scales.map(() => scales.map(() => 0));
  free.forEach((j, row) => {
    free.forEach((k, column) => {
      const scaled = model.singularValues.reduce(
        (sum, s, m) => sum + (model.rightVectors[row]![m]! / s) * (model.rightVectors[column]![m]! / s),
        0,
      );
      covariance[j]![k] = scaled / (scales[j]! * scales[k]!);
    });
  });
  return { covariance, degenerateDirections: degenerateDirections(model, count), scales, model };
}

/** The null directions in the parameters themselves, of length 1, the largest entry positive. */
function degenerateDirections(model: LinearModel, count: number): number[][] {
  return model.nullVectors.map((vector) => {
    const direction = new Array<number>(count).fill(0);
    vector.forEach((value, row) => {
      direction[model.columns[row]!] = value / model.scales[row]!;
    });
    const largest = direction.reduce((most, value) => (Math.abs(value) > Math.abs(most) ? value : most), 0);
    const length = Math.hypot(...direction) * Math.sign(largest);
    return direction.map((value) => value / length);
  });
}
