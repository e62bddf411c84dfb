import { InputError } from "../errors.js";
import type { Hadron } from "../hadrons/hadron.js";
import type { Fit } from "../model/fit-model.js";
import type { Channel, Model, Observable, Parent, Quantum } from "../model/model.js";
import { partsPerBillion } from "./parts-per-billion.js";
import { type Predictions, predict } from "./predictions.js";
import type { Comparison, Flag, ParentTable, Row, RowWave, Tables } from "./tables.js";
import { type Completed, completeParent, type Entry } from "./total-width.js";

/** Below this momentum, in MeV, phase space rules the width; common practice, as is one width above threshold. */
const NEAR_THRESHOLD_MOMENTUM_MEV = 100;

/** Below this part of the coupling strength, breaking may dominate an amplitude. */
const SMALL_AMPLITUDE = 0.2;

/**
 * Complete decay tables of all members and charge states: what is measured stays, the rest is predicted, what is left
 * of a measured total width is an explicit remainder, and each parent's fractions add up to 10^9 parts exactly.
 *
 * @param minimum - index of the minimum of the fit that predicts
 * @throws InputError naming the entries where measured and predicted fractions add up to more than 1
 */
export function complete(fit: Fit, minimum: number): Tables {
  const { model } = fit;
  const predictions = predict(fit, minimum);
  const measured = measuredWidths(model, predictions);
  const problems: string[] = [];
  const parents: ParentTable[] = [];
  for (const parent of model.parents) {
    const entries = parent.channels.map((index) => entryOf(model, predictions, index, measured));
    const completed = completeParent(
      parent,
      entries,
      predictions.minimum.covariance,
      measured.observables,
      model,
    );
    if ("conflict" in completed) problems.push(`${model.study.file}: ${completed.conflict}`);
    else parents.push(parentTable(model, predictions, parent, entries, completed));
  }
  if (problems.length > 0) throw new InputError(problems.join("\n"));
  return { fit, minimum, parents, externals: externalDaughters(model) };
}

interface MeasuredShare {
  /** Index into `Measured.observables`. */
  readonly observable: number;
  /** Part of the measured value that belongs to the channel. */
  readonly share: number;
  /** True if the measurement is of more than this one channel of the parent. */
  readonly split: boolean;
}

interface Measured {
  readonly observables: readonly Settling[];
  readonly byChannel: ReadonlyMap<number, MeasuredShare>;
}

type Settling = Observable & { readonly quantum: Extract<Quantum, { kind: "width" | "fraction" }> };

/** Whether a measurement stands in the table: a width or fraction of whole channels that the study puts there. */
function settlesRows(observable: Observable): observable is Settling {
  const { quantum, use, measured } = observable;
  if (use === "fit" || measured.limit !== undefined) return false;
  return (
    (quantum.kind === "width" || quantum.kind === "fraction") &&
    quantum.of.every(({ waves }) => waves === undefined)
  );
}

/** The channels that measurements settle, and how each measured sum splits into charge states. */
function measuredWidths(model: Model, predictions: Predictions): Measured {
  const observables = model.observables.filter(settlesRows);
  const byChannel = new Map<number, MeasuredShare>();
  for (const [index, observable] of observables.entries()) {
    const parents = new Set(observable.quantum.of.map(({ channel }) => model.channels[channel]!.parent.name));
    for (const parent of parents) {
      const channels = observable.quantum.of
        .map(({ channel }) => channel)
        .filter((c) => model.channels[c]!.parent.name === parent);
      const weights = channels.map((channel) =>
        chargeWeight(model.channels[channel]!, predictions.channels[channel]!.amplitudes),
      );
      const sum = weights.reduce((total, weight) => total + weight, 0);
      for (const [k, channel] of channels.entries()) {
        const taken = byChannel.get(channel);
        if (taken !== undefined) refuseTwice(model, channel, observables[taken.observable]!, observable);
        if (sum === 0) refuseClosed(model, channel, observable);
        byChannel.set(channel, { observable: index, share: weights[k]! / sum, split: channels.length > 1 });
      }
    }
  }
  return { observables, byChannel };
}

