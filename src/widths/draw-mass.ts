import { refuse } from "../require.js";
import { floatNotAbove } from "./float-rounding.js";
import { integrateOverLineShape, type LineShape } from "./line-shape.js";
import { lastNotAbove } from "./mass-grid.js";

/**
 * The cumulative distribution of a mass as a table to draw from. Every number but the origin is a 32-bit float (24
 * binary digits) held in a double, so a table passed on as packed floats loses nothing.
 *
 * **How a reader draws**, from u uniform in [0, 1), all arithmetic in doubles; x_k and F_k are `distancesMeV` and
 * `cumulative` for k = 0 ... n-1:
 *
 * 1. If u < F_0: x = x_0 (u/F_0)^(1/power).
 * 2. Otherwise take the largest k <= n-2 with F_k <= u: x = x_k (x_(k+1)/x_k)^v, v = ln(u/F_k)/ln(F_(k+1)/F_k).
 * 3. The mass is origin + x.
 *
 * So ln F is a chain of straight lines in ln x. It differs from the true F by less than 2e-5, and from F = 1e-6 on by
 * less than 0.1 % of F: a part of the distribution that ends far below the peak can be drawn from as well.
 */
export interface DrawGrid {
  /** Lowest mass. */
  readonly originMeV: number;
  /** Distances from the lowest mass in MeV, > 0, ascending; at least two. */
  readonly distancesMeV: readonly number[];
  /** Chance of a mass up to that point; > 0, ascending, the last one 1. */
  readonly cumulative: readonly number[];
  /** Power of the distance with which the chance starts: l + 3/2 at an open threshold. */
  readonly power: number;
}

/** Largest error of the cumulative distribution, absolute and relative. */
const ABSOLUTE = 2e-5;
const RELATIVE = 1e-3;

/** Chance below which the first point may lie. */
const FIRST = 1e-7;

/** Narrowest line shape a grid of 32-bit floats can hold, as part of the distance of its peak from the threshold. */
const NARROWEST = 1e-5;

/** Bins in which the search for points starts, equal in the angle that straightens the peak. */
const FIRST_BINS = 32;

/** A point of a grid while it is made: distance from the lowest mass, integral up to it. */
interface Point {
  readonly x: number;
  readonly F: number;
}

/**
 * The grid to draw masses of a line shape from.
 *
 * Bins are halved (in the angle theta of w = m0 + Gamma0/2 tan theta) until the distribution is straight enough in each.
 * @throws InputError for a line shape too narrow for a grid; such a state has its nominal mass for any purpose of a draw
 */
export function drawGrid(shape: LineShape): DrawGrid {
  const [low, high] = shape.windowMeV;
  const { massMeV, widthMeV } = shape;
  if (!(widthMeV >= NARROWEST * (massMeV - low))) {
    const mend = "Draw the nominal mass of so narrow a state.";
    refuse("drawGrid: width in MeV", `at least ${NARROWEST * (massMeV - low)}`, widthMeV, mend);
  }
  const angle = (w: number) => Math.atan((w - massMeV) / (widthMeV / 2));
  const massAt = (theta: number) => massMeV + (widthMeV / 2) * Math.tan(theta);
  const whole = integrateOverLineShape(shape, () => 1).value;
  const chance = (fromX: number, toX: number) =>
    integrateOverLineShape(
      shape,
      () => 1,
      { fromMeV: low + fromX, toMeV: low + toX },
      { relativeError: 1e-8 },
    ).value / whole;
  const pointAfter = (start: Point, w: number): Point => {
    const x = floatNotAbove(w - low);
    return { x, F: start.F + chance(start.x, x) };
  };
  const edges = [low, ...shape.running.thresholdsMeV.filter((w) => w > low && w < high), high];
  const middleMass = (a: Point, b: Point) => massAt((angle(low + a.x) + angle(low + b.x)) / 2);
  const points: Point[] = [];
  let start: Point = { x: 0, F: 0 };
  for (const [k, edge] of edges.slice(1).entries()) {
    const from = angle(edges[k]!);
    const step = (angle(edge) - from) / FIRST_BINS;
    for (let bin = 1; bin <= FIRST_BINS; bin++) {
      const end = pointAfter(start, bin === FIRST_BINS ? edge : massAt(from + bin * step));
      addStraightBins(points, start, end, (a, b) => pointAfter(a, middleMass(a, b)));
      start = points.at(-1) ?? start;
    }
  }
  return roundedGrid(low, points, chance);
}

