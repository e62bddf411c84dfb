import { InputError } from "../errors.js";
import { DaughterShapes } from "../model/daughter-shapes.js";
import type { Fit } from "../model/fit-model.js";
import type { Channel, Model, Observable, Parent, Quantum } from "../model/model.js";
import { withAntiparticles } from "./antiparticle-tables.js";
import { checkRows } from "./check-rows.js";
import { closureOf } from "./closure.js";
import { measuredModes } from "./mode-rows.js";
import { withShortAndLongKaons } from "./neutral-kaons.js";
import { parentTable } from "./parent-table.js";
import { type Predictions, predict } from "./predictions.js";
import type { ParentTable, Tables } from "./tables.js";
import { completeParent, type Entry } from "./total-width.js";

/**
 * Complete decay tables of all members and charge states: what is measured stays, the rest is predicted, what is left
 * of a measured total width is an explicit remainder, and each parent's fractions add up to 10^9 parts exactly.
 *
 * The study's policies come in this order: conflicts, antiparticles, neutral kaons. Every row is checked for what decays
 * conserve, and every daughter is a parent or an external.
 * @param minimum - index of the minimum of the fit that predicts
 * @throws InputError naming the entries where measured and predicted fractions add up to more than 1
 */
export function complete(fit: Fit, minimum: number): Tables {
  const { model } = fit;
  const { tables: policies, file } = model.study;
  const predictions = predict(fit, minimum);
  const measured = measuredWidths(model, predictions);
  const shapes = new DaughterShapes();
  const problems: string[] = [];
  const plain: ParentTable[] = [];
  for (const parent of model.parents) {
    // A stable parent (the proton of a study of semileptonic decays) has nothing to be completed.
    if (parent.total.kind === "measured" && parent.total.widthMeV === 0) continue;
    const entries = entriesOf(model, predictions, parent, measured);
    const completed = completeParent(parent, entries, {
      covariance: predictions.minimum.covariance,
      values: [...measured.observables, ...model.modeValues],
      conflicts: policies.conflicts,
    });
    if ("conflict" in completed) problems.push(`${file}: ${completed.conflict}`);
    else plain.push(parentTable(predictions, parent, entries, completed, shapes));
  }
  if (problems.length > 0) throw new InputError(problems.join("\n"));
  checkRows(plain);
  const own = policies.antiparticles === "rows" ? withAntiparticles(plain) : plain;
  const parents = policies.neutralKaons === "short-long" ? withShortAndLongKaons(own, file) : own;
  return { fit, minimum, parents, externals: closureOf(parents, model, shapes) };
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

/** Entries of a parent: its channels, then its measured modes. */
function entriesOf(model: Model, predictions: Predictions, parent: Parent, measured: Measured): Entry[] {
  const channels = parent.channels.map((index) => entryOf(model, predictions, index, measured));
  const modes = measuredModes(parent).map(({ id, origin }): Entry => {
    const { kind, value, share, split } = origin;
    return {
      id,
      kind: kind === "width" ? "measured width" : "measured fraction",
      observable: measured.observables.length + value,
      share,
      value: model.modeValues[value]!.measured.value * share,
      split,
    };
  });
  return [...channels, ...modes];
}

function entryOf(model: Model, predictions: Predictions, index: number, measured: Measured): Entry {
  const { id, isospinChannel } = model.channels[index]!;
  const { widthMeV, gradient, breakingMeV } = predictions.channels[index]!;
  const found = measured.byChannel.get(index);
  if (found === undefined)
    return { id, kind: "predicted", widthMeV, gradient, breakingMeV, group: isospinChannel };
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
