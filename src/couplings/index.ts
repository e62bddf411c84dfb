export {
  antisymmetricCouplingOfF,
  type Estimate,
  type FAndD,
  type FAndDForm,
  fAndD,
  fAndDForm,
  hasFAndD,
  symmetricCouplingOfD,
} from "./f-and-d.js";
export { type Form, FormMaker, type FormTerm, type IsospinForm } from "./form.js";
export {
  ISOSPIN_LAGRANGIAN,
  type IsospinConstant,
  isospinConstantName,
  isospinConstants,
} from "./isospin-lagrangian.js";
export {
  MATRIX_CONVENTION,
  MatrixConvention,
  type MatrixEntry,
  OCTET_LAGRANGIAN,
} from "./matrix-convention.js";
export { MASS_BREAKING, type Operator, type OperatorPart, STRONG } from "./operator.js";
export {
  type DecayScheme,
  type FlavourMultiplet,
  type Reduced,
  reducedCouplings,
} from "./reduced-coupling.js";
