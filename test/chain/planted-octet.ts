import { catalogueMultiplet } from "../../src/hadrons/catalogue-multiplet.js";
import { isospinAveragedMassMeV } from "../../src/hadrons/multiplet.js";

/**
 * An invented 5/2- octet with planted couplings, worked out here apart from the program: isoscalar factors as literals,
 * the momentum and model a written out. Every number in it is made up but the factors and the ground states' masses.
 */
export const PLANTED = { alpha: 0.3, g: 1.1 };

const parents: Record<string, { massMeV: number; widthMeV: number }> = {
  N: { massMeV: 1700, widthMeV: 150 },
  Sigma: { massMeV: 1800, widthMeV: 130 },
  Lambda: { massMeV: 1850, widthMeV: 110 },
};

/** [c_S, c_A] of 8 -> 8 x 8: J.J. de Swart, Rev. Mod. Phys. 35 (1963) 916; provenance: memory. */
const FACTORS: Record<string, Record<string, readonly [number, number]>> = {
  N: { "N pi": [Math.sqrt(9 / 20), 1 / 2] },
  Sigma: {
    "N Kbar": [-Math.sqrt(3 / 10), Math.sqrt(1 / 6)],
    "Lambda pi": [Math.sqrt(1 / 5), 0],
    "Sigma pi": [0, Math.sqrt(2 / 3)],
    "Sigma eta": [Math.sqrt(1 / 5), 0],
  },
  Lambda: {
    "N Kbar": [Math.sqrt(1 / 10), Math.sqrt(1 / 2)],
    "Sigma pi": [-Math.sqrt(3 / 5), 0],
  },
};

const masses = new Map(
  ["baryon-octet", "pseudoscalar-octet"].flatMap((id) =>
    catalogueMultiplet(id).members.map((member) => [member.name, isospinAveragedMassMeV(member)] as const),
  ),
);

/** Signed isospin amplitude times the root of phase space, in sqrt(MeV): its square is the partial width. */
export function rootWidth(parent: string, channel: string, { alpha, g } = PLANTED): number {
  const [symmetric, antisymmetric] = FACTORS[parent]![channel]!;
  const amplitude =
    Math.sqrt(20 / 3) * (1 - alpha) * g * symmetric + Math.sqrt(12) * alpha * g * antisymmetric;
  const M = parents[parent]!.massMeV;
  const [m1, m2] = channel.split(" ").map((name) => masses.get(name)!) as [number, number];
  const q = Math.sqrt((M ** 2 - (m1 + m2) ** 2) * (M ** 2 - (m1 - m2) ** 2)) / (2 * M);
  return amplitude * Math.sqrt(1000 * (q / 1000) ** 5 * (1000 / M) ** 2);
}

/** Partial width in MeV. */
export const widthMeV = (parent: string, channel: string) => rootWidth(parent, channel) ** 2;

/** Total width in MeV, as the study gives it. */
export const totalMeV = (parent: string) => parents[parent]!.widthMeV;

/** Sum of all open channels in MeV. */
export const openMeV = (parent: string) =>
  Object.keys(FACTORS[parent]!).reduce((sum, channel) => sum + widthMeV(parent, channel), 0);

/** Lines that fix both couplings, but for the second solution for alpha. */
export const BASE = [
  `  - { width: N(1705) -> N pi, value: ${widthMeV("N", "N pi")} +- 3 MeV, source: invented }`,
  `  - { width: Lambda(1850) -> N Kbar, value: ${widthMeV("Lambda", "N Kbar")} +- 2 MeV, source: invented }`,
  `  - { width: Lambda(1850) -> Sigma pi, value: ${widthMeV("Lambda", "Sigma pi")} +- 2 MeV, source: invented }`,
];

/** The study with the given measurements; `rest` is appended. */
export function plantedStudy(measurements: readonly string[], rest = "", sigmaWidth = "130 MeV"): string {
  return `couplet: 1
title: A planted octet, every number invented
multiplets:
  octet:
    irrep: 8
    spinParity: 5/2-
    members:
      - { name: N(1705), place: N, mass: 1700 MeV, width: 150 MeV }
      - { name: Sigma(1800), place: Sigma, mass: 1800 MeV, width: ${sigmaWidth} }
      - { name: Lambda(1850), place: Lambda, mass: 1850 MeV, width: 110 MeV }
decays:
  - { from: octet, to: [baryon-octet, pseudoscalar-octet], L: 2, model: a, masses: average }
measurements:
${measurements.join("\n")}
${rest}`;
}
