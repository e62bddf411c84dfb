import { type LineShape, type LineShapeOptions, lineShape } from "../../src/widths/line-shape.js";
import { LINE_SHAPE_RADIUS_FM, type RunningWidth, widthThrough } from "../../src/widths/running-width.js";
import { widthModel } from "../../src/widths/width-model.js";

export const PION_MEV = 138.039;
export const NUCLEON_MEV = 938.919;
export const LAMBDA_MEV = 1115.683;

/** K = 1000 MeV q/M, the two-body phase space. */
export const phaseSpace = widthModel("a", { n: 1 });

/** The model of the line shapes: a barrier of 5/GeV. */
export const barrier = widthModel("c", { radiusFm: LINE_SHAPE_RADIUS_FM });

/** A width in one two-body channel that is `widthMeV` at the mass `massMeV`. */
export function oneChannel(
  massMeV: number,
  widthMeV: number,
  daughtersMeV: readonly [number, number],
  L: number,
  model = barrier,
): RunningWidth {
  const [firstMeV, secondMeV] = daughtersMeV;
  return widthThrough({ model, vertex: { L }, firstMeV, secondMeV }, widthMeV, massMeV);
}

/**
 * Resonances with one channel and rounded masses and widths of S. Navas et al. (Particle Data Group), Phys. Rev. D 110,
 * 030001 (2024), summary tables; provenance memory. Omega stands for any narrow state far above its threshold.
 */
const RESONANCES = {
  Delta: [1232, 117, [NUCLEON_MEV, PION_MEV], 1],
  "Sigma(1385)": [1384.6, 37.2, [LAMBDA_MEV, PION_MEV], 1],
  rho: [775.26, 149.1, [139.57, 139.57], 1],
  "K*": [895.5, 47.3, [495.644, PION_MEV], 1],
  phi: [1019.461, 4.249, [493.677, 493.677], 1],
  omega: [782.66, 8.68, [2 * 139.57, 134.98], 1],
  f2: [1275.4, 186.6, [139.57, 139.57], 2],
  "N(1535)": [1530, 150, [NUCLEON_MEV, PION_MEV], 0],
} as const;

/** Line shape of one of a few well-known resonances, with the barrier of 5/GeV unless another model is given. */
export function resonance(
  name: keyof typeof RESONANCES,
  model = barrier,
  options: LineShapeOptions = {},
): LineShape {
  const [massMeV, widthMeV, daughtersMeV, L] = RESONANCES[name];
  return lineShape(massMeV, oneChannel(massMeV, widthMeV, daughtersMeV, L, model), options);
}
