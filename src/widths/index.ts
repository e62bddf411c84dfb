export { allowedWaves, type Wave } from "./allowed-waves.js";
export { barrierFactorSquared, barrierPolynomial } from "./barrier.js";
export { breakupMomentumMeV } from "./breakup-momentum.js";
export {
  drawChannel,
  drawDaughterMasses,
  drawMassesJointly,
  lowestDrawnMeV,
  type MassSource,
} from "./draw-decay.js";
export { cumulativeAt, type DrawGrid, drawGrid, drawMass } from "./draw-mass.js";
export {
  channelThresholdMeV,
  type Daughter,
  foldedFactor,
  foldedWidth,
  lowestMassMeV,
  type TwoBodyChannel,
} from "./folded-width.js";
export {
  integrateOverLineShape,
  type LineShape,
  type LineShapeOptions,
  type LineShapeRange,
  lineShape,
} from "./line-shape.js";
export { gridWidth, gridWidthMeV, type MassGrid, type MassGridOptions, massGrid } from "./mass-grid.js";
export { channelFractions, type ParentLineShape, parentLineShape } from "./parent-line-shape.js";
export { identicalFactor, partialWidthMeV, type TwoBodyDecay } from "./partial-width.js";
export {
  integrate,
  integrateAcross,
  type Peak,
  type Quadrature,
  type QuadratureOptions,
} from "./quadrature.js";
export {
  couplingWidth,
  LINE_SHAPE_RADIUS_FM,
  powerWidth,
  type RunningWidth,
  type StableChannel,
  totalWidth,
  widthThrough,
} from "./running-width.js";
export { type WidthModel, widthModel, widthModelDefinitions } from "./width-model.js";
export type {
  SpinParity,
  Vertex,
  WidthModelDefinition,
  WidthModelOption,
  WidthModelOptions,
} from "./width-model-definition.js";
