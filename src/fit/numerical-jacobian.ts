import { refuse } from "../require.js";

/** The closed interval a parameter may take; infinite ends are allowed. */
export interface Bound {
  readonly lower: number;
  readonly upper: number;
}

/** How derivatives are taken: two points each (fast), or an extrapolated table (slow, about 12 digits). */
export type DifferenceScheme = "two-point" | "extrapolated";

/** Choices for numerical derivatives. */
export interface DifferenceOptions {
  /** Default `extrapolated`. */
  readonly scheme?: DifferenceScheme;
  /** Steps never leave these intervals; one per parameter. */
  readonly bounds?: readonly Bound[] | undefined;
  /** Least size to measure a parameter's step by, > 0. Default: its own size, and 1 where it is 0. */
  readonly typicalSizes?: readonly number[] | undefined;
}

type VectorFunction = (parameters: readonly number[]) => readonly number[];

/** Where the function is sampled beside the point: both sides, or one side with its sign. */
interface Stencil {
  readonly side: -1 | 0 | 1;
  readonly step: number;
}

const EXTRAPOLATION_LEVELS = 9;
const CONTRACTION = 2;

/**
 * Jacobian of a vector function by differences, rows = outputs, columns = parameters.
 *
 * `two-point` takes central differences with a step of cbrt(2^-52) times the parameter's size, good to about 1e-10.
 * `extrapolated` repeats them with halved steps and extrapolates to step 0, keeping for every entry the value of least
 * estimated error, good to about 1e-12. Beside a bound the steps go to one side only. A sample where the function is
 * not finite is left out; an entry with no finite sample is NaN.
 * Source: C.J.F. Ridders, Adv. Eng. Software 4 (1982) 75, for the extrapolated table and its error estimate.
 * @throws InputError if the outputs at two points differ in number
 */
export function numericalJacobian(
  f: VectorFunction,
  parameters: readonly number[],
  options: DifferenceOptions = {},
): number[][] {
  const outputs = f(parameters).length;
  const columns = parameters.map((_, j) =>
    options.scheme === "two-point"
      ? difference(f, parameters, j, outputs, stencil(parameters, j, Math.cbrt(Number.EPSILON), options))
      : extrapolatedColumn(f, parameters, j, outputs, options),
  );
  return Array.from({ length: outputs }, (_, i) => columns.map((column) => column[i] ?? Number.NaN));
}

/** The step for one parameter that stays inside its bounds: central where there is room on both sides. */
function stencil(
  parameters: readonly number[],
  j: number,
  relative: number,
  options: DifferenceOptions,
): Stencil {
  const value = parameters[j]!;
  const step = relative * (Math.max(Math.abs(value), options.typicalSizes?.[j] ?? 0) || 1);
  const bound = options.bounds?.[j];
  if (!bound) return { side: 0, step };
  const above = bound.upper - value;
  const below = value - bound.lower;
  const room = Math.min(above, below);
  if (room >= step / 16) return { side: 0, step: Math.min(step, room) };
  return above >= below
    ? { side: 1, step: Math.min(step, above) }
    : { side: -1, step: Math.min(step, below) };
}

/** Difference quotient: central, or one-sided of second order in the step. */
function difference(
  f: VectorFunction,
  parameters: readonly number[],
  j: number,
  outputs: number,
  { side, step }: Stencil,
): number[] {
  if (!(step > 0)) return new Array<number>(outputs).fill(0);
  const value = parameters[j]!;
  const sample = (offset: number) => {
    const at = value + offset;
    const result = f(parameters.with(j, at));
    if (result.length !== outputs) {
      refuse("numericalJacobian", `${outputs} outputs at every point`, result.length);
    }
    return { at, result };
  };
  if (side === 0) {
    const [high, low] = [sample(step), sample(-step)];
    // The spacing as rounded, not as asked for: the difference matters from the 9th digit.
    return high.result.map((value, i) => (value - low.result[i]!) / (high.at - low.at));
  }
  const [here, near, far] = [sample(0), sample((side * step) / 2), sample(side * step)];
  return here.result.map(
    (value, i) => (4 * near.result[i]! - far.result[i]! - 3 * value) / (far.at - here.at),
  );
}

/** One column by Ridders' table: halved steps, extrapolated, best estimate kept for each output apart. */
function extrapolatedColumn(
  f: VectorFunction,
  parameters: readonly number[],
  j: number,
  outputs: number,
  options: DifferenceOptions,
): number[] {
  const first = stencil(parameters, j, 0.05, options);
  const best = new Array<number>(outputs).fill(Number.NaN);
  const error = new Array<number>(outputs).fill(Number.POSITIVE_INFINITY);
  let previous: number[][] = [];
  for (let level = 0; level < EXTRAPOLATION_LEVELS; level++) {
    const step = first.step * CONTRACTION ** -level;
    const row = [difference(f, parameters, j, outputs, { side: first.side, step })];
    for (let order = 1; order <= previous.length; order++) {
      const power = first.side === 0 ? CONTRACTION ** (2 * order) : CONTRACTION ** (order + 1);
      const lower = row[order - 1]!;
      const coarse = previous[order - 1]!;
      row.push(lower.map((value, i) => (power * value - coarse[i]!) / (power - 1)));
    }
    for (let i = 0; i < outputs; i++) keepBest(row, previous, i, best, error);
    // Steps that met a singularity cannot be extrapolated from: begin a new table below them.
    previous = row[0]!.every(Number.isFinite) ? row : [];
  }
  return best;
}

/** Keeps, for one output, the entry of the newest row whose distance to its neighbours in the table is least. */
function keepBest(row: number[][], previous: number[][], i: number, best: number[], error: number[]): void {
  if (!Number.isFinite(best[i]!) && Number.isFinite(row[0]![i]!)) best[i] = row[0]![i]!;
  for (let order = 1; order < row.length; order++) {
    const value = row[order]![i]!;
    const estimate = Math.max(
      Math.abs(value - row[order - 1]![i]!),
      Math.abs(value - previous[order - 1]![i]!),
    );
    if (estimate <= error[i]!) {
      error[i] = estimate;
      best[i] = value;
    }
  }
}
