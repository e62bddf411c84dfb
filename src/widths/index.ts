export { allowedWaves, type Wave } from "./allowed-waves.js";
export { barrierFactorSquared, barrierPolynomial } from "./barrier.js";
export { breakupMomentumMeV } from "./breakup-momentum.js";
export { identicalFactor, partialWidthMeV, type TwoBodyDecay } from "./partial-width.js";
export { type WidthModel, widthModel, widthModelDefinitions } from "./width-model.js";
export type {
  SpinParity,
  Vertex,
  WidthModelDefinition,
  WidthModelOption,
  WidthModelOptions,
} from "./width-model-definition.js";
