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
export { MASS_BREAKING, type Operator, type OperatorPart, STRONG } from "./operator.js";
export {
  type DecayScheme,
  type FlavourMultiplet,
  type Reduced,
  reducedCouplings,
} from "./reduced-coupling.js";
