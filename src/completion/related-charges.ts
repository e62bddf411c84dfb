import type { Hadron } from "../hadrons/hadron.js";
import type { Channel, Model, Parent } from "../model/model.js";
import type { MeasuredShare, Settling } from "./entries.js";
import type { Predictions } from "./predictions.js";

/**
 * Shares of measured values with those of charge states that are not measured, but are of an isospin channel that is.
 *
 * SU(2) leaves an isospin channel one amplitude, and charge conjugation gives its conjugate the same: one measured charge
 * state, or sum, settles all, whatever breaking of SU(3) does to it. Widths go as isospin times phase space. The charge
 * conjugate of the very channel has its number; else measured charge states of the same parent or of its antiparticle come
 * first, of these that of least relative error. Closed charge states have no width to be settled.
 */
export function withRelatedCharges(
  { fit: { model }, channels: predicted }: Predictions,
  observables: readonly Settling[],
  settled: ReadonlyMap<number, MeasuredShare>,
): Map<number, MeasuredShare> {
  const weights = model.channels.map((channel, k) => chargeWeight(channel, predicted[k]!.amplitudes));
  const measured = [...settled.keys()].sort((a, b) => a - b).filter((channel) => weights[channel]! > 0);
  const errorOf = (channel: number) => relativeError(observables[settled.get(channel)!.observable]!);
  const all = new Map(settled);
  for (const [channel, { parent }] of model.channels.entries()) {
    if (settled.has(channel) || weights[channel] === 0) continue;
    const { group } = predicted[channel]!;
    const related = measured.filter((other) => predicted[other]!.group === group);
    const conjugate = related.find((other) => areConjugate(model.channels[other]!, model.channels[channel]!));
    if (conjugate !== undefined) {
      all.set(channel, settled.get(conjugate)!);
      continue;
    }
    const near = related.filter((other) => sameOrAntiparticle(model.channels[other]!.parent, parent));
    const [first, ...others] = near.length > 0 ? near : related;
    if (first === undefined) continue;
    const reference = others.reduce((best, other) => (errorOf(other) < errorOf(best) ? other : best), first);
    const { observable, share } = settled.get(reference)!;
    const { kind } = observables[observable]!.quantum;
    const totals = kind === "width" ? 1 : totalsRatio(model, reference, channel);
    const ratio = (weights[channel]! / weights[reference]!) * totals;
    all.set(channel, { observable, share: share * ratio, split: true });
  }
  return all;
}

function areConjugate(a: Channel, b: Channel): boolean {
  const names = ({ parent, daughters }: Channel, nameOf: (hadron: Hadron) => string) =>
    [nameOf(parent), ...daughters.map(nameOf).sort()].join(" ");
  return names(a, ({ name, antiparticle }) => antiparticle ?? name) === names(b, ({ name }) => name);
}

function sameOrAntiparticle(a: Hadron, b: Hadron): boolean {
  return a.name === b.name || a.antiparticle === b.name;
}

/** Relative width of a charge channel within its isospin channel: isospin times phase space, wave by wave. */
export function chargeWeight(channel: Channel, amplitudes: readonly number[]): number {
  const known = amplitudes.some((amplitude) => amplitude !== 0);
  return channel.waves.reduce((sum, wave, w) => {
    const square = known ? amplitudes[w]! ** 2 : channel.isospinCoefficient ** 2;
    return sum + channel.identicalFactor * square * wave.kinematicFactor;
  }, 0);
}

function relativeError({ measured: { value, plus, minus } }: Settling): number {
  return plus + minus === 0 ? 0 : (plus + minus) / value;
}

/** Total width of one channel's parent over that of another's; totals that are sums of rows count as equal. */
function totalsRatio({ parents, channels }: Model, first: number, second: number): number {
  const totalOf = (channel: number): Parent["total"] =>
    parents.find(({ hadron }) => hadron.name === channels[channel]!.parent.name)!.total;
  const [a, b] = [totalOf(first), totalOf(second)];
  return a.kind === "measured" && b.kind === "measured" && b.widthMeV > 0 ? a.widthMeV / b.widthMeV : 1;
}
