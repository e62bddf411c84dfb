import type { Hadron } from "../hadrons/hadron.js";
import type { Fit } from "../model/fit-model.js";
import type { Parent, WidthModelChoice } from "../model/model.js";
import type { DrawGrid } from "../widths/draw-mass.js";
import type { MassGrid } from "../widths/mass-grid.js";

/** A value whose errors are kept apart; all are standard deviations in the value's unit. */
export interface Estimate {
  readonly value: number;
  readonly plus: number;
  readonly minus: number;
  /** From breaking of the symmetry; 0 for what no prediction enters. */
  readonly breaking: number;
  /** Largest difference to the value of another minimum within `LISTED_DELTA_CHI2`; undefined if not computed. */
  readonly branch?: number;
  /** Half the range of the values over width models; undefined if they were not compared. */
  readonly model?: number;
}

/** Where a row's number comes from. */
export type Origin = "measured" | "predicted" | "remainder";

/** What a user of a row must know. */
export type Flag =
  | "isospin-split"
  | "folded"
  | "undecayable"
  | "near-threshold"
  | "small-amplitude"
  | "adjusted"
  | "weak";

/** A measurement beside the fit's value of the same quantity. */
export interface Comparison {
  readonly quantity: string;
  readonly value: number;
  readonly plus: number;
  readonly minus: number;
  readonly unit: string;
  /** Undefined where the measurement did not enter the fit. */
  readonly fitted?: number;
  readonly pull?: number;
  /** Part of the value that is the row's. */
  readonly share: number;
}

/** One partial wave of a row; the squares of all amplitudes add up to the row's partial width. */
export interface RowWave {
  readonly L: number;
  readonly twoS: number;
  /** sqrt(MeV); real here, since couplings are. */
  readonly re: number;
  readonly im: number;
  /** Whether the data fix the signs of the row's waves against each other; `known` for a single wave. */
  readonly phase: "known" | "assumed";
  readonly model: WidthModelChoice;
  /** Of the fit, in the coupling's unit. */
  readonly flavourAmplitude: number;
  readonly unit: string;
  /** K at the nominal mass as the fit has it, in MeV over the square of the unit. */
  readonly kinematicFactor: number;
}

/** One decay channel of one parent. */
export interface Row {
  readonly id: string;
  readonly daughters: readonly Hadron[];
  readonly partsPerBillion: number;
  readonly fraction: Estimate;
  /** Fraction integrated over the parent's line shape; absent for a parent that has none. */
  readonly integrated?: Estimate;
  readonly widthMeV: Estimate;
  readonly origin: Origin;
  readonly flags: readonly Flag[];
  readonly sources: readonly string[];
  readonly measurement?: Comparison;
  /** Open at nominal masses; open only through the width of a daughter; or closed. */
  readonly kinematics: "open" | "folded" | "closed";
  readonly thresholdMeV: number;
  readonly momentumMeV: number;
  readonly identicalFactor: number;
  readonly waves: readonly RowWave[];
  /** Partial width against mass; absent for a remainder, or where it vanishes. */
  readonly grid?: MassGrid;
  /** Channel of whole isospin multiplets, and the SU(2) coefficient; absent outside the symmetry. */
  readonly isospin?: { readonly channel: string; readonly coefficient: number };
  /** Power of the distance from threshold with which the width grows; of rows outside the symmetry. */
  readonly power?: number;
  /** Fraction and width before a policy moved them; absent for rows that stand as they were. */
  readonly unadjusted?: { readonly fraction: Estimate; readonly widthMeV: Estimate };
  /** Of a weak row without waves: the phase of its amplitude, where it is known. */
  readonly amplitude?: { readonly phaseRad: number };
  /** What a row with K_S0 or K_L0 is projected from; absent without a projection. */
  readonly kaonFlavours?: readonly FlavourAmplitude[];
  /** By replica of the tables: its partial width over the row's, in single precision; absent where all are 1. */
  readonly replicaRatios?: readonly number[];
}

/**
 * One flavour row behind a row with K_S0 or K_L0. The amplitude of the projected row is the sum over flavour rows of
 * projection times amplitude, before it is squared.
 */
export interface FlavourAmplitude {
  /** Id of the flavour row, e.g. `K*(892)+ -> K0 pi+`. */
  readonly row: string;
  /** Coefficient of the flavour state in the projected one, e.g. sqrt(1/2). */
  readonly projection: number;
  /** sqrt(MeV); by wave in the order of the row's waves, or one for a row without. */
  readonly re: readonly number[];
  readonly im: readonly number[];
}

/** Distribution of a hadron's mass. */
export interface MassShape {
  readonly windowMeV: readonly [number, number];
  /** N, by which the density is divided. */
  readonly normalisation: number;
  readonly draw: DrawGrid;
}

/** The decay table of one charge state. */
export interface ParentTable {
  readonly parent: Parent;
  readonly totalWidthMeV: number;
  readonly totalWidthErrorsMeV: { readonly plus: number; readonly minus: number };
  readonly rows: readonly Row[];
  /** Absent for a parent that is narrow or has no open row: it has its nominal mass. */
  readonly lineShape?: MassShape;
  readonly warnings: readonly string[];
}

/** A daughter that the tables do not decay; unstable ones with the line shape they were averaged over. */
export interface External {
  readonly hadron: Hadron;
  readonly lineShape?: MassShape;
  /** How far the tables leave it to others; see `closureOf`. */
  readonly life: Life;
}

/**
 * What becomes of a hadron that has no rows: it is stable, it flies on before it decays, it decays at once; or as its
 * antiparticle, which has rows.
 */
export type Life = "stable" | "flies" | "decays" | "conjugate";

/** What one replica of the tables is. */
export interface Replica {
  /** The part of the errors that it is a sample of, or that it is the other end of. */
  readonly part: "data" | "breaking" | "branch" | "model";
  /** Index of the minimum in the study's own fit. */
  readonly minimum: number;
  /** Of that minimum or, with another width model, of its fit. */
  readonly chi2: number;
  /** The width model of all decays; absent where it is the study's own. */
  readonly model?: WidthModelChoice;
  /** Number of the draw, from 0; absent for what is not drawn. */
  readonly draw?: number;
  /** Rows that it gives a width and the tables do not: no weight can bring them into a finished simulation. */
  readonly unreachableRows: number;
}

/** Decay tables of all members and charge states of a study, for one minimum of its fit. */
export interface Tables {
  readonly fit: Fit;
  /** Index of the minimum the rows use. */
  readonly minimum: number;
  readonly parents: readonly ParentTable[];
  /** Daughters that are no parents of these tables; every daughter is one or the other. */
  readonly externals: readonly External[];
  /** Alternatives that rows have ratios for; empty unless the study asks for them. */
  readonly replicas: readonly Replica[];
}
