import { refuse, requirePositive } from "../require.js";

/**
 * Momentum of either daughter in the rest frame of a two-body decay; 0 at and below threshold.
 *
 * q = sqrt((M - m1 - m2)(M + m1 + m2)(M - m1 + m2)(M + m1 - m2)) / 2M. The heavier daughter is subtracted first:
 * near threshold both differences are then exact in floating point, so no digit of q is lost there.
 * Source: S. Navas et al. (Particle Data Group), Phys. Rev. D 110, 030001 (2024), review "Kinematics", two-body decays.
 * @param parentMeV - M, in MeV, > 0
 * @param firstMeV - m1, in MeV, >= 0
 * @param secondMeV - m2, in MeV, >= 0
 * @returns in MeV, >= 0, never NaN
 * @throws InputError for a mass that is not a finite number in its range
 * @example breakupMomentumMeV(1000, 400, 300) // 355.5...
 */
export function breakupMomentumMeV(parentMeV: number, firstMeV: number, secondMeV: number): number {
  requirePositive("breakupMomentumMeV: parentMeV", parentMeV, "Give the mass in MeV.");
  requireDaughterMass("breakupMomentumMeV: firstMeV", firstMeV);
  requireDaughterMass("breakupMomentumMeV: secondMeV", secondMeV);
  return momentumOfMeV(parentMeV, Math.max(firstMeV, secondMeV), Math.min(firstMeV, secondMeV));
}

/** `breakupMomentumMeV` for masses that have been checked, `heavy` >= `light`. */
export function momentumOfMeV(parentMeV: number, heavy: number, light: number): number {
  const excess = parentMeV - heavy - light;
  if (excess <= 0) return 0;
  const difference = heavy - light;
  const other = (parentMeV - difference) * (parentMeV + difference);
  return Math.sqrt(excess * (parentMeV + heavy + light)) * (Math.sqrt(other) / (2 * parentMeV));
}

function requireDaughterMass(where: string, massMeV: number): void {
  if (Number.isFinite(massMeV) && massMeV >= 0) return;
  refuse(where, "a finite number >= 0", massMeV, "Give the mass in MeV; 0 for a photon.");
}
