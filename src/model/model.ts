import type { Form } from "../couplings/form.js";
import type { Reduced } from "../couplings/reduced-coupling.js";
import type { SourcePosition } from "../errors.js";
import type { Hadron } from "../hadrons/hadron.js";
import type { Multiplet } from "../hadrons/multiplet.js";
import type { MeasuredKind, Quantity, Study } from "../study/study.js";

/**
 * A number the fit may vary. Reduced couplings come first and in the order of their decays; total widths that are
 * measured with an error follow, held by their prior.
 */
export interface Parameter {
  readonly name: string;
  readonly kind: "coupling" | "total width";
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
  readonly model: { readonly id: string; readonly options: Readonly<Record<string, number>> };
  readonly masses: "charge" | "average";
  readonly reduced: readonly Reduced[];
  /** Index of the first reduced coupling among the model's parameters. */
  readonly firstParameter: number;
}

/**
 * One partial wave of one channel. The flavour amplitude is linear in the couplings: the sum over components of
 * weight times exact form, and `evaluate` is the only place where it meets parameter values.
 */
export interface Wave {
  /** Index into `Model.decays`. */
  readonly decay: number;
  /** Exact forms between pure states, with the product of the hadrons' mixing weights. */
  readonly components: readonly { readonly weight: number; readonly form: Form }[];
  /** K of the width model at nominal masses: partial width = identicalFactor |A|^2 K. In MeV over the square of the coupling's unit. */
  readonly kinematicFactor: number;
}

/** One decay channel in definite charge states. */
export interface Channel {
  /** e.g. `N(1675)+ -> p pi0`. */
  readonly id: string;
  readonly parent: Hadron;
  readonly daughters: readonly [Hadron, Hadron];
  /** e.g. `N(1675) -> N pi`; channels that share it share one isospin amplitude. */
  readonly isospinChannel: string;
  /** Square of the SU(2) coefficient between the isospin amplitude and this channel. */
  readonly isospinShare: number;
  readonly identicalFactor: 1 | 0.5;
  readonly thresholdMeV: number;
  /** At nominal charge-state masses; 0 if closed. */
  readonly momentumMeV: number;
  readonly waves: readonly Wave[];
}

/** A weighted sum of partial widths, by index into `Model.channels`. */
export type WidthSum = readonly { readonly channel: number; readonly weight: number }[];

/** What an observable's numerator is divided by: nothing, a fixed or fitted total width, or a sum of widths. */
export type Denominator =
  | { readonly kind: "one" }
  | { readonly kind: "fixed"; readonly widthMeV: number }
  | { readonly kind: "parameter"; readonly index: number }
  | { readonly kind: "sum"; readonly sum: WidthSum };

/** A measured quantity, tied to the channels it is about. */
export interface Observable {
  /** e.g. `width N(1675) -> N pi`. */
  readonly label: string;
  readonly kind: MeasuredKind;
  readonly measured: Quantity;
  readonly source: string;
  readonly use: "fit" | "table" | "both";
  readonly numerator: WidthSum;
  readonly denominator: Denominator;
  readonly position: SourcePosition;
}

/** The width that the fractions of a parent refer to. */
export interface TotalWidth {
  readonly kind: "measured" | "sum";
  /** 0 if the kind is `sum`. */
  readonly widthMeV: number;
  readonly plusMeV: number;
  readonly minusMeV: number;
}

/** A parent of the table: one charge state of a member of a decaying multiplet. */
export interface Parent {
  readonly hadron: Hadron;
  readonly multiplet: string;
  readonly total: TotalWidth;
  /** Indices into `Model.channels`. */
  readonly channels: readonly number[];
}

/** A study with everything looked up and every coefficient exact: plain data. */
export interface Model {
  readonly study: Study;
  readonly parameters: readonly Parameter[];
  readonly couplingCount: number;
  readonly decays: readonly Decay[];
  readonly parents: readonly Parent[];
  readonly channels: readonly Channel[];
  readonly observables: readonly Observable[];
  /** Approximations made, e.g. mixing that is ignored. */
  readonly notes: readonly string[];
  /** Editions of the data used. */
  readonly editions: readonly string[];
}
