import { refuse, requirePositive } from "../require.js";
import { floatNotBelow } from "./float-rounding.js";
import type { RunningWidth } from "./running-width.js";

/**
 * A width against mass as a table, for readers without the width models. Every number but the threshold is a 32-bit
 * float (24 binary digits) held in a double, so a table passed on as packed floats loses nothing.
 *
 * **How a reader evaluates it**, at mass m, all arithmetic in doubles, ln and exp the natural ones:
 *
 * 1. x = m - threshold. If x <= 0 the width is 0. If x is above the last distance, refuse: the table ends there.
 * 2. t = ln x, and t_k = ln(distance_k) for k = 0 ... n-1; y_k and s_k are `logWidths` and `slopes`.
 * 3. If x < distance_0: width = exp(y_0 + s_0 (t - t_0)), the threshold law.
 * 4. Otherwise take the largest k <= n-2 with distance_k <= x, and with h = t_(k+1) - t_k, u = (t - t_k)/h,
 *    D = y_(k+1) - y_k, a = h s_k, b = h s_(k+1):
 *    width = exp(y_k + u (a + u (3 D - 2 a - b + u (a + b - 2 D)))).
 *
 * In these variables a threshold law is a straight line, and the cubic (C. Hermite's, through values and slopes at both
 * ends) follows the bend away from it.
 */
export interface MassGrid {
  readonly thresholdMeV: number;
  /** Distances of the points from the threshold in MeV, > 0, ascending; at least two. */
  readonly distancesMeV: readonly number[];
  /** ln(width/MeV) at the points. */
  readonly logWidths: readonly number[];
  /** d ln(width)/d ln(distance) at the points; near the threshold the power of the threshold law. */
  readonly slopes: readonly number[];
}

/** How close a grid follows its width, and from where on. */
export interface MassGridOptions {
  /** Largest relative error of the width, from the first point to the top; default 1e-4. */
  readonly relativeError?: number;
  /** Distance of the first point from the threshold in MeV; default 0.001. */
  readonly firstDistanceMeV?: number;
}

/** A point of a grid while it is made: t = ln x, y = ln width, s = dy/dt. */
interface Point {
  readonly x: number;
  readonly t: number;
  readonly y: number;
  readonly s: number;
}

/** Largest step in ln x of the differences that give the slopes, and its part of the sharpest rise of the width. */
const STEP = 3e-4;
const PART_OF_RISE = 0.02;

/** Bins in ln x shorter than this mean that the function has a corner or a jump. */
const SHORTEST = 1e-6;

/** The cubic is held to this part of the wanted error at the test points; the rest is for what lies between them. */
const SAFETY = 0.25;

/**
 * The grid of a partial width from its threshold to a top mass, with as few points as a stated accuracy needs.
 *
 * Bins start a factor e long and are halved (in ln x) until the cubic meets the width at three points inside each.
 * @param width - a width with one threshold and positive above it: closed form, or folded with a relative error of 1e-8 or less
 * @param topMeV - highest mass, above the threshold
 * @throws InputError for a top at the threshold, a width that is not positive, or one with a corner (several thresholds)
 */
