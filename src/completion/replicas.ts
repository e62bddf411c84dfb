import { EigenvalueDecomposition, Matrix } from "ml-matrix";
import { normalNumbers } from "../fit/random-normal.js";
import { Evaluation, type Evaluator, evaluator } from "../model/evaluate.js";
import type { Parent, TableValue } from "../model/model.js";
import { type Alternative, alternativeEntries } from "./alternatives.js";
import type { CommonNormalisation } from "./common-normalisations.js";
import { leadingWave, type Predictions } from "./predictions.js";
import type { Replica } from "./tables.js";
import type { Entry } from "./total-width.js";

/** One coherent alternative to all numbers that tables are made from. */
export interface World {
  readonly replica: Omit<Replica, "unreachableRows">;
  /** Its entries of the parent at an index of the model's parents, for those of the tables. */
  entries(parent: Parent, parentIndex: number, own: readonly Entry[]): Entry[];
  /** Its measured total width of a parent. */
  totalMeV(parent: Parent): number;
  /** Square of the leading amplitude of a channel that is closed at nominal masses; undefined where it has no meaning. */
  closedSquare(channel: number): number | undefined;
}

/** What worlds are drawn from. */
export interface WorldOptions {
  readonly predictions: Predictions;
  /** Measured values that entries refer to. */
  readonly values: readonly TableValue[];
  /** The normalisation that each of them shares with others. */
  readonly normalisations: readonly (CommonNormalisation | undefined)[];
  readonly alternatives: readonly Alternative[];
  /** Draws of each kind. */
  readonly count: number;
  /** A 32-bit integer. */
  readonly seed: number;
}

/**
 * Replicas of tables: `count` draws for the errors of the data, as many for breaking of the symmetry if the study has any,
 * and each alternative once.
 *
 * Data: the parameters by the fit's covariance; every measured value of a row and every total width by its own errors, two
 * half-Gaussians where they have two sides; all independent of each other, as quoted errors have it, but for the factor that
 * values of one normalisation share. Breaking: in each
 * isospin channel and wave A -> A + breaking |g| z, z common to the charge states and to the charge conjugates.
 */
export function worlds(options: WorldOptions): World[] {
  const { predictions, alternatives, count } = options;
  const ready = evaluator(predictions.fit.model);
  const root = covarianceRoot(predictions.minimum.covariance);
  const draws = Array.from({ length: count }, (_, draw) => draw);
  const breaks = predictions.fit.model.study.breaking > 0;
  return [
    ...draws.map((draw) => dataWorld(options, ready, root, draw)),
    ...(breaks ? draws.map((draw) => breakingWorld(options, draw)) : []),
    ...alternatives.map((alternative) => alternativeWorld(predictions, alternative)),
  ];
}

/** Draw number `draw` of a kind has a stream of its own, so that more draws leave the first as they are. */
function streamOf(seed: number, kind: 0 | 1, draw: number): () => number {
  return normalNumbers(seed, 2 * draw + kind);
}

function dataWorld(
  { predictions, values, normalisations, seed }: WorldOptions,
  ready: Evaluator,
  root: Matrix,
  draw: number,
): World {
  const { model } = predictions.fit;
  const normal = streamOf(seed, 0, draw);
  const shifts = root.mmul(Matrix.columnVector(model.parameters.map(() => normal()))).to1DArray();
  const evaluation = new Evaluation(
    ready,
    predictions.minimum.vector.map((value, k) => value + shifts[k]!),
  );
  const measured = values.map(({ measured: { value, plus, minus } }) => drawn(value, plus, minus, normal()));
  const totals = new Map<string, number>();
  for (const parent of model.parents) {
    const { widthMeV, plusMeV, minusMeV } = parent.total;
    const key = totalKey(parent);
    if (!totals.has(key)) totals.set(key, drawn(widthMeV, plusMeV, minusMeV, normal()));
  }
  // Last, so that studies without them have the numbers they had.
  const factors = new Map<string, number>();
  for (const common of normalisations)
    if (common !== undefined && !factors.has(common.name))
      factors.set(common.name, Math.max(0, 1 + common.error * normal()));
  const factorOf = (value: number) => factors.get(normalisations[value]?.name ?? "") ?? 1;
  return {
    replica: { ...ownReplica(predictions), part: "data", draw },
    entries: (parent, _, own) =>
      own.map((entry, k) =>
        entry.kind === "predicted"
          ? { ...entry, widthMeV: evaluation.width(parent.channels[k]!).value }
          : {
              ...entry,
              value: measured[entry.observable]! * factorOf(entry.observable) * entry.share,
            },
      ),
    totalMeV: (parent) => totals.get(totalKey(parent))!,
    closedSquare: (channel) => evaluation.amplitude(channel, leadingWaveOf(predictions, channel)).value ** 2,
  };
}

