import { lifetimeSeconds } from "../completion/closure.js";
import type {
  Comparison,
  Estimate,
  Flag,
  MassShape,
  Origin,
  ParentTable,
  Replica,
  Row,
  RowWave,
  Tables,
} from "../completion/tables.js";
import { couplet } from "../gen/couplet.js";
import type { Hadron } from "../hadrons/hadron.js";
import { type Fit, type FittedParameter, LISTED_DELTA_CHI2, type StudyMinimum } from "../model/fit-model.js";
import type { Model } from "../model/model.js";
import { studyWarnings } from "../model/validity.js";
import type { StudyTableOptions } from "../study/study.js";
import { CONVENTION, MULTIPLICITY_RULE } from "../su3/isoscalar-factors.js";
import { producerName } from "../version.js";
import type { MassGrid } from "../widths/mass-grid.js";
import { widthModel } from "../widths/width-model.js";
import { CAUTIONS } from "./cautions.js";
import { sealedPieces } from "./sealed-bytes.js";
import { optionMessages } from "./wave-options.js";

import v1 = couplet.v1;

/** Lowest minor version of the schema a reader of our decay tables must know. */
export const DECAYS_SCHEMA_MINOR = 0;

/**
 * Decay tables as the bytes of a sealed `couplet.v1.DecayTables` file. The same tables give the same bytes.
 */
export function encodeDecays(tables: Tables): Uint8Array {
  return Buffer.concat([...sealedPieces(decayPieces(tables))]);
}

/** Decay tables whose parents may come one by one, so that a large file never is in memory whole. */
export type StreamedTables = Omit<Tables, "parents"> & { readonly parents: Iterable<ParentTable> };

/**
 * The bytes of decay tables without their seal, piece by piece, one parent a piece: `sealedPieces` and
 * `writeWholePieces` make a file of them. Together they are the bytes of one message.
 */
export function* decayPieces(tables: StreamedTables): Generator<Uint8Array> {
  const { parents, externals, leftOpen, replicas, ...head } = decaysMessage({ ...tables, parents: [] });
  yield v1.DecayTables.encode(head).finish();
  for (const parent of tables.parents)
    yield v1.DecayTables.encode({ parents: [parentMessage(parent)] }).finish();
  yield v1.DecayTables.encode({ externals, leftOpen, replicas } as v1.DecayTables.$Properties).finish();
}

/** Decay tables as a message, without the digest. */
export function decaysMessage(tables: Tables): v1.DecayTables.$Properties {
  const { model } = tables.fit;
  return {
    kind: "couplet.v1.DecayTables",
    header: headerMessage(model, studyWarnings(tables.fit, tables.minimum)),
    fit: fitMessage(tables.fit, tables.minimum),
    parents: tables.parents.map(parentMessage),
    externals: tables.externals.map(({ hadron, lineShape }) => hadronMessage(hadron, lineShape)),
    replicas: tables.replicas.map((replica) => replicaMessage(replica, model.study.tables.seed)),
    leftOpen: tables.externals.flatMap(({ hadron, life }) => (life === "decays" ? [hadron.name] : [])),
  };
}

/**
 * The header that all tables of a study share; `schemaMinor` is that of decay tables.
 *
 * @param warnings - limits of validity that the study touches; they join its notes
 */
export function headerMessage(
  { study, notes, editions }: Model,
  warnings: readonly string[],
): v1.Header.$Properties {
  return {
    schemaMinor: DECAYS_SCHEMA_MINOR,
    producer: producerName(),
    title: study.title,
    studyText: study.text,
    convention: CONVENTION,
    multiplicityRule: MULTIPLICITY_RULE,
    unit: "MeV",
    editions: [...editions],
    cautions: [...CAUTIONS],
    notes: [...notes, ...warnings],
    breaking: study.breaking,
    policies: policiesMessage(study.tables),
  };
}

function policiesMessage({
  conflicts,
  neutralKaons,
  antiparticles,
  daughters,
}: StudyTableOptions): v1.Policies.$Properties {
  return { conflicts, neutralKaons, antiparticles, daughters };
}

/** The fit behind a table: every minimum near the best one, and which of them the table is from. */
export function fitMessage(fit: Fit, used: number): v1.Fit.$Properties {
  const listed = listedMinima(fit.minima);
  return {
    minima: listed.map(minimumMessage),
    otherMinima: fit.minima.length - listed.length,
    used,
    mirrors: fit.model.study.fit.mirrors,
  };
}