/** Relative width of a charge channel within its isospin channel: isospin times phase space, wave by wave. */
function chargeWeight(channel: Channel, amplitudes: readonly number[]): number {
  const known = amplitudes.some((amplitude) => amplitude !== 0);
  return channel.waves.reduce((sum, wave, w) => {
    const square = known ? amplitudes[w]! ** 2 : channel.isospinCoefficient ** 2;
    return sum + channel.identicalFactor * square * wave.kinematicFactor;
  }, 0);
}

function refuseTwice(model: Model, channel: number, first: Observable, second: Observable): never {
  const { file, line, column } = second.position;
  throw new InputError(
    `${file}:${line}:${column}: ${second.label}: ${model.channels[channel]!.id} is settled already by "${first.label}" (line ${first.position.line}). Give one of the two \`use: fit\`, so that one stands in the table.`,
  );
}

function refuseClosed(model: Model, channel: number, observable: Observable): never {
  const { file, line, column } = observable.position;
  const { id, thresholdMeV, parent } = model.channels[channel]!;
  throw new InputError(
    `${file}:${line}:${column}: ${observable.label}: expected a channel that is open, got ${id} with its threshold at ${thresholdMeV.toFixed(1)} MeV above the parent's ${parent.massMeV} MeV. Give it \`use: fit\`, or check the masses.`,
  );
}

function entryOf(model: Model, predictions: Predictions, index: number, measured: Measured): Entry {
  const { id } = model.channels[index]!;
  const { widthMeV, gradient, breakingMeV } = predictions.channels[index]!;
  const found = measured.byChannel.get(index);
  if (found === undefined) return { id, kind: "predicted", widthMeV, gradient, breakingMeV };
  const { quantum, measured: quantity } = measured.observables[found.observable]!;
  return {
    id,
    kind: quantum.kind === "width" ? "measured width" : "measured fraction",
    observable: found.observable,
    share: found.share,
    value: quantity.value * found.share,
    split: found.split,
  };
}

function parentTable(
  model: Model,
  predictions: Predictions,
  parent: Parent,
  entries: readonly Entry[],
  completed: Completed,
): ParentTable {
  const fractions = completed.estimates.map(({ fraction }) => fraction.value);
  const remainder = completed.remainder;
  const all = remainder === undefined ? fractions : [...fractions, remainder.fraction.value];
  const parts = partsPerBillion(all, residueRow(entries, fractions, remainder !== undefined));
  const rows = parent.channels.map((index, k): Row => {
    const channel = model.channels[index]!;
    const { fraction, widthMeV } = completed.estimates[k]!;
    const entry = entries[k]!;
    const comparison =
      entry.kind === "predicted"
        ? undefined
        : comparisonOf(predictions, completed.observables[entry.observable]!);
    return {
      id: channel.id,
      daughters: channel.daughters,
      partsPerBillion: parts[k]!,
      fraction,
      widthMeV,
      origin: entry.kind === "predicted" ? "predicted" : "measured",
      flags: flagsOf(channel, entry, predictions.channels[index]!.relativeStrength),
      sources: entry.kind === "predicted" ? [] : [completed.observables[entry.observable]!.source],
      ...(comparison === undefined ? {} : { measurement: comparison }),
      open: channel.momentumMeV > 0,
      thresholdMeV: channel.thresholdMeV,
      momentumMeV: channel.momentumMeV,
      identicalFactor: channel.identicalFactor,
      waves: wavesOf(channel, predictions.channels[index]!, widthMeV.value),
    };
  });
  if (remainder !== undefined) rows.push(remainderRow(parent, parts.at(-1)!, remainder));
  return {
    parent,
    totalWidthMeV: completed.totalMeV,
    totalWidthErrorMeV: completed.totalErrorMeV,
    rows,
    warnings: warningsOf(parent, completed),
  };
}