export function massGrid(width: RunningWidth, topMeV: number, options: MassGridOptions = {}): MassGrid {
  const { relativeError = 1e-4, firstDistanceMeV = 1e-3 } = options;
  requirePositive("massGrid: relativeError", relativeError);
  requirePositive("massGrid: firstDistanceMeV", firstDistanceMeV);
  const thresholdMeV = width.thresholdsMeV[0]!;
  const logWidth = (x: number): number => {
    const value = width.widthMeV(thresholdMeV + x);
    if (value > 0 && Number.isFinite(value)) return Math.log(value);
    const mend = "Leave out channels without a coupling.";
    refuse(`massGrid: width in MeV, ${x.toPrecision(4)} MeV above threshold`, "a number > 0", value, mend);
  };
  const point = (distance: number): Point => {
    const x = Math.fround(distance);
    const y = Math.fround(logWidth(x));
    const step = Math.min(STEP, (PART_OF_RISE * (width.sharpestMeV ?? Number.POSITIVE_INFINITY)) / x);
    const slope = (logWidth(x * Math.exp(step)) - logWidth(x * Math.exp(-step))) / (2 * step);
    return { x, t: Math.log(x), y, s: Math.fround(slope) };
  };
  const tolerance = SAFETY * relativeError;
  const follows = (a: Point, b: Point): boolean =>
    [0.25, 0.5, 0.75].every((part) => {
      const t = a.t + part * (b.t - a.t);
      return Math.abs(cubic(a, b, t) - logWidth(Math.exp(t))) <= tolerance;
    });
  const top = floatNotBelow(topMeV - thresholdMeV);
  if (!(top > firstDistanceMeV)) {
    refuse("massGrid: topMeV", `a mass above ${thresholdMeV + firstDistanceMeV} MeV`, topMeV);
  }
  const bins = Math.ceil(Math.log(top / firstDistanceMeV));
  const points = [point(firstDistanceMeV)];
  for (let bin = 1; bin <= bins; bin++) {
    const end = bin === bins ? top : firstDistanceMeV * (top / firstDistanceMeV) ** (bin / bins);
    addBins(points, point(end), point, follows);
  }
  return {
    thresholdMeV,
    distancesMeV: points.map(({ x }) => x),
    logWidths: points.map(({ y }) => y),
    slopes: points.map(({ s }) => s),
  };
}

/** Appends points up to and with `end`, halving the bin from the last point until the cubic follows the width. */
function addBins(
  points: Point[],
  end: Point,
  point: (distance: number) => Point,
  follows: (a: Point, b: Point) => boolean,
): void {
  const start = points.at(-1)!;
  if (follows(start, end)) {
    points.push(end);
    return;
  }
  if (end.t - start.t < SHORTEST) {
    const mend = "Make one grid for each partial width.";
    refuse(
      `massGrid: width, ${end.x.toPrecision(4)} MeV above threshold`,
      "a smooth function of the mass",
      "a corner",
      mend,
    );
  }
  addBins(points, point(Math.exp((start.t + end.t) / 2)), point, follows);
  addBins(points, end, point, follows);
}

/** The cubic through values and slopes of two points; step 4 of the reader's rule. */
function cubic(left: Point, right: Point, t: number): number {
  const h = right.t - left.t;
  const u = (t - left.t) / h;
  const D = right.y - left.y;
  const a = h * left.s;
  const b = h * right.s;
  return left.y + u * (a + u * (3 * D - 2 * a - b + u * (a + b - 2 * D)));
}

/**
 * Width of a grid at a mass, by the rule of `MassGrid`.
 *
 * @returns in MeV; 0 at and below the threshold
 * @throws InputError for a mass above the end of the grid
 */
export function gridWidthMeV(grid: MassGrid, massMeV: number): number {
  const { distancesMeV, logWidths, slopes, thresholdMeV } = grid;
  const x = massMeV - thresholdMeV;
  if (x <= 0) return 0;
  const last = distancesMeV.length - 1;
  if (!(x <= distancesMeV[last]!)) {
    refuse(
      "gridWidthMeV: massMeV",
      `a mass up to ${thresholdMeV + distancesMeV[last]!}`,
      massMeV,
      "The grid ends there.",
    );
  }
  const at = (k: number): Point => ({
    x: distancesMeV[k]!,
    t: Math.log(distancesMeV[k]!),
    y: logWidths[k]!,
    s: slopes[k]!,
  });
  const t = Math.log(x);
  if (x < distancesMeV[0]!) {
    const { t: t0, y, s } = at(0);
    return Math.exp(y + s * (t - t0));
  }
  const k = Math.min(lastNotAbove(distancesMeV, x), last - 1);
  return Math.exp(cubic(at(k), at(k + 1), t));
}

/** A grid as a running width, so that a folded channel is integrated once and used everywhere. */
export function gridWidth(grid: MassGrid): RunningWidth {
  return {
    thresholdsMeV: [grid.thresholdMeV],
    widthMeV: (massMeV) => gridWidthMeV(grid, massMeV),
  };
}

/** Index of the last of ascending values that is not above x, by halving; 0 if all are. */
export function lastNotAbove(values: readonly number[], x: number): number {
  let [low, high] = [0, values.length];
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (values[middle]! <= x) low = middle;
    else high = middle;
  }
  return low;
}
