import type { Component, Model } from "./model.js";

/** Which amplitude a wave of a channel takes: `factor` times the one that several waves share. */
export interface SharedAmplitude {
  /** Index into `SharedAmplitudes.representatives`. */
  readonly index: number;
  readonly factor: number;
}

/** The amplitudes of a model that have to be computed, and how those of all waves follow from them. */
export interface SharedAmplitudes {
  readonly representatives: readonly { readonly channel: number; readonly wave: number }[];
  /** By channel and wave. */
  readonly ofWave: readonly (readonly SharedAmplitude[])[];
}

/** Relative agreement of numbers that are equal but for rounding. */
const ROUNDING = 1e-12;

/**
 * Charge states of one isospin channel share their amplitude up to the SU(2) coefficient: it is computed once.
 *
 * Waves for which this does not hold exactly (two daughters of one kind make other superpositions) keep their own.
 * @param rows - by channel, wave and component: coefficients of the model's couplings
 */
export function sharedAmplitudes(
  { channels }: Model,
  rows: readonly (readonly (readonly (readonly number[])[])[])[],
): SharedAmplitudes {
  const representatives: { channel: number; wave: number }[] = [];
  const known = new Map<string, number[]>();
  const ofWave = channels.map((channel, c) =>
    channel.waves.map(({ L, twoS, breaking, components }, w): SharedAmplitude => {
      const key = `${channel.isospinChannel} ${L} ${twoS} ${breaking} ${components.map(mixingKey).join()}`;
      const candidates = known.get(key) ?? [];
      known.set(key, candidates);
      for (const index of candidates) {
        const other = representatives[index]!;
        const factor = channel.isospinCoefficient / channels[other.channel]!.isospinCoefficient;
        if (proportional(rows[c]![w]!, rows[other.channel]![other.wave]!, factor)) return { index, factor };
      }
      const index = representatives.push({ channel: c, wave: w }) - 1;
      candidates.push(index);
      return { index, factor: 1 };
    }),
  );
  return { representatives, ofWave };
}

function mixingKey({ decay, mixing }: Component): string {
  return [decay, ...mixing.flatMap((element) => [element.mixing, element.state, element.bare])].join("/");
}

function proportional(
  a: readonly (readonly number[])[],
  b: readonly (readonly number[])[],
  factor: number,
): boolean {
  return a.every((row, i) =>
    row.every((value, k) => Math.abs(value - factor * b[i]![k]!) <= ROUNDING * Math.abs(value)),
  );
}