function listedMinima(minima: readonly StudyMinimum[]): StudyMinimum[] {
  return minima.filter(({ chi2 }) => chi2 - minima[0]!.chi2 < LISTED_DELTA_CHI2);
}

function minimumMessage(minimum: StudyMinimum): v1.Minimum.$Properties {
  return {
    chi2: minimum.chi2,
    ndf: minimum.ndf,
    probability: minimum.probability ?? null,
    parameters: minimum.parameters.map(({ name, value, error, unit, kind }: FittedParameter) => ({
      name,
      value,
      error,
      unit,
      kind,
    })),
    pulls: minimum.pulls.map(({ observable, fitted, pull }) => ({
      quantity: observable.label,
      measured: observable.measured.value,
      plus: observable.measured.plus,
      minus: observable.measured.minus,
      fitted,
      pull,
      unit: observable.measured.unit,
      source: observable.source,
    })),
  };
}

function parentMessage(table: ParentTable): v1.Parent.$Properties {
  const { hadron, multiplet, total } = table.parent;
  const { plus, minus } = table.totalWidthErrorsMeV;
  return {
    hadron: hadronMessage(hadron, table.lineShape),
    multiplet,
    totalWidth: table.totalWidthMeV,
    totalWidthError: (plus + minus) / 2,
    totalWidthPlus: plus,
    totalWidthMinus: minus,
    totalOrigin:
      total.kind === "sum" ? v1.TotalOrigin.TOTAL_ORIGIN_SUM : v1.TotalOrigin.TOTAL_ORIGIN_MEASURED,
    rows: table.rows.map(rowMessage),
    warnings: [...table.warnings],
    totalSource: total.source,
  };
}

function hadronMessage(hadron: Hadron, lineShape: MassShape | undefined): v1.Hadron.$Properties {
  const mean = (error: { plus: number; minus: number } | null) =>
    error === null ? null : (error.plus + error.minus) / 2;
  return {
    name: hadron.name,
    mcNumber: hadron.mcNumber,
    mcAliases: [...hadron.mcAliases],
    mass: hadron.massMeV,
    massError: mean(hadron.massErrorMeV),
    massPlus: hadron.massErrorMeV.plus,
    massMinus: hadron.massErrorMeV.minus,
    width: hadron.widthMeV,
    widthError: mean(hadron.widthErrorMeV),
    twoJ: hadron.twoJ,
    parity: hadron.parity,
    charge: hadron.charge,
    baryonNumber: hadron.baryonNumber,
    strangeness: hadron.strangeness,
    charm: hadron.charm,
    antiparticle: hadron.antiparticle,
    content: hadron.content.map(({ leg, weight }) => ({
      multiplet: leg.multiplet,
      state: { ...leg.state },
      weight,
    })),
    notes: [...hadron.notes],
    lifetime: lifetimeSeconds(hadron),
    ...(lineShape === undefined ? {} : { lineShape: lineShapeMessage(lineShape) }),
  };
}

function lineShapeMessage({ windowMeV, normalisation, draw }: MassShape): v1.LineShape.$Properties {
  const [low, high] = windowMeV;
  const { distancesMeV, cumulative, power } = draw;
  return { low, high, normalisation, distances: [...distancesMeV], cumulative: [...cumulative], power };
}

// The encoder only reads lists, so that long ones need not be copied.
function gridMessage({ thresholdMeV, distancesMeV, logWidths, slopes }: MassGrid): v1.MassGrid.$Properties {
  return {
    threshold: thresholdMeV,
    distances: distancesMeV as number[],
    logWidths: logWidths as number[],
    slopes: slopes as number[],
  };
}

const ORIGINS: Readonly<Record<Origin, v1.Origin>> = {
  measured: v1.Origin.ORIGIN_MEASURED,
  predicted: v1.Origin.ORIGIN_PREDICTED,
  remainder: v1.Origin.ORIGIN_REMAINDER,
};

const KINEMATICS: Readonly<Record<Row["kinematics"], v1.Kinematics>> = {
  open: v1.Kinematics.KINEMATICS_OPEN,
  folded: v1.Kinematics.KINEMATICS_FOLDED,
  closed: v1.Kinematics.KINEMATICS_CLOSED,
};

