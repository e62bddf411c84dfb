import { InputError } from "../errors.js";
import type { Model, Observable, Parent, Quantum } from "../model/model.js";
import { measuredModes } from "./mode-rows.js";
import type { Predictions } from "./predictions.js";
import { chargeWeight, withRelatedCharges } from "./related-charges.js";
import type { Entry } from "./total-width.js";

/** The measurements that settle rows, and what they settle. */
export interface Measured {
  readonly observables: readonly Settling[];
  readonly byChannel: ReadonlyMap<number, MeasuredShare>;
}

/** What a measurement says of a channel. */
export interface MeasuredShare {
  /** Index into `Measured.observables`. */
  readonly observable: number;
  /** The channel's number over the measured value: its part of a sum, or by SU(2) from another charge state. */
  readonly share: number;
  /** True if the measurement is not of this one channel of the parent alone. */
  readonly split: boolean;
}

/** A measurement that settles rows. */
export type Settling = Observable & { readonly quantum: Extract<Quantum, { kind: "width" | "fraction" }> };

/** Whether a measurement stands in the table: a width or fraction of whole channels that the study puts there. */
function settlesRows(observable: Observable): observable is Settling {
  const { quantum, use, measured } = observable;
  if (use === "fit" || measured.limit !== undefined) return false;
  return (
    (quantum.kind === "width" || quantum.kind === "fraction") &&
    quantum.of.every(({ waves }) => waves === undefined)
  );
}

/**
 * The channels that measurements settle, how each measured sum splits into charge states, and the charge states that are
 * not measured and follow by SU(2) from one that is.
 *
 * @throws InputError where two measurements settle one channel, or one is of channels that are closed
 */
export function measuredWidths(predictions: Predictions): Measured {
  const {
    fit: { model },
    channels: predicted,
  } = predictions;
  const observables = model.observables.filter(settlesRows);
  const byChannel = new Map<number, MeasuredShare>();
  for (const [index, observable] of observables.entries()) {
    const parents = new Set(observable.quantum.of.map(({ channel }) => model.channels[channel]!.parent.name));
    for (const parent of parents) {
      const channels = observable.quantum.of
        .map(({ channel }) => channel)
        .filter((c) => model.channels[c]!.parent.name === parent);
      const weights = channels.map((channel) =>
        chargeWeight(model.channels[channel]!, predicted[channel]!.amplitudes),
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
  return { observables, byChannel: withRelatedCharges(predictions, observables, byChannel) };
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
export function entriesOf(predictions: Predictions, parent: Parent, measured: Measured): Entry[] {
  const { model } = predictions.fit;
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
  const { id } = model.channels[index]!;
  const { widthMeV, gradient, breakingMeV, closed, group } = predictions.channels[index]!;
  const found = measured.byChannel.get(index);
  if (found === undefined) {
    const change = closed === undefined ? {} : { closed };
    return { id, kind: "predicted", widthMeV, gradient, breakingMeV, ...change, group };
  }
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