/** A value drawn by its own errors; widths and fractions are not negative. */
function drawn(value: number, plus: number, minus: number, z: number): number {
  return Math.max(0, value + z * (z < 0 ? minus : plus));
}

/** Parents with the same key have one measured total width: charge states of one isospin multiplet, antiparticles. */
function totalKey({ hadron, multiplet, total }: Parent): string {
  const { name, antiparticle, baryonNumber, strangeness, charm, content } = hadron;
  const kind =
    content.length === 0
      ? [name, antiparticle].sort()
      : [Math.abs(baryonNumber), Math.abs(strangeness), Math.abs(charm), content[0]!.leg.state.twoI];
  return JSON.stringify([multiplet, kind, total]);
}

function breakingWorld({ predictions, seed }: WorldOptions, draw: number): World {
  const { evaluation, channels: predicted } = predictions;
  const { channels, study } = evaluation.model;
  const normal = streamOf(seed, 1, draw);
  const moved = new Map<string, number>();
  const amplitudes = channels.map(({ waves, isospinCoefficient }, channel) =>
    waves.map((_, w) => {
      const key = `${predicted[channel]!.group} ${w}`;
      if (!moved.has(key)) moved.set(key, normal());
      const strength = Math.abs(isospinCoefficient) * evaluation.couplingStrength(channel, w).value;
      // Along the amplitude's own sign, which charge states and conjugates have their own of.
      return Math.abs(predicted[channel]!.amplitudes[w]!) + study.breaking * strength * moved.get(key)!;
    }),
  );
  const widthMeV = (channel: number) =>
    channels[channel]!.waves.reduce(
      (sum, _, w) =>
        sum +
        channels[channel]!.identicalFactor *
          amplitudes[channel]![w]! ** 2 *
          evaluation.kinematicFactor(channel, w),
      0,
    );
  return {
    replica: { ...ownReplica(predictions), part: "breaking", draw },
    entries: (parent, _, own) =>
      own.map((entry, k) =>
        entry.kind === "predicted" ? { ...entry, widthMeV: widthMeV(parent.channels[k]!) } : entry,
      ),
    totalMeV: ({ total }) => total.widthMeV,
    closedSquare: (channel) => amplitudes[channel]![leadingWaveOf(predictions, channel)]! ** 2,
  };
}

/** An alternative as the whole answer that it is. */
export function alternativeWorld(own: Predictions, alternative: Alternative): World {
  const { part, minimum, model, predictions } = alternative;
  const { chi2 } = predictions.minimum;
  return {
    replica: { part, minimum, chi2, ...(model === undefined ? {} : { model }) },
    entries: (_, parentIndex) => alternativeEntries(alternative, parentIndex),
    totalMeV: ({ total }) => total.widthMeV,
    // Amplitudes of different models cannot be compared.
    closedSquare: (channel) =>
      part === "model"
        ? undefined
        : predictions.channels[channel]!.amplitudes[leadingWaveOf(own, channel)]! ** 2,
  };
}

function ownReplica({ fit, minimum }: Predictions): Pick<Replica, "minimum" | "chi2"> {
  return { minimum: fit.minima.indexOf(minimum), chi2: minimum.chi2 };
}

/** The leading wave of a channel as predictions have it. */
export function leadingWaveOf({ fit, channels }: Predictions, channel: number): number {
  return leadingWave(fit.model.channels[channel]!.waves, channels[channel]!.amplitudes);
}

/** A matrix R with R R^T the covariance, which may be singular; the scales of the parameters do not matter. */
function covarianceRoot(covariance: readonly (readonly number[])[]): Matrix {
  const sizes = covariance.map((row, k) => Math.sqrt(Math.max(0, row[k]!)));
  const correlation = covariance.map((row, i) =>
    row.map((value, j) => (sizes[i]! > 0 && sizes[j]! > 0 ? value / (sizes[i]! * sizes[j]!) : 0)),
  );
  const { realEigenvalues, eigenvectorMatrix } = new EigenvalueDecomposition(new Matrix(correlation), {
    assumeSymmetric: true,
  });
  const root = eigenvectorMatrix.clone();
  for (let j = 0; j < sizes.length; j++) {
    root.mulColumn(j, Math.sqrt(Math.max(0, realEigenvalues[j]!)));
  }
  for (let i = 0; i < sizes.length; i++) root.mulRow(i, sizes[i]!);
  return root;
}
