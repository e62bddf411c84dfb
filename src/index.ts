/**
 * Couplet as a library: exact SU(3) flavour algebra, and the chain from a study to complete decay tables.
 *
 * Every stage of the chain is one call that takes the value of the stage before it:
 *
 *     const fit = fitModel(resolveStudy(readStudy(bytes, "study.yaml")));
 *     const file = encodeDecays(complete(fit, 0));
 *
 * Values are plain and read-only. Errors are of four classes: `InputError` for what the caller can mend, `TableError` for
 * a damaged or newer table, `LimitError` for too large a request, `InternalError` for a bug of ours.
 *
 * @packageDocumentation
 */

// The chain, right to left: tables, completion, fit, model, study.
export { complete } from "./completion/complete.js";
export type {
  Coupling,
  CouplingComponent,
  CouplingTable,
  CouplingTerm,
  DecayConstants,
  ReducedValue,
} from "./completion/coupling-table.js";
export { minimaToTabulate } from "./completion/mirrors.js";
export type {
  Comparison,
  Estimate,
  Flag,
  Origin,
  ParentTable,
  Replica,
  Row,
  RowWave,
  Tables,
} from "./completion/tables.js";
export { couplingTable } from "./completion/tabulate-couplings.js";
// F and D from reduced couplings and back.
export {
  antisymmetricCouplingOfF,
  type Estimate as FAndDEstimate,
  type FAndD,
  type FAndDForm,
  fAndD,
  fAndDForm,
  hasFAndD,
  symmetricCouplingOfD,
} from "./couplings/f-and-d.js";
export {
  ISOSPIN_LAGRANGIAN,
  type IsospinConstant,
  isospinConstantName,
  isospinConstants,
} from "./couplings/isospin-lagrangian.js";
export {
  MATRIX_CONVENTION,
  MatrixConvention,
  type MatrixEntry,
  OCTET_LAGRANGIAN,
} from "./couplings/matrix-convention.js";
export {
  CoupletError,
  InputError,
  InternalError,
  LimitError,
  type SourcePosition,
  TableError,
} from "./errors.js";
// Exact numbers: rationals and their signed square roots.
export {
  addRational,
  compareRationals,
  divideRational,
  equalRationals,
  formatRational,
  multiplyRational,
  negateRational,
  parseRational,
  type Rational,
  rational,
  rationalToNumber,
  subtractRational,
} from "./exact/rational.js";
export {
  divideRoots,
  equalRoots,
  formatRoot,
  multiplyRoots,
  negateRoot,
  parseRoot,
  rootOfSignedSquare,
  rootToNumber,
  rootToRational,
  type SignedRoot,
  signedRoot,
  signedSquare,
} from "./exact/signed-root.js";
export {
  type GradedFunction,
  type ProfiledMinimum,
  type ProfileEnd,
  type ProfileInterval,
  type ProfileOptions,
  profileInterval,
} from "./fit/profile-interval.js";
export type { couplet } from "./gen/couplet.js";
// Hadrons: the catalogue, and multiplets of one's own.
export {
  type CatalogueEdition,
  canonicalName,
  catalogueEdition,
  catalogueParticle,
  catalogueParticles,
  findParticle,
} from "./hadrons/catalogue.js";
export { catalogueMultiplet, catalogueMultipletIds } from "./hadrons/catalogue-multiplet.js";
export type { ContentTerm, Hadron, Leg } from "./hadrons/hadron.js";
export type { Member, Multiplet, MultipletQuantumNumbers } from "./hadrons/multiplet.js";
export type { AsymmetricError, Particle } from "./hadrons/particle.js";
export {
  type Fit,
  type FitModelOptions,
  type FittedParameter,
  fitModel,
  LISTED_DELTA_CHI2,
  MIRROR_DELTA_CHI2,
  type Pull,
  type StudyMinimum,
} from "./model/fit-model.js";
export type {
  Channel as DecayChannel,
  Decay,
  Model,
  Observable,
  Parameter,
  Parent,
  TotalWidth,
  Wave as DecayWave,
  WidthModelChoice,
} from "./model/model.js";
export type { ValidityWarning } from "./model/parent-validity.js";
export { resolveStudy } from "./model/resolve-study.js";
export { studyWarnings, validityWarnings } from "./model/validity.js";
export { studyJsonSchema } from "./study/json-schema.js";
export { listProblems } from "./study/list-problems.js";
export { draftStudy, readStudy, type StudyDraft } from "./study/read-study.js";
export type {
  MeasuredKind,
  Quantity,
  Study,
  StudyAngle,
  StudyChargeState,
  StudyDecay,
  StudyFitOptions,
  StudyMeasurement,
  StudyMember,
  StudyMixing,
  StudyMultiplet,
  StudyPrior,
  StudyProblem,
} from "./study/study.js";
// SU(2) and SU(3): irreps, products, Clebsch-Gordan coefficients and isoscalar factors in convention `deswart-v1`.
export { clebschGordan } from "./su2/clebsch-gordan.js";
export { sixJ } from "./su2/six-j.js";
export { CasimirCoupling, casimirEigenvalue } from "./su3/casimir-coupling.js";
export { su3ClebschGordan } from "./su3/clebsch-gordan.js";
export {
  type CouplingTree,
  type TreePath,
  type TreeTerm,
  type TreeTransformation,
  treePaths,
  treeStates,
  treeTransformation,
} from "./su3/coupling-trees.js";
export { type ChainTerm, chainState, chainTransformation, type FlavourChain } from "./su3/flavour-chains.js";
export {
  casimir,
  conjugate,
  type Irrep,
  type IsospinMultiplet,
  irrepDimension,
  irrepName,
  isospinMultiplets,
  parseIrrep,
  sameIrrep,
  triality,
} from "./su3/irrep.js";
export {
  type Channel as IsoscalarChannel,
  CONVENTION,
  type IsoscalarFactor,
  type IsoscalarTable,
  isoscalarFactor,
  isoscalarTable,
  MULTIPLICITY_RULE,
} from "./su3/isoscalar-factors.js";
export { antisymmetricPower, symmetricPower } from "./su3/powers.js";
export {
  type CouplingPath,
  type CouplingStep,
  couplingPaths,
  decomposeProduct,
  irrepMultiplicities,
  type SeriesEntry,
} from "./su3/product.js";
export { type PairPath, type Recoupling, recouplingMatrix } from "./su3/recoupling.js";
export { conjugateState, type State, sameState, states, threeCharge } from "./su3/state.js";
export { structureD, structureF } from "./su3/structure-constants.js";
export { type CopyMatrix, conjugationMatrix, exchangeMatrix, transferMatrix } from "./su3/symmetries.js";
export { type TensorComponent, type TensorState, tensorOverlap, tensorStates } from "./su3/tensor-form.js";
// Tables as sealed Protocol Buffers files, and what must go with them.
export { canonicalJson } from "./tables/canonical-json.js";
export { CAUTIONS } from "./tables/cautions.js";
export {
  type Change,
  type Comparison as TableComparison,
  compareTables,
  DEFAULT_THRESHOLDS,
  type ItemChange,
  type Thresholds,
} from "./tables/compare.js";
export type { ItemKind } from "./tables/compare-items.js";
export type { Leaf } from "./tables/compare-leaves.js";
export { decodeCouplings } from "./tables/decode-couplings.js";
export { decodeDecays } from "./tables/decode-decays.js";
export { decodeFactors } from "./tables/decode-factors.js";
export { type CascadeDrawer, type CascadeParticle, cascadeDrawer } from "./tables/draw-cascade.js";
export { encodeCouplings } from "./tables/encode-couplings.js";
export { decayPieces, encodeDecays, type StreamedTables } from "./tables/encode-decays.js";
export { encodeFactors } from "./tables/encode-factors.js";
export {
  fractionsAt,
  type HadronsByName,
  type RowsEvaluator,
  rowsEvaluator,
  tableHadrons,
} from "./tables/evaluate-rows.js";
export { type AccordOptions, exportAccord } from "./tables/export-accord.js";
export { exportCouplingsLatex } from "./tables/export-couplings-latex.js";
export { exportCouplingsCsv, exportDecaysCsv } from "./tables/export-csv.js";
export { exportDecaysLatex } from "./tables/export-latex.js";
export type { OwnNumbers } from "./tables/export-numbers.js";
export { chainWeights, type ReplicaWeights, replicaWeights } from "./tables/replica-weights.js";
export { checkSeal, digestOf, sealedPieces, type TableKind } from "./tables/sealed-bytes.js";
export { type DecayFile, openDecays } from "./tables/stream-decays.js";
export {
  type WatchBeside,
  type WholeFile,
  writeAllWhole,
  writeWhole,
  writeWholePieces,
} from "./tables/whole-file.js";
// How sure a fit is: profiles, pseudo-experiments, leaving one out, other width models, errors in parts.
export { type ErrorParts, type ErrorPartsOptions, errorParts } from "./uncertainty/error-parts.js";
export {
  type LeaveOneOutOptions,
  type LeftOut,
  leaveOneOut,
  type ShiftedParameter,
} from "./uncertainty/leave-one-out.js";
export { type ModelSpread, modelSpread, type SkippedModel } from "./uncertainty/model-spread.js";
export {
  PROFILE_LEVELS,
  type ProfileFitOptions,
  profileQuantities,
  type QuantityProfile,
} from "./uncertainty/profile.js";
export {
  type PseudoExperimentOptions,
  type PseudoExperiments,
  type PseudoQuantity,
  pseudoExperiments,
} from "./uncertainty/pseudo-experiments.js";
export {
  channelWidths,
  isospinWidths,
  parameterQuantities,
  type StudyQuantity,
} from "./uncertainty/quantities.js";
export { packageVersion } from "./version.js";
// Width models and two-body kinematics, in MeV.
export { allowedWaves, type Wave as AllowedWave } from "./widths/allowed-waves.js";
export { breakupMomentumMeV } from "./widths/breakup-momentum.js";
export { drawChannel, drawDaughterMasses, drawMassesJointly, type MassSource } from "./widths/draw-decay.js";
export { type DrawGrid, drawGrid, drawMass } from "./widths/draw-mass.js";
export { type Daughter, foldedFactor, foldedWidth, type TwoBodyChannel } from "./widths/folded-width.js";
export { type LineShape, type LineShapeOptions, lineShape } from "./widths/line-shape.js";
export {
  gridWidth,
  gridWidthMeV,
  type MassGrid,
  type MassGridOptions,
  massGrid,
} from "./widths/mass-grid.js";
export { channelFractions, type ParentLineShape, parentLineShape } from "./widths/parent-line-shape.js";
export { partialWidthMeV, type TwoBodyDecay } from "./widths/partial-width.js";
export {
  couplingWidth,
  powerWidth,
  type RunningWidth,
  totalWidth,
  widthThrough,
} from "./widths/running-width.js";
export { type WidthModel, widthModel, widthModelDefinitions } from "./widths/width-model.js";
export type {
  SpinParity,
  Vertex,
  WidthModelDefinition,
  WidthModelOption,
  WidthModelOptions,
} from "./widths/width-model-definition.js";
