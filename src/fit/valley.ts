import { type CouplingBlock, flipBlock } from "./coupling-blocks.js";
import { type FitResult, type LeastSquaresProblem, levenbergMarquardt } from "./levenberg-marquardt.js";

type Vector = readonly number[];

/**
 * Whether two degenerate results lie in one valley of chi-square, up to the signs of blocks.
 *
 * From the first a walk goes towards the second along the degenerate directions, returning to the valley floor by a
 * fit after each step; where the valley is straight, a few steps arrive. A direction that is degenerate to first order
 * only (an amplitude that vanishes) leads nowhere: the fit comes back.
 */
export function sameValley(
  problem: LeastSquaresProblem,
  a: FitResult,
  b: FitResult,
  blocks: readonly CouplingBlock[],
): boolean {
  if (a.verdicts.degenerateDirections.length === 0 || b.verdicts.degenerateDirections.length === 0)
    return false;
  const images = blocks.reduce<Vector[]>(
    (list, block) => list.flatMap((point) => [point, flipBlock(point, block)]),
    [b.parameters],
  );
  return images.some((goal) => reaches(problem, a, goal));
}

const WALK_STEPS = 25;

function reaches(problem: LeastSquaresProblem, from: FitResult, goal: Vector): boolean {
  let here = from;
  let distance = distanceBetween(here.parameters, goal);
  let part = 0.1;
  for (let step = 0; step < WALK_STEPS; step++) {
    if (distance <= 1e-3 * Math.hypot(...goal)) return true;
    const towards = alongValley(here, goal, part);
    const next = levenbergMarquardt(problem, towards, {
      refine: false,
      maximumIterations: 100,
      initialRadius: 0.01,
    });
    const left = distanceBetween(next.parameters, goal);
    // A fit that runs far from where the step led shows that the floor is not flat there, or leaves it for another.
    const strayed =
      distanceBetween(next.parameters, towards) > 0.5 * distanceBetween(here.parameters, towards);
    const floor = Math.abs(next.chi2 - from.chi2) <= 1e-5 * (1 + from.chi2);
    if (!floor || strayed || left > (1 - part / 3) * distance) return false;
    part = Math.min(1, 2 * part);
    here = next;
    distance = left;
  }
  return false;
}

/** Part of the way to the point nearest to the goal that the degenerate directions reach. */
function alongValley(here: FitResult, goal: Vector, part: number): number[] {
  const axes = orthonormal(here.verdicts.degenerateDirections);
  const wanted = goal.map((value, j) => value - here.parameters[j]!);
  return here.parameters.map((value, j) =>
    axes.reduce(
      (sum, axis) => sum + part * axis[j]! * axis.reduce((dot, a, k) => dot + a * wanted[k]!, 0),
      value,
    ),
  );
}

function orthonormal(directions: readonly Vector[]): number[][] {
  const axes: number[][] = [];
  for (const direction of directions) {
    const rest = axes.reduce<Vector>((vector, axis) => {
      const part = vector.reduce((sum, value, j) => sum + value * axis[j]!, 0);
      return vector.map((value, j) => value - part * axis[j]!);
    }, direction);
    const length = Math.hypot(...rest);
    if (length > 1e-9) axes.push(rest.map((value) => value / length));
  }
  return axes;
}

function distanceBetween(a: Vector, b: Vector): number {
  return Math.hypot(...a.map((value, j) => value - b[j]!));
}
