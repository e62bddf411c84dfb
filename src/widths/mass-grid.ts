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
  const [a, c2, c3] = cubicTerms(h, right.y - left.y, left.s, right.s);
  const u = (t - left.t) / h;
  return left.y + u * (a + u * (c2 + u * c3));
}

/** Coefficients of u, u^2 and u^3 for a bin of length h with slopes s at its ends. */
function cubicTerms(h: number, D: number, left: number, right: number): [number, number, number] {
  const a = h * left;
  const b = h * right;
  return [a, 3 * D - 2 * a - b, a + b - 2 * D];
}

/**
 * Width of a grid at a mass, by the rule of `MassGrid`; `gridWidth` is faster for many masses.
 *
 * @returns in MeV; 0 at and below the threshold
 * @throws InputError for a mass above the end of the grid
 */
export function gridWidthMeV(grid: MassGrid, massMeV: number): number {
  return gridWidth(grid).widthMeV(massMeV);
}

/**
 * A grid as a running width, so that a folded channel is integrated once and used everywhere. Logarithms and the terms of
 * the cubics are taken once.
 */
export function gridWidth({ thresholdMeV, distancesMeV, logWidths, slopes }: MassGrid): RunningWidth {
  const distances = Float64Array.from(distancesMeV);
  const last = distances.length - 1;
  const [firstMeV, lastMeV] = [distances[0]!, distances[last]!];
  const t = distances.map(Math.log);
  // Of each bin: start and length in ln x, then the four terms of its cubic.
  const bins = new Float64Array(6 * last);
  for (let k = 0; k < last; k++) {
    const h = t[k + 1]! - t[k]!;
    const terms = cubicTerms(h, logWidths[k + 1]! - logWidths[k]!, slopes[k]!, slopes[k + 1]!);
    bins.set([t[k]!, h, logWidths[k]!, ...terms], 6 * k);
  }
  const [t0, y0, s0] = [t[0]!, logWidths[0]!, slopes[0]!];
  const widthMeV = (massMeV: number): number => {
    const x = massMeV - thresholdMeV;
    if (x <= 0) return 0;
    if (!(x <= lastMeV)) {
      const top = `a mass up to ${thresholdMeV + lastMeV}`;
      refuse("gridWidthMeV: massMeV", top, massMeV, "The grid ends there.");
    }
    if (x < firstMeV) return Math.exp(y0 + s0 * (Math.log(x) - t0));
    const at = 6 * Math.min(lastNotAbove(distances, x), last - 1);
    const u = (Math.log(x) - bins[at]!) / bins[at + 1]!;
    return Math.exp(bins[at + 2]! + u * (bins[at + 3]! + u * (bins[at + 4]! + u * bins[at + 5]!)));
  };
  return { thresholdsMeV: [thresholdMeV], widthMeV };
}

/** Index of the last of ascending values that is not above x, by halving; 0 if all are. */
export function lastNotAbove(values: ArrayLike<number>, x: number): number {
  let [low, high] = [0, values.length];
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (values[middle]! <= x) low = middle;
    else high = middle;
  }
  return low;
}
