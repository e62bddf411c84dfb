import type { SourcePosition } from "../errors.js";

/**
 * A number with its errors, as a study writes it. `plus` and `minus` are standard deviations > 0, or 0 where the
 * study gives none.
 */
export interface Quantity {
  readonly value: number;
  readonly plus: number;
  readonly minus: number;
  /** `MeV` or `rad` after conversion, or `1` for a pure number. */
  readonly unit: "MeV" | "rad" | "1";
  /** True for a range `a to b`, whose half-width is no standard deviation. */
  readonly soft?: boolean;
  /** Set for an upper limit; the value is then 0 and `plus` and `minus` are the limit itself. */
  readonly limit?: { readonly confidence: number };
}

/** One isospin multiplet of a study's multiplet. Masses and widths in MeV. */
export interface StudyMember {
  readonly name: string;
  /** Place in the irrep: a trade name such as `Lambda`, or `Y=0 I=1`. */
  readonly place: string;
  /** Absent: the catalogue's, by the names of the charge states; `relation`: filled from the other members. */
  readonly mass?: Quantity | "relation" | undefined;
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
  readonly mcAliases: readonly number[];
}

/** A multiplet written member by member. Members may be missing. */
export interface StudyMultiplet {
  readonly irrep: string;
  readonly twoJ: number;
  readonly parity: 1 | -1;
  /** Of a meson multiplet's neutral members; null where it is not given. */
  readonly cParity: 1 | -1 | null;
  readonly baryonNumber: number;
  readonly members: readonly StudyMember[];
}

/** A decay between multiplets, all of whose channels share the reduced couplings. */
export interface StudyDecay {
  /** Path in the file, for messages: its list and place in it. */
  readonly path: string;
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
  /** Whether unstable daughters are averaged over their line shapes, or stand at their nominal masses. */
  readonly daughters: "folded" | "nominal";
}

/** A member that stands at no place by itself. */
export type StudyState = Omit<StudyMember, "place" | "mass"> & { readonly mass?: Quantity | undefined };

/**
 * Physical states that mix: state k is the sum over r of U(k, r) times the bare state r, U orthogonal and built from
 * plane rotations, one angle for each pair of states in the order (1,2), (1,3), ..., (2,3), ...
 */
export interface StudyMixing {
  /** Path in the file, for messages: its list and place in it. */
  readonly path: string;
  /** Places of the bare states, `multiplet/place`, e.g. `pseudoscalar-octet/eta`. */
  readonly bare: readonly string[];
  /** As many states; `place` is absent. */
  readonly states: readonly StudyState[];
  readonly angles: readonly StudyAngle[];
  /** How the angle of two states is meant; see the README. */
  readonly convention: "rotation" | "meson" | "quark";
}

/**
 * A mixing angle: fitted freely, given in radians (with an error: fitted under it), from the states' masses, or from the
 * angle of the pair that the state named is in.
 */
export type StudyAngle =
  | "free"
  | "quadratic masses"
  | "linear masses"
  | { readonly tiedTo: string }
  | Quantity;

/** What a measurement is of. */
export type MeasuredKind =
  | "width"
  | "fraction"
  | "ratio"
  | "product"
  | "amplitude"
  | "residue"
  | "total"
  | "axial";

/** One measurement. `channels` has one entry, or two for a ratio, a product, an amplitude or a residue. */
export interface StudyMeasurement {
  /** Path in the file, for messages: its list and place in it. */
  readonly path: string;
  readonly kind: MeasuredKind;
  /** As written, e.g. `N(1675) -> N pi`; for a total width the parent's name. */
  readonly channels: readonly string[];
  /** The value; for an amplitude of which only the sign is known, +1 or -1. */
  readonly value: Quantity;
  readonly signOnly: boolean;
  /** Sign s_f of the reaction of an amplitude or residue; `free` is fitted, one for each reaction. */
  readonly sign: 1 | -1 | "free";
  /** Phase of a residue, of which only the sign of its cosine counts; undefined where it is not given. */
  readonly phase?: Quantity | undefined;
  /** Name of a common normalisation. */
  readonly normalisation?: string | undefined;
  readonly source: string;
  /** Where it counts: in the fit, in the table, or in both. */
  readonly use: "fit" | "table" | "both";
}