/** Where the residue of rounding goes: the remainder, else the largest predicted row, else the largest row. */
function residueRow(entries: readonly Entry[], fractions: readonly number[], hasRemainder: boolean): number {
  if (hasRemainder) return fractions.length;
  const largest = (wanted: (entry: Entry) => boolean) =>
    fractions.reduce(
      (best, f, k) => (wanted(entries[k]!) && (best < 0 || f > fractions[best]!) ? k : best),
      -1,
    );
  const predicted = largest((entry) => entry.kind === "predicted");
  return predicted >= 0 && fractions[predicted]! > 0 ? predicted : largest(() => true);
}

function comparisonOf(predictions: Predictions, observable: Observable): Comparison {
  const { value, plus, minus, unit } = observable.measured;
  const pull = predictions.minimum.pulls.find((candidate) => candidate.observable === observable);
  return {
    quantity: observable.label,
    value,
    plus,
    minus,
    unit,
    ...(pull === undefined ? {} : { fitted: pull.fitted, pull: pull.pull }),
  };
}

function flagsOf(channel: Channel, entry: Entry, relativeStrength: number): Flag[] {
  const flags: Flag[] = [];
  if (entry.kind !== "predicted" && entry.split) flags.push("isospin-split");
  const distance = Math.abs(channel.parent.massMeV - channel.thresholdMeV);
  const slow = channel.momentumMeV > 0 && channel.momentumMeV < NEAR_THRESHOLD_MOMENTUM_MEV;
  if (slow || distance < (channel.parent.widthMeV ?? 0)) flags.push("near-threshold");
  if (relativeStrength < SMALL_AMPLITUDE) flags.push("small-amplitude");
  return flags;
}

/** Amplitudes whose squares add up to the row's width: the fit's, scaled to a measured width where there is one. */
function wavesOf(
  channel: Channel,
  { amplitudes, widthMeV }: { amplitudes: readonly number[]; widthMeV: number },
  rowWidthMeV: number,
): RowWave[] {
  return channel.waves.map((wave, w): RowWave => {
    const { L, twoS } = wave;
    const fitted = amplitudes[w]! * Math.sqrt(channel.identicalFactor * wave.kinematicFactor);
    const scaled =
      widthMeV > 0
        ? fitted * Math.sqrt(rowWidthMeV / widthMeV)
        : Math.sqrt(rowWidthMeV / channel.waves.length);
    return { L, twoS, re: scaled, im: 0, model: wave.model, flavourAmplitude: amplitudes[w]! };
  });
}

function remainderRow(
  parent: Parent,
  parts: number,
  { fraction, widthMeV }: NonNullable<Completed["remainder"]>,
): Row {
  return {
    id: `${parent.hadron.name} -> (remainder)`,
    daughters: [],
    partsPerBillion: parts,
    fraction,
    widthMeV,
    origin: "remainder",
    flags: ["undecayable"],
    sources: [],
    open: true,
    thresholdMeV: 0,
    momentumMeV: 0,
    identicalFactor: 1,
    waves: [],
  };
}

function warningsOf(parent: Parent, { remainder }: Completed): string[] {
  if (remainder === undefined || remainder.fraction.value <= 0.5) return [];
  const percent = (100 * remainder.fraction.value).toFixed(1);
  return [
    `${parent.hadron.name}: ${percent} % of the width has no channel in this study; do not rely on the fractions as a set.`,
  ];
}

function externalDaughters(model: Model): Hadron[] {
  const parents = new Set(model.parents.map(({ hadron }) => hadron.name));
  const byName = new Map<string, Hadron>();
  for (const { daughters } of model.channels) {
    for (const hadron of daughters) if (!parents.has(hadron.name)) byName.set(hadron.name, hadron);
  }
  return [...byName.values()];
}
