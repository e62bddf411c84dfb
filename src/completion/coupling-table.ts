import type { FAndDForm } from "../couplings/f-and-d.js";
import type { IsospinConstant } from "../couplings/isospin-lagrangian.js";
import type { SignedRoot } from "../exact/signed-root.js";
import type { Leg } from "../hadrons/hadron.js";
import type { Fit } from "../model/fit-model.js";
import type { Estimate } from "./tables.js";

/** Exact coefficient of one reduced coupling, in the phases of states and in those of matrices. */
export interface CouplingTerm {
  /** Index into the decay's reduced couplings. */
  readonly reduced: number;
  readonly group: SignedRoot;
  /** Null where an irrep has no matrix form, or the row is of whole isospin multiplets. */
  readonly matrix: SignedRoot | null;
}

/** What one triple of pure states contributes to a vertex; a vertex of pure hadrons has one. */
export interface CouplingComponent {
  /** Index into the model's decays. */
  readonly decay: number;
  /** Parent and daughters, in the decay's order: baryon first. In an isospin row I3 means nothing. */
  readonly legs: readonly [Leg, Leg, Leg];
  /** Product of the mixing weights; 1 for pure hadrons. */
  readonly weight: number;
  readonly terms: readonly CouplingTerm[];
  /** Coefficients of D and F, for an octet into two octets. */
  readonly fAndD: { readonly group: FAndDForm; readonly matrix: FAndDForm | null } | null;
}

/** The coupling of one vertex in one partial wave: of charge states, or of whole isospin multiplets. */
export interface Coupling {
  readonly id: string;
  /** Index of the channel in the model, and of its wave; an isospin row has those of one of its charge states. */
  readonly channel: number;
  readonly wave: number;
  readonly components: readonly CouplingComponent[];
  /** Flavour amplitude in the phases of states, in the coupling's unit. */
  readonly value: Estimate;
  /** The same in the phases of matrices; null where these are not defined. */
  readonly matrixValue: Estimate | null;
  /** What breaking that entered the fit adds to the value beside the components; null without one. */
  readonly breakingShift: number | null;
  readonly unit: string;
  /** Name of the constant of the isospin Lagrangian it depends on, for isospin rows of baryon octets. */
  readonly constant: string | null;
}

/** The fitted value of one reduced coupling of a decay. */
export interface ReducedValue {
  readonly decay: number;
  /** Index into the decay's reduced couplings. */
  readonly reduced: number;
  readonly value: Estimate;
  readonly unit: string;
}

/** The constants of the isospin Lagrangian for one decay of a baryon octet into an octet baryon and a meson. */
export interface DecayConstants {
  readonly decay: number;
  readonly unit: string;
  readonly constants: readonly (IsospinConstant & { readonly value: Estimate })[];
}

/** Every coupling of a study, for one minimum of its fit. */
export interface CouplingTable {
  readonly fit: Fit;
  /** Index of the minimum the values are from. */
  readonly minimum: number;
  readonly reduced: readonly ReducedValue[];
  readonly isospin: readonly Coupling[];
  readonly charged: readonly Coupling[];
  readonly constants: readonly DecayConstants[];
}
