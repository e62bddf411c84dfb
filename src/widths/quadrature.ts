import { requireInteger, requirePositive } from "../require.js";

/** An integral with an estimate of its absolute error and the number of function values it took. */
export interface Quadrature {
  readonly value: number;
  readonly error: number;
  readonly evaluations: number;
}

/** When an integral is good enough, and when to stop trying. */
export interface QuadratureOptions {
  /** Wanted error relative to the integral; default 1e-10. */
  readonly relativeError?: number;
  /** Largest number of intervals; default 400. An integral that reaches it comes back with the error it has. */
  readonly maxIntervals?: number;
}

/** A narrow peak of an integrand, like that of a resonance: place and half width, in the unit of the variable. */
export interface Peak {
  readonly at: number;
  readonly halfWidth: number;
}

/** Nodes >= 0 of the 15-point Kronrod rule on [-1, 1], their weights, and the weights of the 7-point Gauss rule. */
const KRONROD: readonly (readonly [node: number, weight: number, gaussWeight: number])[] = [
  [0, 0.20948214108472782, 0.4179591836734694],
  [0.20778495500789848, 0.20443294007529889, 0],
  [0.4058451513773972, 0.19035057806478542, 0.3818300505051189],
  [0.5860872354676911, 0.1690047266392679, 0],
  [0.7415311855993945, 0.14065325971552592, 0.27970539148927664],
  [0.8648644233597691, 0.10479001032225019, 0],
  [0.9491079123427585, 0.06309209262997856, 0.1294849661688697],
  [0.9914553711208126, 0.022935322010529224, 0],
];

/** One part of the range with its integral and error. */
interface Part {
  readonly low: number;
  readonly high: number;
  readonly value: number;
  readonly error: number;
}

/**
 * Integral of a smooth function over consecutive intervals: adaptive Gauss-Kronrod quadrature with 7 and 15 points.
 *
 * The interval with the largest error is halved until the sum of errors is small enough. The function is never called
 * at the ends of the intervals. It should be smooth inside them; see `integrateAcross` for thresholds and peaks.
 * Source: R. Piessens, E. de Doncker-Kapenga, C. W. Überhuber and D. K. Kahaner, QUADPACK (Springer, 1983), routine QAG
 * (rule and error estimate); provenance memory, the rule is checked on polynomials in the tests.
 * @param points - ends of the intervals in ascending order, at least two
 * @throws InputError for options out of range
 * @example integrate((x) => x * x, [0, 3]).value // 9
 */
export function integrate(
  f: (x: number) => number,
  points: readonly number[],
  options: QuadratureOptions = {},
): Quadrature {
  const { relativeError = 1e-10, maxIntervals = 400 } = options;
  requirePositive("integrate: relativeError", relativeError);
  requireInteger("integrate: maxIntervals", maxIntervals, 1);
  const parts = points.slice(1).map((high, k) => kronrod(f, points[k]!, high));
  for (;;) {
    let [value, error, worst] = [0, 0, 0];
    for (const [k, part] of parts.entries()) {
      value += part.value;
      error += part.error;
      if (part.error > parts[worst]!.error) worst = k;
    }
    const done = error <= relativeError * Math.abs(value) || parts.length >= maxIntervals;
    const { low, high } = parts[worst] ?? { low: 0, high: 0 };
    const middle = (low + high) / 2;
    if (done || middle <= low || middle >= high) {
      // Each halving replaced one part by two: 2 n - (number of first parts) rules were applied.
      return { value, error, evaluations: 15 * (2 * parts.length - (points.length - 1)) };
    }
    parts[worst] = kronrod(f, low, middle);
    parts.push(kronrod(f, middle, high));
  }
}

function kronrod(f: (x: number) => number, low: number, high: number): Part {
  const centre = (low + high) / 2;
  const half = (high - low) / 2;
  const values: number[] = [];
  let [sum, gauss, absolute] = [0, 0, 0];
  for (const [node, weight, gaussWeight] of KRONROD) {
    const at = node === 0 ? [f(centre)] : [f(centre - half * node), f(centre + half * node)];
    for (const y of at) {
      values.push(y);
      sum += weight * y;
      gauss += gaussWeight * y;
      absolute += weight * Math.abs(y);
    }
  }
  let spread = 0;
  values.forEach((y, k) => {
    spread += KRONROD[Math.ceil(k / 2)]![1] * Math.abs(y - sum / 2);
  });
  const difference = Math.abs(sum - gauss);
  // QUADPACK's estimate: the difference of both rules is that of the worse one, and much too large for the better.
  const estimate = spread === 0 ? difference : spread * Math.min(1, ((200 * difference) / spread) ** 1.5);
  return {
    low,
    high,
    value: half * sum,
    error: half * Math.max(estimate, 50 * Number.EPSILON * absolute),
  };
}

/**
 * Integral of a function with square-root ends and a narrow peak, over consecutive intervals.
 *
 * Inside [a, b] the variable is w = c + h tan(theta), theta = theta_a + (theta_b - theta_a) s^2 (3 - 2s), 0 < s < 1, c
 * the place and h the half width of the peak. A Breit-Wigner peak becomes flat in theta, and any half-integer power of
 * the distance from a or b becomes smooth in s.
 * @param points - ends of the intervals in ascending order: the range and every threshold inside it
 * @throws InputError for a half width that is not positive, or options out of range
 */
export function integrateAcross(
  f: (w: number) => number,
  points: readonly number[],
  peak: Peak,
  options: QuadratureOptions = {},
): Quadrature {
  requirePositive("integrateAcross: halfWidth", peak.halfWidth, "Give the half width of the peak.");
  const { at, halfWidth } = peak;
  const angles = points.map((w) => Math.atan((w - at) / halfWidth));
  const inS = (variable: number): number => {
    const k = Math.min(Math.floor(variable), points.length - 2);
    const s = variable - k;
    const range = angles[k + 1]! - angles[k]!;
    const tangent = Math.tan(angles[k]! + range * s * s * (3 - 2 * s));
    const w = Math.min(Math.max(at + halfWidth * tangent, points[k]!), points[k + 1]!);
    return f(w) * halfWidth * (1 + tangent * tangent) * range * 6 * s * (1 - s);
  };
  return integrate(inS, Array.from(points.keys()), options);
}
