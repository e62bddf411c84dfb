import { requirePositive } from "../require.js";

/**
 * Error of a measurement x +above -below as seen from a predicted value: `below` from x - below downwards, `above` from
 * x + above upwards, linear between them.
 *
 * Source: Particle Data Group, Review of Particle Physics, introduction, "Treatment of errors". Provenance: memory.
 * @param below - > 0; @param above - > 0
 * @throws InputError if an error is not positive
 */
export function asymmetricSigma(value: number, below: number, above: number, predicted: number): number {
  requirePositive("asymmetricSigma: below", below);
  requirePositive("asymmetricSigma: above", above);
  const part = (predicted - (value - below)) / (below + above);
  return below + (above - below) * Math.min(Math.max(part, 0), 1);
}

/**
 * A measurement drawn around a predicted value: by z times its error, as that error is seen from the prediction.
 *
 * A draw below the prediction has the prediction above it, so its size is that of the upper error. Either side has the
 * chance 1/2, and from one error on the residual of the prediction is |z| again.
 * @param z - a standard normal number
 */
export function drawnMeasurement(predicted: number, below: number, above: number, z: number): number {
  return predicted + z * (z < 0 ? above : below);
}

/**
 * Where the residual (predicted - measured)/sigma gets steeper at once: on the side of the larger error, at +1 or -1,
 * where the sliding ends; undefined for equal errors. `innerSlope` is the slope inside in units of that outside.
 */
export function asymmetricKink(below: number, above: number): { at: 1 | -1; innerSlope: number } | undefined {
  if (below === above) return undefined;
  return { at: above > below ? 1 : -1, innerSlope: (2 * Math.min(below, above)) / (below + above) };
}
