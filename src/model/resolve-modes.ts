import type { Hadron } from "../hadrons/hadron.js";
import { refuse } from "../require.js";
import type { Study, StudyMode } from "../study/study.js";
import { breakupMomentumMeV } from "../widths/breakup-momentum.js";
import { channelName } from "./channel-names.js";
import { conjugateModes } from "./conjugate-modes.js";
import { finalStates } from "./final-states.js";
import { GROUND_STATE_SOURCE, groundStateModes } from "./ground-state-modes.js";
import { doubleCounted, groundStateDecays, type NamedFinal } from "./inclusive.js";
import { type KnownParticle, KnownParticles } from "./known-particles.js";
import { broken, brokenCParity, withoutConjugate } from "./mode-checks.js";
import { parseMode } from "./mode-names.js";
import type { Channel, Mode, ModeOrigin, Parent, TableValue } from "./model.js";
import type { Placed } from "./placed.js";
import type { Problems } from "./problems.js";
import { totalSource } from "./total-source.js";

/** Parents with their modes, and the measured values behind these. */
export interface ResolvedModes {
  readonly parents: Parent[];
  readonly values: TableValue[];
  /** Where built-in modes come from; empty where none was used. */
  readonly editions: readonly string[];
}

/** A parent while its modes are being collected. */
interface Growing {
  readonly parent: Parent;
  readonly modes: Mode[];
}

/**
 * The modes of a study, and of ground states among the daughters where it wants them decayed; what is wrong is noted.
 *
 * A parent that has no decays between multiplets is appended with the catalogue's total width.
 * @param plain - parents by the study's decays
 * @param placed - hadrons of these decays
 */
export function resolveModes(
  study: Study,
  plain: readonly Parent[],
  channels: readonly Channel[],
  placed: readonly Placed[],
  problems: Problems,
): ResolvedModes {
  const particles = problems.attempt("particles", () => new KnownParticles(placed, study.particles));
  if (particles === undefined) return { parents: [], values: [], editions: [] };
  const growing = new Map<string, Growing>(
    plain.map((parent) => [parent.hadron.name, { parent, modes: [] }]),
  );
  const resolver = new ModeResolver(study, particles, growing, problems);
  for (const written of study.modes) problems.attempt(written.path, () => resolver.add(written));
  resolver.completeConjugates(plain);
  const builtIn = study.tables.daughters === "decayed" ? resolver.decayDaughters(channels) : false;
  for (const each of growing.values()) checkTogether(each, channels, growing, placed, problems);
  return {
    parents: [...growing.values()].map(({ parent, modes }): Parent => ({ ...parent, modes })),
    values: resolver.values,
    editions: builtIn ? [GROUND_STATE_SOURCE] : [],
  };
}

class ModeResolver {
  readonly values: TableValue[] = [];
  readonly #study: Study;
  readonly #particles: KnownParticles;
  readonly #growing: Map<string, Growing>;
  readonly #problems: Problems;

  constructor(study: Study, particles: KnownParticles, growing: Map<string, Growing>, problems: Problems) {
    this.#study = study;
    this.#particles = particles;
    this.#growing = growing;
    this.#problems = problems;
  }

