import { refuse } from "../require.js";
import { type Bound, numericalJacobian } from "./numerical-jacobian.js";

/** Values of a vector function and their covariance. */
export interface Propagated {
  readonly values: number[];
  readonly covariance: number[][];
}

/** Choices for the propagation. */
export interface PropagateOptions {
  /** Analytic Jacobian, rows = outputs; else numerical derivatives (extrapolated, about 12 digits). */
  jacobian?(parameters: readonly number[]): readonly (readonly number[])[];
  /** Steps for numerical derivatives stay inside; one per parameter. */
  readonly bounds?: readonly Bound[];
  /** Least sizes of the parameters for numerical steps; see `numericalJacobian`. */
  readonly typicalSizes?: readonly number[];
}

/**
 * Linear propagation of a covariance through a vector function: V_out = J V J^T.
 *
 * First order only: where an output is stationary in the parameters (a width at the zero of its amplitude) the error
 * comes out 0 and means nothing.
 * @param covariance - square, one row per parameter, in the order of `parameters`
 * @throws InputError if sizes disagree, or a value or derivative is not finite (names the output)
 */
export function propagate(
  f: (parameters: readonly number[]) => readonly number[],
  parameters: readonly number[],
  covariance: readonly (readonly number[])[],
  options: PropagateOptions = {},
): Propagated {
  const n = parameters.length;
  if (covariance.length !== n || covariance.some((row) => row.length !== n)) {
    const got = `${covariance.length} x ${covariance[0]?.length ?? 0}`;
    refuse("propagate: covariance", `${n} x ${n}, one row per parameter`, got);
  }
  const values = [...f(parameters)];
  const jacobian = options.jacobian?.(parameters) ?? numericalJacobian(f, parameters, options);
  if (jacobian.length !== values.length) {
    refuse("propagate: jacobian", `${values.length} rows, one per output`, jacobian.length);
  }
  for (const [i, row] of jacobian.entries()) {
    if (!Number.isFinite(values[i])) refuse(`propagate: output ${i}`, "a finite number", values[i]);
    if (row.length !== n)
      refuse(`propagate: jacobian row ${i}`, `${n} columns, one per parameter`, row.length);
    const bad = row.findIndex((value) => !Number.isFinite(value));
    if (bad >= 0)
      refuse(`propagate: derivative of output ${i} by parameter ${bad}`, "a finite number", row[bad]);
  }
  const half = jacobian.map((row) => covariance.map((column) => dot(row, column)));
  // Symmetric by construction: the lower half is the upper one.
  const upper = half.map((row, i) => jacobian.map((column, k) => (k < i ? 0 : dot(row, column))));
  return {
    values,
    covariance: upper.map((row, i) => row.map((value, k) => (k < i ? upper[k]![i]! : value))),
  };
}

const dot = (a: readonly number[], b: readonly number[]) =>
  a.reduce((sum, value, i) => sum + value * b[i]!, 0);
