/** A value with its derivatives with respect to all parameters of the model. */
export interface Graded {
  readonly value: number;
  readonly gradient: readonly number[];
}

/** factor times a. */
export function scaled(a: Graded, factor: number): Graded {
  return { value: factor * a.value, gradient: a.gradient.map((d) => factor * d) };
}

/** a b. */
export function times(a: Graded, b: Graded): Graded {
  return {
    value: a.value * b.value,
    gradient: a.gradient.map((d, k) => d * b.value + a.value * b.gradient[k]!),
  };
}

/** a/b; infinite where b vanishes, 0 for 0/0. */
export function quotient(a: Graded, b: Graded): Graded {
  if (a.value === 0 && b.value === 0) return { value: 0, gradient: a.gradient.map(() => 0) };
  const value = a.value / b.value;
  return { value, gradient: a.gradient.map((d, k) => (d - value * b.gradient[k]!) / b.value) };
}

/** A row of coefficients times the parameters it is for, which may be more. */
export function dot(row: readonly number[], parameters: readonly number[]): number {
  let sum = 0;
  for (let k = 0; k < row.length; k++) sum += row[k]! * parameters[k]!;
  return sum;
}
