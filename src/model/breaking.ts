import type { Study } from "../study/study.js";
import type { Channel, Observable, Parameter, Quantum, WidthSum } from "./model.js";

/**
 * The channels with the breaking that enters the fit: one parameter z with prior 0 +- 1 for each wave of each isospin
 * channel that a fitted observable is about, common to its charge states. Parameters are appended.
 */
export function withBreaking(
  study: Study,
  channels: readonly Channel[],
  observables: readonly Observable[],
  parameters: Parameter[],
): readonly Channel[] {
  if (study.fit.theoryError === 0) return channels;
  const sums = observables.filter(({ use }) => use !== "table").flatMap(({ quantum }) => sumsOf(quantum));
  const touched = new Set(sums.flatMap((sum) => sum.map(({ channel }) => channels[channel]!.isospinChannel)));
  const indices = new Map<string, number>();
  return channels.map((channel) => {
    if (!touched.has(channel.isospinChannel)) return channel;
    const waves = channel.waves.map((wave) => {
      const name = `breaking ${channel.isospinChannel}${channel.waves.length > 1 ? ` L=${wave.L}` : ""}`;
      let index = indices.get(name);
      if (index === undefined) {
        index =
          parameters.push({
            name,
            kind: "breaking",
            unit: "1",
            start: 0,
            prior: { value: 0, plus: 1, minus: 1 },
          }) - 1;
        indices.set(name, index);
      }
      return { ...wave, breaking: index };
    });
    return { ...channel, waves };
  });
}

/** The sums of widths that a quantity is made of. */
export function sumsOf(quantum: Quantum): WidthSum[] {
  const total = "total" in quantum && quantum.total.kind === "sum" ? [quantum.total.sum] : [];
  switch (quantum.kind) {
    case "width":
    case "fraction":
    case "total":
      return [quantum.of, ...total];
    case "ratio":
      return [quantum.of, quantum.over];
    case "product":
      return [quantum.of, quantum.by, ...total];
    case "amplitude":
    case "residue":
      return [...quantum.pair, ...total];
    default:
      return [];
  }
}
