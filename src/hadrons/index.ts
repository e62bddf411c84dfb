export {
  type CatalogueEdition,
  canonicalName,
  catalogueEdition,
  catalogueParticle,
  catalogueParticles,
  findParticle,
} from "./catalogue.js";
export { catalogueMultiplet, catalogueMultipletIds } from "./catalogue-multiplet.js";
export { chargeStateName, chargeStates, type MemberValues } from "./charge-states.js";
export {
  type ContentTerm,
  type Hadron,
  type Leg,
  makeHadron,
  stateCharge,
  threeHypercharge,
} from "./hadron.js";
export { K_LONG_MC_NUMBER, K_SHORT_MC_NUMBER, type McNumberContent, mcNumberContent } from "./mc-number.js";
export {
  assembleMultiplet,
  hadronOfState,
  isospinAveragedMassMeV,
  type Member,
  type MemberParticles,
  type Multiplet,
  type MultipletQuantumNumbers,
  placeText,
} from "./multiplet.js";
export { editDistance, nearestNames } from "./nearest-names.js";
export { type AsymmetricError, antiparticle, antiparticleName, type Particle } from "./particle.js";
export { placeOf } from "./place.js";
