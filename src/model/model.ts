import type { Form } from "../couplings/form.js";
import type { Reduced } from "../couplings/reduced-coupling.js";
import type { SourcePosition } from "../errors.js";
import type { Hadron } from "../hadrons/hadron.js";
import type { Multiplet } from "../hadrons/multiplet.js";
import type { Quantity, Study } from "../study/study.js";
import type { WaveKinematics } from "./kinematics.js";

/**
 * A number the fit may vary. Couplings come first; every other kind is a nuisance parameter held by its prior, or a
 * free mixing angle.
 */
export interface Parameter {
  readonly name: string;
  readonly kind: "coupling" | "mixing angle" | "total width" | "mass" | "normalisation" | "breaking";
  readonly unit: string;
  readonly start: number;
  /** Gaussian prior, possibly of two halves; absent for free parameters. */
  readonly prior?: { readonly value: number; readonly plus: number; readonly minus: number };
}

/** A decay between multiplets, resolved: one wave, its width model and its reduced couplings. */
export interface Decay {
  readonly name: string;
  readonly from: Multiplet;
  readonly to: readonly [Multiplet, Multiplet];
  readonly L: number;
  readonly twoS: number;
  readonly model: WidthModelChoice;
  readonly masses: "charge" | "average";
  readonly daughters: "folded" | "nominal";
  readonly reduced: readonly Reduced[];
  /**
   * Each reduced coupling as a linear combination of the model's couplings, `reduced.length` rows of
   * `couplingCount` numbers: unit vectors, unless a relation such as the quark-line rule ties couplings together.
   */
  readonly couplingRows: readonly (readonly number[])[];
}

/** A width model by its id, with every option's value. */
export interface WidthModelChoice {
  readonly id: string;
  readonly options: Readonly<Record<string, number>>;
}

/** One plane rotation of a mixing matrix by `sign * angle + offset`; the angle is fixed or a parameter. */
export interface Rotation {
  readonly first: number;
  readonly second: number;
  /** In radians, in the convention the study writes it in; the start where it is a parameter. */
  readonly angle: number;
  readonly sign: 1 | -1;
  readonly offset: number;
  readonly parameter?: number;
  /** The angle t' of the rotation is that of sin 2t' = this times sin 2t, and cos 2t' has the sign of cos 2t. */
  readonly tiedBy?: number;
}

/**
 * A group of like states that mix: physical state k is the sum over r of U(k, r) times bare state r, U the product of
 * the rotations, the first one leftmost.
 */
export interface Mixing {
  readonly states: readonly string[];
  readonly bare: readonly string[];
  readonly rotations: readonly Rotation[];
}

/** The element (state, bare) of a mixing matrix, by index into `Model.mixing`. */
export interface MixingElement {
  readonly mixing: number;
  readonly state: number;
  readonly bare: number;
}

/** One pure-flavour contribution to a wave: a weight, elements of mixing matrices, and an exact form. */
export interface Component {
  /** Index into `Model.decays`. */
  readonly decay: number;
  readonly weight: number;
  readonly mixing: readonly MixingElement[];
  readonly form: Form;
}

/**
 * One partial wave of one channel. Its flavour amplitude is the sum over components of weight times mixing elements
 * times the exact form; `evaluate` is the only place where they meet parameter values.
 */
export interface Wave {
  readonly L: number;
  readonly twoS: number;
  readonly model: WidthModelChoice;
  readonly components: readonly Component[];
  readonly kinematics: WaveKinematics;
  /** K of the width model at nominal masses: partial width = identicalFactor |A|^2 K. In MeV over the square of the coupling's unit. */
  readonly kinematicFactor: number;
  /** Whether K is averaged over the line shape of an unstable daughter. */
  readonly folded: boolean;
  /** d ln K / d(mass parameter), for masses that the fit moves; K = kinematicFactor exp(sum of slope times shift). */
  readonly massSlopes: readonly { readonly parameter: number; readonly slope: number }[];
  /** Parameter z of the breaking that enters the fit: A_I -> A_I + theoryError |g| z; absent without one. */
  readonly breaking?: number;
}

/** One decay channel in definite charge states. */
export interface Channel {
  /** e.g. `N(1675)+ -> p pi0`. */
  readonly id: string;
  readonly parent: Hadron;
  readonly daughters: readonly [Hadron, Hadron];
  /** e.g. `N(1675) -> N pi`; channels that share it share one isospin amplitude. */
  readonly isospinChannel: string;
  /** SU(2) coefficient between the isospin amplitude and this channel's: A = coefficient times A_I. */
  readonly isospinCoefficient: number;
  readonly identicalFactor: 1 | 0.5;
  readonly thresholdMeV: number;
  /** At nominal charge-state masses; 0 if closed. */
  readonly momentumMeV: number;
  readonly waves: readonly Wave[];
}

/** A weighted sum of partial widths, by index into `Model.channels`; of all waves, or of some by their index. */
export type WidthSum = readonly {
  readonly channel: number;
  readonly weight: number;
  readonly waves?: readonly number[];
}[];