/** What is known of a parameter, or of F, D and their ratios, before the fit. */
export interface StudyPrior {
  /** Path in the file, for messages: its list and place in it. */
  readonly path: string;
  readonly parameter: string;
  readonly value: Quantity;
  readonly source: string;
}

/** A decay outside the symmetry: measured, or one that takes a part of the remainder. */
export interface StudyMode {
  /** Path in the file, for messages: its list and place in it. */
  readonly path: string;
  /** As written, e.g. `N(1520)+ -> p gamma`. */
  readonly mode: string;
  readonly value:
    | { readonly kind: "width" | "fraction"; readonly measured: Quantity }
    | { readonly kind: "remainder"; readonly weight: number };
  /** Power of the distance from threshold; undefined where it follows from the daughters. */
  readonly power?: number | undefined;
  /** In MeV; undefined where it is the sum of the daughters' masses. */
  readonly threshold?: Quantity | undefined;
  readonly weak: boolean;
  readonly phase?: Quantity | undefined;
  readonly source: string;
}

/** A particle that a study adds to the catalogue, as a daughter of modes. */
export interface StudyParticle {
  /** Path in the file, for messages: its list and place in it. */
  readonly path: string;
  readonly name: string;
  readonly mass: Quantity;
  readonly width?: Quantity | undefined;
  readonly charge: number;
  readonly twoJ: number;
  readonly parity: 1 | -1;
  readonly cParity: 1 | -1 | null;
  /** Twice the isospin; undefined where it is not given. */
  readonly twoI?: number | undefined;
  readonly baryonNumber: number;
  readonly strangeness: number;
  readonly charm: number;
  readonly mcNumber?: number | undefined;
  readonly mcAliases: readonly number[];
}

/** Policies of the tables, each by its name. */
export interface StudyTableOptions {
  /** What to do about fractions that add up to more than 1. */
  readonly conflicts: "refuse" | "constrained";
  readonly neutralKaons: "flavour" | "short-long";
  /** Whether antiparticles of parents have rows of their own. */
  readonly antiparticles: "implied" | "rows";
  /** Whether short-lived ground states among the daughters are decayed as measured. */
  readonly daughters: "external" | "decayed";
  /** Whether the fit is repeated with other width models, for the errors of rows. */
  readonly widthModels: "own" | "compared";
  /** Alternatives drawn for each kind of error, and their seed. */
  readonly replicas: number;
  readonly seed: number;
}

/** Something wrong in a study file, with where it stands. */
export interface StudyProblem {
  /** Path of the value, such as `measurements/0/value`; empty for faults of syntax. */
  readonly path: string;
  readonly position: SourcePosition;
  /** What was expected, what came, and how to mend it. */
  readonly text: string;
}

/** A study as written: checked for form, units resolved, nothing looked up. */
export interface Study {
  readonly file: string;
  /** The whole file, kept for the table's header. */
  readonly text: string;
  readonly title: string;
  readonly multiplets: Readonly<Record<string, StudyMultiplet>>;
  readonly mixing: readonly StudyMixing[];
  readonly decays: readonly StudyDecay[];
  /** Families of decays tied by the quark-line rule, by the decays' names. */
  readonly quarkLine: readonly (readonly string[])[];
  readonly measurements: readonly StudyMeasurement[];
  readonly modes: readonly StudyMode[];
  readonly particles: readonly StudyParticle[];
  /** Relative standard deviations of common normalisations, by name. */
  readonly normalisations: Readonly<Record<string, number>>;
  readonly priors: readonly StudyPrior[];
  readonly fit: StudyFitOptions;
  readonly tables: StudyTableOptions;
  /** Breaking of the symmetry in amplitude, relative to a decay's coupling strength; for predictions' errors. */
  readonly breaking: number;
  /** Names of its own hadrons as written, even in entries that have faults. */
  readonly hadronNames: readonly string[];
  /** Position of every value, by path such as `measurements/0/value`. */
  readonly positions: ReadonlyMap<string, SourcePosition>;
}

/** How a study wants to be fitted. */
export interface StudyFitOptions {
  /** What to do about a second minimum within the chi2 distance that does not exclude it. */
  readonly mirrors: "refuse" | "best" | "each";
  /** Breaking in amplitude that enters the fit, relative to a decay's coupling strength; 0 leaves it out. */
  readonly theoryError: number;
  /** Whether the parents' masses move within their errors. */
  readonly masses: "fixed" | "vary";
}
