import type { SourcePosition } from "../errors.js";

/**
 * A number with its errors, as a study writes it. `plus` and `minus` are standard deviations > 0, or 0 where the
 * study gives none.
 */
export interface Quantity {
  readonly value: number;
  readonly plus: number;
  readonly minus: number;
  /** `MeV` after conversion, or `1` for a pure number. */
  readonly unit: "MeV" | "1";
}

/** One isospin multiplet of a study's multiplet. Masses and widths in MeV. */
export interface StudyMember {
  readonly name: string;
  /** Place in the irrep: a trade name such as `Lambda`, or `Y=0 I=1`. */
  readonly place: string;
  /** Absent: the catalogue's, by the names of the charge states. */
  readonly mass?: Quantity | undefined;
  /** Total width; `sum` takes the sum of the member's rows. Absent: the catalogue's. */
  readonly width?: Quantity | "sum" | undefined;
  /** What single charge states have of their own, by name. */
  readonly chargeStates: Readonly<Record<string, StudyChargeState>>;
}

/** What one charge state has of its own; what is absent comes from the member. */
export interface StudyChargeState {
  readonly mass?: Quantity | undefined;
  readonly width?: Quantity | undefined;
  readonly mcNumber?: number | undefined;
}

/** A multiplet written member by member. Members may be missing. */
export interface StudyMultiplet {
  readonly irrep: string;
  readonly twoJ: number;
  readonly parity: 1 | -1;
  readonly baryonNumber: number;
  readonly members: readonly StudyMember[];
}

/** A decay between multiplets, all of whose channels share the reduced couplings. */
export interface StudyDecay {
  /** Prefix of the couplings' names; empty where the study has one decay. */
  readonly name: string;
  readonly from: string;
  /** Order matters: baryon first, meson second. */
  readonly to: readonly [string, string];
  readonly L: number;
  /** Twice the daughters' total spin; undefined where the study leaves it to L. */
  readonly twoS?: number | undefined;
  readonly model: { readonly id: string; readonly options: Readonly<Record<string, number | Quantity>> };
  readonly masses: "charge" | "average";
}

/** What a measurement is of: a partial width, a fraction of the total width, or a ratio of partial widths. */
export type MeasuredKind = "width" | "fraction" | "ratio";

/** One measurement. `channels` has one entry, or two for a ratio (numerator, denominator). */
export interface StudyMeasurement {
  readonly kind: MeasuredKind;
  /** As written, e.g. `N(1675) -> N pi`. */
  readonly channels: readonly string[];
  readonly value: Quantity;
  readonly source: string;
  /** Where it counts: in the fit, in the table, or in both. */
  readonly use: "fit" | "table" | "both";
}

/** A study as written: checked for form, units resolved, nothing looked up. */
export interface Study {
  readonly file: string;
  /** The whole file, kept for the table's header. */
  readonly text: string;
  readonly title: string;
  readonly multiplets: Readonly<Record<string, StudyMultiplet>>;
  readonly decays: readonly StudyDecay[];
  readonly measurements: readonly StudyMeasurement[];
  /** What to do about a second minimum within the chi2 distance that does not exclude it. */
  readonly mirrors: "refuse" | "best" | "each";
  /** Breaking of the symmetry in amplitude, relative to a decay's coupling strength; for predictions' errors. */
  readonly breaking: number;
  /** Position of every value, by path such as `measurements/0/value`. */
  readonly positions: ReadonlyMap<string, SourcePosition>;
}