const FLAGS: Readonly<Record<Flag, v1.Flag>> = {
  "isospin-split": v1.Flag.FLAG_ISOSPIN_SPLIT,
  undecayable: v1.Flag.FLAG_UNDECAYABLE,
  folded: v1.Flag.FLAG_FOLDED,
  "near-threshold": v1.Flag.FLAG_NEAR_THRESHOLD,
  "small-amplitude": v1.Flag.FLAG_SMALL_AMPLITUDE,
  adjusted: v1.Flag.FLAG_ADJUSTED,
  weak: v1.Flag.FLAG_WEAK,
};

function rowMessage(row: Row): v1.Row.$Properties {
  const message: v1.Row.$Properties = {
    id: row.id,
    daughters: row.daughters.map(({ name, mcNumber }) => ({ name, mcNumber })),
    partsPerBillion: row.partsPerBillion,
    fraction: estimateMessage(row.fraction),
    width: estimateMessage(row.widthMeV),
    origin: ORIGINS[row.origin],
    flags: row.flags.map((flag) => FLAGS[flag]),
    sources: [...row.sources],
    kinematics: KINEMATICS[row.kinematics],
    threshold: row.thresholdMeV,
    momentum: row.momentumMeV,
    identicalFactor: row.identicalFactor,
    waves: row.waves.map(waveMessage),
    integratedFraction: row.integrated?.value ?? null,
    power: row.power ?? null,
    kaonFlavours: (row.kaonFlavours ?? []).map(({ re, im, ...flavour }) => ({
      ...flavour,
      re: [...re],
      im: [...im],
    })),
    replicaRatios: [...(row.replicaRatios ?? [])],
  };
  const { measurement, integrated, grid, isospin, unadjusted } = row;
  if (measurement !== undefined) message.measurement = comparisonMessage(measurement);
  if (integrated !== undefined) message.integrated = estimateMessage(integrated);
  if (grid !== undefined) message.grid = gridMessage(grid);
  if (isospin !== undefined) {
    message.isospinChannel = isospin.channel;
    message.isospinCoefficient = isospin.coefficient;
  }
  if (unadjusted !== undefined) {
    message.unadjustedFraction = estimateMessage(unadjusted.fraction);
    message.unadjustedWidth = estimateMessage(unadjusted.widthMeV);
  }
  return message;
}

const PARTS: Readonly<Record<Replica["part"], v1.ReplicaPart>> = {
  data: v1.ReplicaPart.REPLICA_PART_DATA,
  breaking: v1.ReplicaPart.REPLICA_PART_BREAKING,
  branch: v1.ReplicaPart.REPLICA_PART_BRANCH,
  model: v1.ReplicaPart.REPLICA_PART_MODEL,
};

function replicaMessage(
  { part, minimum, chi2, model, draw, unreachableRows }: Replica,
  seed: number,
): v1.Replica.$Properties {
  return {
    part: PARTS[part],
    minimum,
    chi2,
    ...(model === undefined
      ? {}
      : { model: model.id, options: optionMessages(widthModel(model.id, model.options)) }),
    ...(draw === undefined ? {} : { seed, draw }),
    unreachableRows,
  };
}

// Field by field, here and in rows: copying the rest of an object costs as much as encoding it.

function comparisonMessage(measured: Comparison): v1.Comparison.$Properties {
  const { quantity, value, plus, minus, unit, fitted, pull, share } = measured;
  return { quantity, value, plus, minus, unit, fitted: fitted ?? null, pull: pull ?? null, share };
}

/** A value with its errors as a message. */
export function estimateMessage(estimate: Estimate): v1.Estimate.$Properties {
  const { value, plus, minus, breaking, branch, model } = estimate;
  return { value, plus, minus, breaking, branch: branch ?? null, model: model ?? null };
}

function waveMessage(wave: RowWave): v1.Wave.$Properties {
  const { L, twoS, re, im, flavourAmplitude, unit, kinematicFactor, model, phase } = wave;
  return {
    twoL: 2 * L,
    twoS,
    re,
    im,
    flavourAmplitude,
    unit,
    kinematicFactor,
    phase: phase === "known" ? v1.Phase.PHASE_KNOWN : v1.Phase.PHASE_ASSUMED,
    model: model.id,
    options: optionMessages(model),
  };
}
