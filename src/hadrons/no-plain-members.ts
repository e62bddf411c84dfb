/**
 * States that are no plain members of a multiplet, and why: fits that take them for one say little about SU(3).
 *
 * Source: S. Navas et al. (Particle Data Group), Phys. Rev. D 110, 030001 (2024), reviews "Pole structure of the
 * Lambda(1405) region", "Scalar mesons below 1 GeV", "Heavy non-qqbar mesons" and "N and Delta resonances"; provenance:
 * memory.
 */
const REASONS: Readonly<Record<string, string>> = {
  "Lambda(1405)": "it is two poles near the N Kbar threshold",
  "N(1440)": "it is no simple resonance, and partners of it by mass alone are doubtful",
  "f0(500)": "its pole lies far from the real axis",
  "K0*(700)": "its pole lies far from the real axis",
  "f0(980)": "it sits at the K Kbar threshold",
  "a0(980)": "it sits at the K Kbar threshold",
  "D_s0*(2317)": "it sits below the D K threshold",
  "D_s1(2460)": "it sits below the D* K threshold",
  "chi_c1(3872)": "it sits at the D D* threshold",
};

/**
 * Why a state is no plain member of a multiplet, in words; undefined for all others.
 *
 * @param name - of an isospin multiplet or of a charge state
 * @example whyNoPlainMember("Lambda(1405)") // "it is two poles near the N Kbar threshold"
 */
export function whyNoPlainMember(name: string): string | undefined {
  const plain = name.replace(/(\+\+|\+|-|0)?(bar)?$/, "").replace(/^Kbar/, "K");
  return REASONS[name] ?? REASONS[plain];
}
