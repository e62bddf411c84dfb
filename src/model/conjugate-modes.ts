import type { Hadron } from "../hadrons/hadron.js";
import { channelName } from "./channel-names.js";
import { antiparticleOf, finalStateKey } from "./final-states.js";
import type { KnownParticles } from "./known-particles.js";
import type { Mode } from "./model.js";

/**
 * The charge conjugates of a hadron's modes, for its antiparticle: the same numbers of the same measured values, since
 * charge conjugation keeps widths.
 *
 * @param has - final states that the antiparticle has already; their conjugates are left out
 */
export function conjugateModes(
  modes: readonly Mode[],
  antiparticle: Hadron,
  has: readonly { readonly daughters: readonly Hadron[] }[],
  particles: KnownParticles,
): Mode[] {
  const known = new Set(has.map(({ daughters }) => finalStateKey(daughters)));
  return modes.flatMap((mode): Mode[] => {
    const daughters = mode.daughters.map((daughter) => antiparticleOf(daughter, particles));
    if (known.has(finalStateKey(daughters))) return [];
    const names = daughters.map(({ name }) => name);
    return [{ ...mode, id: channelName(antiparticle.name, names), daughters }];
  });
}
