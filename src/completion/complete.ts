import { InputError } from "../errors.js";
import { DaughterShapes } from "../model/daughter-shapes.js";
import type { Fit } from "../model/fit-model.js";
import type { Channel, Model, Observable, Quantum } from "../model/model.js";
import { drawGrid } from "../widths/draw-mass.js";
import type { LineShape } from "../widths/line-shape.js";
import { parentTable } from "./parent-table.js";
import { type Predictions, predict } from "./predictions.js";
import type { External, MassShape, ParentTable, Tables } from "./tables.js";
import { completeParent, type Entry } from "./total-width.js";

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
  const shapes = new DaughterShapes();
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
    else parents.push(parentTable(predictions, parent, entries, completed, shapes));
  }
  if (problems.length > 0) throw new InputError(problems.join("\n"));
  return { fit, minimum, parents, externals: externalDaughters(model, shapes) };
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

function externalDaughters(model: Model, shapes: DaughterShapes): External[] {
  const parents = new Set(model.parents.map(({ hadron }) => hadron.name));
  const byName = new Map<string, External>();
  const legs = model.channels.flatMap(({ waves }) =>
    waves.flatMap(({ kinematics }) => kinematics.legs.slice(1)),
  );
  for (const placed of legs) {
    const { hadron } = placed;
    if (parents.has(hadron.name) || byName.has(hadron.name)) continue;
    const shape = shapes.of(placed, "charge");
    byName.set(hadron.name, shape === undefined ? { hadron } : { hadron, lineShape: massShape(shape) });
  }
  return [...byName.values()];
}

function massShape(shape: LineShape): MassShape {
  return { windowMeV: shape.windowMeV, normalisation: shape.normalisation, draw: drawGrid(shape) };
}
