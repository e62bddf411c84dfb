import type { Hadron } from "../hadrons/hadron.js";
import type { Channel, Model } from "../model/model.js";

/**
 * By channel, the name of what breaking of the symmetry moves together: its isospin channel or, where the study has the
 * charge conjugate of that too, the one of the two that comes first. Conjugate decays are equally wide, broken or not.
 */
export function breakingGroups({ channels }: Model): string[] {
  const names = new Map(channels.map((channel) => [finalState(channel, ({ name }) => name), channel]));
  const groups = new Map<string, string>();
  for (const channel of channels) {
    const conjugate = names.get(finalState(channel, ({ name, antiparticle }) => antiparticle ?? name));
    const known = conjugate === undefined ? undefined : groups.get(conjugate.isospinChannel);
    if (!groups.has(channel.isospinChannel))
      groups.set(channel.isospinChannel, known ?? channel.isospinChannel);
  }
  return channels.map(({ isospinChannel }) => groups.get(isospinChannel)!);
}

function finalState({ parent, daughters }: Channel, nameOf: (hadron: Hadron) => string): string {
  return `${nameOf(parent)} -> ${daughters.map(nameOf).sort().join(" ")}`;
}
