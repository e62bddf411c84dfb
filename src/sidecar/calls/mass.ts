import { refuse } from "../../require.js";

/** Above any hadron's mass by orders of magnitude; far below it no power of a momentum overflows. */
const LARGEST_MASS_MEV = 1e6;

/** Checks a mass of a request: a number above 0 and up to 10^6 MeV; throws InputError otherwise. */
export function requireMass(massMeV: number, index: number, where: (index: number) => string): void {
  if (massMeV > 0 && massMeV <= LARGEST_MASS_MEV) return;
  refuse(where(index), `a mass in MeV above 0 and up to ${LARGEST_MASS_MEV}`, massMeV);
}