/** The total width a fraction refers to: fixed, a parameter, or a sum of partial widths. */
export type Total =
  | { readonly kind: "fixed"; readonly widthMeV: number }
  | { readonly kind: "parameter"; readonly index: number }
  | { readonly kind: "sum"; readonly sum: WidthSum };

/**
 * What a measurement is of. An isospin pair is an entrance and an exit whose isospin amplitudes A_i, A_f and phase
 * spaces k_i, k_f give the signed product A_i A_f sqrt(k_i k_f).
 */
export type Quantum =
  | { readonly kind: "width"; readonly of: WidthSum }
  | { readonly kind: "fraction"; readonly of: WidthSum; readonly total: Total }
  | { readonly kind: "ratio"; readonly of: WidthSum; readonly over: WidthSum }
  | { readonly kind: "product"; readonly of: WidthSum; readonly by: WidthSum; readonly total: Total }
  | {
      readonly kind: "amplitude";
      readonly pair: readonly [WidthSum, WidthSum];
      readonly total: Total;
      readonly sign: 1 | -1;
      readonly reaction?: string;
    }
  | {
      readonly kind: "residue";
      readonly pair: readonly [WidthSum, WidthSum];
      /** Absent where no phase is given: only the modulus counts. */
      readonly sign?: 1 | -1;
      readonly reaction?: string;
    }
  | { readonly kind: "total"; readonly of: WidthSum }
  | { readonly kind: "axial"; readonly row: readonly number[] }
  | { readonly kind: "parameter"; readonly parameter: PriorTarget };

/** What a prior is on: a parameter by its index, or F, D or a ratio of them for a decay by its index. */
export type PriorTarget =
  | { readonly parameter: number }
  | { readonly decay: number; readonly name: "F" | "D" | "F/D" | "alpha_F" | "alpha_D" };

/** A measured quantity, tied to the channels it is about. */
export interface Observable {
  /** e.g. `width N(1675) -> N pi`. */
  readonly label: string;
  readonly quantum: Quantum;
  readonly measured: Quantity;
  /** Only the sign counts: the residual is 0 for the right one, and grows with the amplitude otherwise. */
  readonly signOnly: boolean;
  /** Parameter z of a common normalisation and its relative error n: the prediction is multiplied by 1 + n z. */
  readonly normalisation?: { readonly parameter: number; readonly error: number };
  readonly source: string;
  readonly use: "fit" | "table" | "both";
  readonly position: SourcePosition;
}

/** A measured value that stands in a table, whatever it is of. */
export type TableValue = Pick<Observable, "label" | "measured" | "source" | "position">;

/** What settles a mode: a part of a measured value, or a share of what the other rows leave. */
export type ModeOrigin =
  | {
      readonly kind: "width" | "fraction";
      /** Index into `Model.modeValues`. */
      readonly value: number;
      /** Part of the measured value that is this mode's. */
      readonly share: number;
      readonly split: boolean;
    }
  | { readonly kind: "remainder"; readonly weight: number; readonly source: string };

/** A final state outside the symmetry: a row whose width grows as a power of the distance from threshold. */
export interface Mode {
  /** e.g. `N(1520)+ -> p gamma`. */
  readonly id: string;
  /** Hadrons, photons and leptons. */
  readonly daughters: readonly Hadron[];
  readonly thresholdMeV: number;
  readonly power: number;
  readonly weak: boolean;
  /** Phase of the amplitude in radians; null where it is not known. */
  readonly phaseRad: number | null;
  readonly origin: ModeOrigin;
  /** Path in the study, for messages. */
  readonly path: string;
}

/** The width that the fractions of a parent refer to. */
export interface TotalWidth {
  readonly kind: "measured" | "sum";
  /** 0 if the kind is `sum`. */
  readonly widthMeV: number;
  readonly plusMeV: number;
  readonly minusMeV: number;
  /** "study", or the edition of the catalogue; empty if the kind is `sum`. */
  readonly source: string;
}

/** A parent of the table: one charge state of a member of a decaying multiplet, or a hadron that has modes only. */
export interface Parent {
  readonly hadron: Hadron;
  /** Empty for a hadron that is in none. */
  readonly multiplet: string;
  readonly total: TotalWidth;
  /** Indices into `Model.channels`. */
  readonly channels: readonly number[];
  readonly modes: readonly Mode[];
}

/** A study with everything looked up and every coefficient exact: plain data. */
export interface Model {
  readonly study: Study;
  readonly parameters: readonly Parameter[];
  readonly couplingCount: number;
  readonly decays: readonly Decay[];
  readonly mixing: readonly Mixing[];
  readonly parents: readonly Parent[];
  readonly channels: readonly Channel[];
  readonly observables: readonly Observable[];
  /** Measured values of modes; they are not fitted. */
  readonly modeValues: readonly TableValue[];
  /** Approximations made, e.g. mixing that is ignored. */
  readonly notes: readonly string[];
  /** Editions of the data used. */
  readonly editions: readonly string[];
}
