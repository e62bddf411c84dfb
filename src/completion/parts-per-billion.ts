import { requireIdentity } from "../require.js";

/** The whole, in the unit fractions are written in. */
export const WHOLE = 1_000_000_000;

/**
 * Fractions as integers in parts per 10^9 that add up to exactly 10^9.
 *
 * Each is rounded to nearest; what rounding leaves over goes to the row at `residueAt`.
 * @param fractions - each in [0, 1], adding up to 1 within 1e-12 per row
 */
export function partsPerBillion(fractions: readonly number[], residueAt: number): number[] {
  const parts = fractions.map((fraction) => Math.round(fraction * WHOLE));
  const residue = WHOLE - parts.reduce((sum, part) => sum + part, 0);
  requireIdentity(
    "partsPerBillion",
    Math.abs(residue) <= fractions.length,
    () => `fractions are ${residue} parts short`,
  );
  parts[residueAt]! += residue;
  requireIdentity(
    "partsPerBillion",
    parts[residueAt]! >= 0,
    () => `a row would be ${parts[residueAt]} parts`,
  );
  return parts;
}