/** Appends the ends of bins from `start` to `end` in each of which the distribution is straight, halving as needed. */
function addStraightBins(
  points: Point[],
  start: Point,
  end: Point,
  middleOf: (a: Point, b: Point) => Point,
): void {
  const isFirst = start.x === 0;
  const middle = middleOf(start, end);
  const splits = middle.x > start.x && middle.x < end.x;
  if (!splits || (isFirst && end.F <= FIRST) || (!isFirst && isStraight(start, middle, end))) {
    if (end.x > start.x) points.push(end);
    return;
  }
  addStraightBins(points, start, middle, middleOf);
  addStraightBins(points, middle, end, middleOf);
}

function isStraight(a: Point, middle: Point, b: Point): boolean {
  const part = Math.log(middle.x / a.x) / Math.log(b.x / a.x);
  const error = Math.abs(a.F * (b.F / a.F) ** part - middle.F);
  // Half of what is promised: the middle of a bin is near, not at, the largest error.
  return error <= ABSOLUTE / 2 && error <= (RELATIVE / 2) * middle.F;
}

/** The grid of all points whose chances still differ as 32-bit floats, the last one exactly 1. */
function roundedGrid(
  low: number,
  points: readonly Point[],
  chance: (a: number, b: number) => number,
): DrawGrid {
  const total = points.at(-1)!.F;
  const kept: Point[] = [];
  for (const { x, F } of points) {
    const rounded = Math.fround(F / total);
    if (rounded > (kept.at(-1)?.F ?? 0) && (rounded < 1 || x === points.at(-1)!.x)) {
      kept.push({ x, F: rounded });
    }
  }
  const first = kept[0]!;
  return {
    originMeV: low,
    distancesMeV: kept.map(({ x }) => x),
    cumulative: kept.map(({ F }) => F),
    power: Math.fround(Math.log2(chance(0, first.x) / chance(0, first.x / 2))),
  };
}

/**
 * A mass drawn from a grid, by the rule of `DrawGrid`; grows with u.
 *
 * @param u - uniform in [0, 1)
 * @returns in MeV
 * @throws InputError for u outside [0, 1)
 */
export function drawMass(grid: DrawGrid, u: number): number {
  if (!(u >= 0 && u < 1)) refuse("drawMass: u", "a number from 0 up to 1", u);
  const { originMeV, distancesMeV, cumulative, power } = grid;
  if (u < cumulative[0]!) return originMeV + distancesMeV[0]! * (u / cumulative[0]!) ** (1 / power);
  const k = Math.min(lastNotAbove(cumulative, u), cumulative.length - 2);
  const [x, F] = [distancesMeV[k]!, cumulative[k]!];
  const part = Math.log(u / F) / Math.log(cumulative[k + 1]! / F);
  return originMeV + x * (distancesMeV[k + 1]! / x) ** part;
}

/** Chance that `drawMass` gives at most this mass: the inverse of `drawMass`, 0 below the grid and 1 above it. */
export function cumulativeAt(grid: DrawGrid, massMeV: number): number {
  const { originMeV, distancesMeV, cumulative, power } = grid;
  const x = massMeV - originMeV;
  if (x <= 0) return 0;
  if (x >= distancesMeV.at(-1)!) return 1;
  if (x < distancesMeV[0]!) return cumulative[0]! * (x / distancesMeV[0]!) ** power;
  const k = lastNotAbove(distancesMeV, x);
  const part = Math.log(x / distancesMeV[k]!) / Math.log(distancesMeV[k + 1]! / distancesMeV[k]!);
  return cumulative[k]! * (cumulative[k + 1]! / cumulative[k]!) ** part;
}
