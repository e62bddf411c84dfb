import { canonicalName } from "../hadrons/catalogue.js";
import type { Hadron } from "../hadrons/hadron.js";
import { nearestNames } from "../nearest-names.js";
import { parseChannel, type WrittenChannel } from "./channel-names.js";
import type { Channel, Parent, WidthSum } from "./model.js";
import type { Problems } from "./problems.js";

/** An isospin multiplet by name, with the names of its charge states. */
export interface NamedMember {
  readonly name: string;
  readonly hadrons: readonly string[];
}

/** What written channels are looked up in. */
export interface Known {
  readonly channels: readonly Channel[];
  readonly parents: readonly Parent[];
  readonly members: readonly NamedMember[];
}

/**
 * The sum of widths a written channel means. Names of isospin multiplets stand for all their charge states: daughters
 * are summed over, and the parents that can decay so are averaged. What cannot be found is noted at `path`.
 */
export function widthSumOf(
  text: string,
  path: string,
  known: Known,
  problems: Problems,
): WidthSum | undefined {
  const written = writtenChannel(text, path, problems);
  if (written === undefined) return undefined;
  const names = [written.parent, ...written.daughters];
  const sets = names.map((name) => hadronsNamed(name, path, known.members, problems));
  if (sets.some((set) => set.size === 0)) return undefined;
  const [parents, first, second] = sets as [Set<string>, Set<string>, Set<string>];
  const matching = known.channels
    .map((channel, index) => ({ channel, index }))
    .filter(({ channel }) => parents.has(channel.parent.name) && matches(channel.daughters, first, second));
  if (matching.length === 0) {
    problems.add(path, impossible(text, written.parent, parents, known.channels));
    return undefined;
  }
  const weight = 1 / new Set(matching.map(({ channel }) => channel.parent.name)).size;
  if (written.L === undefined) return matching.map(({ index }) => ({ channel: index, weight }));
  const ofWave = matching.map(({ channel, index }) => ({
    channel: index,
    weight,
    waves: channel.waves.flatMap(({ L }, w) => (L === written.L ? [w] : [])),
  }));
  if (ofWave.some(({ waves }) => waves.length === 0)) {
    const waves = matching[0]!.channel.waves.map(({ L }) => `L=${L}`).join(", ");
    problems.add(path, `expected a wave of this channel (${waves}), got ${JSON.stringify(text)}.`);
    return undefined;
  }
  return ofWave;
}

/** The names in a written channel; noted at `path` if the text is not one. */
export function writtenChannel(text: string, path: string, problems: Problems): WrittenChannel | undefined {
  const written = parseChannel(text);
  if (written === undefined) {
    const mend = text.includes("c.c.")
      ? " A state and its charge conjugate are two channels here, as wide as each other: give one of them half of their sum."
      : "";
    problems.add(path, `expected a channel such as \`N(1675) -> N pi\`, got ${JSON.stringify(text)}.${mend}`);
  }
  return written;
}

function impossible(
  text: string,
  parent: string,
  parents: ReadonlySet<string>,
  channels: readonly Channel[],
): string {
  const there = [...new Set(channels.filter((c) => parents.has(c.parent.name)).map((c) => c.isospinChannel))];
  return there.length === 0
    ? `expected a parent that decays in this study, got ${JSON.stringify(parent)}.`
    : `expected a channel of this study that conserves charge, isospin and strangeness, got ${JSON.stringify(text)}. There are: ${there.join("; ")}.`;
}

function matches(
  [a, b]: readonly [Hadron, Hadron],
  first: ReadonlySet<string>,
  second: ReadonlySet<string>,
): boolean {
  return (first.has(a.name) && second.has(b.name)) || (first.has(b.name) && second.has(a.name));
}

/** Names of the charge states a name stands for: one, or all of an isospin multiplet; noted at `path` if there are none. */
export function hadronsNamed(
  name: string,
  path: string,
  members: readonly NamedMember[],
  problems: Problems,
): Set<string> {
  const canonical = canonicalName(name);
  const found = new Set<string>();
  for (const member of members) {
    const wholeMember = member.name === name || member.name === canonical;
    for (const hadron of member.hadrons) {
      if (wholeMember || hadron === name || hadron === canonical) found.add(hadron);
    }
  }
  if (found.size === 0)
    addUnknownHadron(
      name,
      path,
      members.flatMap((m) => [m.name, ...m.hadrons]),
      problems,
    );
  return found;
}

/** Notes at `path` that a name is none of the known ones, with the nearest of them. */
export function addUnknownHadron(
  name: string,
  path: string,
  known: readonly string[],
  problems: Problems,
): void {
  const near = nearestNames(name, [...new Set(known)]).join(", ");
  const guess = near === "" ? "" : ` Did you mean ${near}?`;
  const mend = /^K_?[SL]/.test(name)
    ? " Measurements are of K0 and K0bar (of K_S0 K_L0 from a neutral meson, of K0 K0bar); tables split them: `neutralKaons`."
    : guess;
  problems.add(path, `expected a hadron of this study, got ${JSON.stringify(name)}.${mend}`);
}
