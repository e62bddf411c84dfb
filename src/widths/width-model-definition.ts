/** Spin and parity of one hadron; `twoJ` is twice the spin. */
export interface SpinParity {
  readonly twoJ: number;
  readonly parity: 1 | -1;
}

/**
 * What a width model may know of a decay besides its masses: the wave, and the spins and parities where they are known.
 *
 * Models that depend on L alone need nothing else; the effective Lagrangians refuse in words when a spin is missing.
 */
export interface Vertex {
  readonly L: number;
  readonly parent?: SpinParity;
  readonly daughters?: readonly [SpinParity, SpinParity];
}

/** Masses and momentum of one two-body decay above its threshold, all in MeV; the momentum is > 0. */
export interface Kinematics {
  readonly parentMeV: number;
  readonly firstMeV: number;
  readonly secondMeV: number;
  readonly momentumMeV: number;
}

/** One adjustable constant of a width model, with its unit and the values it may take. */
export interface WidthModelOption {
  readonly name: string;
  readonly unit: string;
  readonly default: number;
  readonly minimum: number;
  readonly maximum: number;
  readonly integer: boolean;
  readonly meaning: string;
  /**
   * What a table means that does not have the option: how the model was before it had it. Undefined where a table must
   * have it. It never changes, unlike the default.
   */
  readonly absent?: number;
  /** Whether K of a vertex depends on the option; left out where it always does. */
  concerns?(vertex: Vertex): boolean;
}

/** Values of a model's options, by name. */
export type WidthModelOptions = Readonly<Record<string, number>>;

/**
 * A way to turn a flavour amplitude into a width: Gamma = s |A|^2 K(M, m1, m2; wave), of which this is K.
 *
 * `factorMeV` is only ever called with a vertex and options that have been checked and completed. A new model is one file
 * that exports one of these, and one line in `width-model.ts`.
 */
export interface WidthModelDefinition {
  readonly id: string;
  readonly title: string;
  readonly formula: string;
  readonly source: string;
  readonly provenance: "memory" | "read" | "common practice" | "derived";
  readonly options: readonly WidthModelOption[];
  /** Refuses a vertex the model has no formula for (InputError). */
  requireVertex(vertex: Vertex): void;
  /** Unit of the amplitude A, so that |A|^2 K is in MeV: `1`, `MeV` or `1/MeV`. */
  amplitudeUnit(vertex: Vertex): string;
  /** K of one wave, ready for many masses; what it returns is only ever called above threshold. */
  factorMeV(vertex: Vertex, options: WidthModelOptions): KinematicFactor;
}

/** K in MeV times the inverse square of the amplitude's unit; it keeps nothing of what it is given. */
export type KinematicFactor = (kinematics: Kinematics) => number;