  /** Adds a mode to all charge states of its parent. */
  add(written: StudyMode): void {
    const names = parseMode(written.mode);
    if (names === undefined)
      refuse("mode", "a final state such as `N(1520)+ -> p gamma`, of two or more daughters", written.mode);
    const origin = this.#origin(written);
    for (const parent of this.#particles.states(names.parent)) {
      const phaseSpace = (daughters: readonly Hadron[]) =>
        relativePhaseSpace(parent.hadron, daughters, written);
      const finals = finalStates(parent, names.daughters, this.#particles, names.withConjugate, phaseSpace);
      const growing = this.#parent(parent, written);
      for (const { daughters, share } of finals) {
        growing.modes.push(modeOf(parent.hadron, daughters, written, origin(share, finals.length > 1)));
      }
    }
  }

  /** Gives each of two parents by the study's decays that are antiparticles of each other the modes of the other. */
  completeConjugates(plain: readonly Parent[]): void {
    for (const { hadron } of plain) {
      const other = this.#growing.get(hadron.antiparticle ?? "");
      if (other === undefined) continue;
      const { modes } = this.#growing.get(hadron.name)!;
      other.modes.push(...conjugateModes(modes, other.parent.hadron, other.modes, this.#particles));
    }
  }

  /**
   * Built-in modes for every daughter that has some and is no parent, and for the daughters of these; true if any was. The
   * antiparticle of a parent decays as that one does.
   */
  decayDaughters(channels: readonly Channel[]): boolean {
    const conjugates = new Set([...this.#growing.values()].map(({ parent }) => parent.hadron.antiparticle));
    const queue = [...channels, ...[...this.#growing.values()].flatMap(({ modes }) => modes)].flatMap(
      ({ daughters }) => daughters.map(({ name }) => name),
    );
    let used = false;
    for (let name = queue.pop(); name !== undefined; name = queue.pop()) {
      if (this.#growing.has(name) || conjugates.has(name)) continue;
      for (const written of groundStateModes(name)) {
        used = true;
        this.#problems.attempt(written.path, () => this.add(written));
      }
      queue.push(
        ...(this.#growing.get(name)?.modes.flatMap(({ daughters }) => daughters.map((d) => d.name)) ?? []),
      );
    }
    return used;
  }

  #origin(written: StudyMode): (share: number, split: boolean) => ModeOrigin {
    const { value, source, path, mode } = written;
    if (value.kind === "remainder")
      return (share) => ({ kind: "remainder", weight: value.weight * share, source });
    const { kind, measured } = value;
    const position = this.#problems.positionOf(path);
    const index = this.values.push({ label: `${kind} ${mode}`, measured, source, position }) - 1;
    return (share, split) => ({ kind, value: index, share, split });
  }

  #parent({ hadron }: KnownParticle, written: StudyMode): Growing {
    const known = this.#growing.get(hadron.name);
    if (known !== undefined) {
      if (written.value.kind === "remainder" && known.parent.total.kind === "sum") {
        const mend = "Give the member a total width, or the mode a value.";
        refuse("mode", "a parent with a measured total width, which leaves a remainder", hadron.name, mend);
      }
      return known;
    }
    const particle = this.#growing.get(hadron.antiparticle ?? "")?.parent;
    if (particle !== undefined && particle.channels.length > 0) {
      const mend = `Write the conjugate mode, of ${particle.hadron.name}.`;
      refuse("mode", `${particle.hadron.name}, as whose antiparticle it decays`, hadron.name, mend);
    }
    if (hadron.widthMeV === null) {
      const mend = "Write it in a multiplet of the study, or under `particles`, with its width.";
      refuse("mode", "a parent with a total width", hadron.name, mend);
    }
    const { plus, minus } = hadron.widthErrorMeV ?? { plus: 0, minus: 0 };
    const growing: Growing = {
      parent: {
        hadron,
        multiplet: hadron.content[0]?.leg.multiplet ?? "",
        total: {
          kind: "measured",
          widthMeV: hadron.widthMeV,
          plusMeV: plus,
          minusMeV: minus,
          source: totalSource(this.#study, hadron.name),
        },
        channels: [],
        modes: [],
      },
      modes: [],
    };
    this.#growing.set(hadron.name, growing);
    return growing;
  }
}

/** Relative phase space of a final state as its row runs: the distance from threshold to the mode's power. */
function relativePhaseSpace(parent: Hadron, daughters: readonly Hadron[], written: StudyMode): number {
  const distance = parent.massMeV - sumOfMasses(daughters);
  return distance > 0 ? distance ** powerOf(daughters, written) : 0;
}

/** The power a mode states, or the one of phase space just above threshold; see `StudyMode`. */
function powerOf(daughters: readonly Hadron[], { power }: StudyMode): number {
  if (power !== undefined) return power;
  const massless = daughters.filter(({ massMeV }) => massMeV === 0).length;
  if (massless === 0) return (3 * daughters.length - 5) / 2;
  // A photon of angular momentum 1: its energy to the third power.
  if (massless === 1 && daughters.length === 2 && daughters.some(({ name }) => name === "gamma")) return 3;
  return refuse("power", "a power of the distance from threshold, for massless daughters", "none");
}

function sumOfMasses(daughters: readonly Hadron[]): number {
  return daughters.reduce((sum, { massMeV }) => sum + massMeV, 0);
}

function modeOf(parent: Hadron, daughters: readonly Hadron[], written: StudyMode, origin: ModeOrigin): Mode {
  const { weak, path } = written;
  const id = channelName(
    parent.name,
    daughters.map(({ name }) => name),
  );
  const wrong = broken(parent, daughters, weak) ?? (weak ? undefined : brokenCParity(parent, daughters));
  if (wrong !== undefined) {
    const [word, got] = wrong.split(/, (.*)/);
    refuse(
      id,
      `a final state that conserves ${word}`,
      got,
      "Check the names; a weak decay takes `weak: true`.",
    );
  }
  const thresholdMeV = written.threshold?.value ?? sumOfMasses(daughters);
  if (!(parent.massMeV > thresholdMeV)) {
    const mend = "Check the masses, or give a `threshold` where an unstable daughter can be lighter.";
    refuse(id, `a threshold below the parent's ${parent.massMeV} MeV`, thresholdMeV, mend);
  }
  const phaseRad = written.phase?.value ?? null;
  return { id, daughters, thresholdMeV, power: powerOf(daughters, written), weak, phaseRad, origin, path };
}

/** Momentum of either daughter at nominal masses in MeV; 0 for more than two daughters. */
export function modeMomentumMeV(parent: Hadron, { daughters }: Mode): number {
  const [first, second, more] = daughters;
  if (more !== undefined) return 0;
  return breakupMomentumMeV(parent.massMeV, first!.massMeV, second!.massMeV);
}

/** Notes final states that are listed twice, contain each other, or lack their charge conjugate. */
function checkTogether(
  { parent, modes }: Growing,
  channels: readonly Channel[],
  growing: ReadonlyMap<string, Growing>,
  placed: readonly Placed[],
  problems: Problems,
): void {
  if (modes.length === 0) return;
  const path = modes[0]!.path;
  const listed = [
    ...openChannels(parent, channels),
    ...modes.filter(({ origin }) => origin.kind !== "remainder"),
  ];
  const member = new Map(placed.map(({ hadron, member: name }) => [hadron.name, name]));
  const ground = groundStateDecays((name) => member.get(name) ?? name.replace(/([+-]+|0)(bar)?$/, ""));
  const twice = doubleCounted(listed, (hadron) => [
    ...ground(hadron),
    ...tableDecays(hadron, growing, channels),
  ]);
  if (twice !== undefined) {
    const { whole, part } = twice;
    const at = [whole, part].map(({ id }) => modes.find((mode) => mode.id === id)?.path).find(Boolean);
    problems.add(at ?? path, doubleText(whole, part));
  }
  const strong = [...parent.channels.map((index) => channels[index]!), ...modes.filter(({ weak }) => !weak)];
  for (const { final, conjugate } of withoutConjugate(parent.hadron, strong)) {
    const at = modes.find(({ id }) => id === final.id)?.path;
    if (at === undefined) continue;
    problems.add(
      at,
      `expected the charge conjugate ${parent.hadron.name} -> ${conjugate} beside ${final.id}, got none. Add \`+ c.c.\` and the sum of both, or a mode of its own.`,
    );
  }
}

function openChannels(parent: Growing["parent"], channels: readonly Channel[]): Channel[] {
  return parent.channels
    .map((index) => channels[index]!)
    .filter(({ waves }) => waves.some(({ kinematicFactor }) => kinematicFactor > 0));
}

/** Decays that the tables themselves give an unstable hadron. */
function tableDecays(
  { name, widthMeV }: Hadron,
  growing: ReadonlyMap<string, Growing>,
  channels: readonly Channel[],
): (readonly Hadron[])[] {
  const found = growing.get(name);
  if (found === undefined || (widthMeV ?? 0) < 1) return [];
  return [...openChannels(found.parent, channels), ...found.modes].map(({ daughters }) => daughters);
}

function doubleText(whole: NamedFinal, part: NamedFinal): string {
  const same = whole.daughters.length === part.daughters.length;
  const reason = same
    ? `${whole.id} and ${part.id}, which are the same`
    : `${whole.id}, which contains ${part.id} by the decays of its daughters`;
  const mend = same
    ? "A channel of the study's decays is written under `measurements`."
    : "Leave one of the two out, or let the larger one take the `remainder`.";
  return `expected every final state once, got ${reason}. ${mend}`;
}
