import { InternalError } from "../errors.js";
import { catalogueEdition } from "../hadrons/catalogue.js";
import type { Hadron } from "../hadrons/hadron.js";
import type { Study, StudyProblem } from "../study/study.js";
import { withBreaking } from "./breaking.js";
import { channelsOf } from "./channels.js";
import { checkMeasurements } from "./check-measurements.js";
import { noteRepeatedNames } from "./distinct-members.js";
import { massParameters } from "./masses.js";
import type { Channel, Decay, Model, Parameter, Parent, TotalWidth } from "./model.js";
import { notesOf } from "./notes.js";
import { placedIn, placedInDecays } from "./placed.js";
import { Problems } from "./problems.js";
import { resolveDecays } from "./resolve-decays.js";
import { resolveMeasurements } from "./resolve-measurements.js";
import { type MixedStates, resolveMixing } from "./resolve-mixing.js";
import { resolveModes } from "./resolve-modes.js";
import { type StudyBoundMultiplet, studyMultiplet } from "./resolve-multiplets.js";
import { resolvePriors } from "./resolve-priors.js";
import { totalSource } from "./total-source.js";
import type { NamedMember } from "./width-sums.js";

/**
 * A study with hadrons, exact forms, parameters and observables looked up.
 *
 * @param earlier - what is known to be wrong already, to be reported with the rest
 * @throws InputError with every problem of the study, each with its line and column
 */
export function resolveStudy(study: Study, earlier: readonly StudyProblem[] = []): Model {
  const problems = new Problems(study, earlier);
  const own = new Map<string, StudyBoundMultiplet>();
  for (const [id, written] of Object.entries(study.multiplets)) {
    const multiplet = studyMultiplet(id, written, problems);
    if (multiplet !== undefined) own.set(id, multiplet);
  }
  const { decays, couplings } = resolveDecays(study, own, problems);
  const { groups, angles } = resolveMixing(study.mixing, own, couplings.length, problems);
  noteRepeatedNames(own, groups, problems);
  if (problems.has()) refuseWithMeasurements(study, problems);
  const parameters: Parameter[] = [...couplings, ...angles];
  const masses = massParameters(study, decays, groups, own, parameters);
  const plain = problems.attempt("decays", () => channelsOf(decays, groups, masses)) ?? [];
  const parents = parentsOf(decays, groups, plain, own, study, problems);
  if (problems.has()) refuseWithMeasurements(study, problems);
  const context = { study, decays, channels: plain, parents, members: membersOf(decays, groups), parameters };
  const observables = [
    ...resolveMeasurements(context, problems),
    ...resolvePriors(study, decays, parameters, problems),
  ];
  const modes = resolveModes(study, parents, plain, placedInDecays(decays, groups), problems);
  problems.throwIfAny();
  const channels = withBreaking(study, plain, observables, parameters);
  return {
    study,
    parameters,
    couplingCount: couplings.length,
    decays,
    mixing: groups.map(({ mixing }) => mixing),
    parents: modes.parents,
    channels,
    observables,
    modeValues: modes.values,
    notes: [...notesOf(decays, groups, masses), ...notesOfThemselves(plain)],
    editions: [`hadrons: ${catalogueEdition().edition}, ${catalogueEdition().source}`, ...modes.editions],
  };
}

/** Refuses a study whose decays have problems, together with the problems its measurements have by themselves. */
function refuseWithMeasurements(study: Study, problems: Problems): never {
  checkMeasurements(study, problems);
  problems.throwIfAny();
  throw new InternalError("resolveStudy: a study was refused without a problem. This is a bug in Couplet.");
}

function parentsOf(
  decays: readonly Decay[],
  groups: readonly MixedStates[],
  channels: readonly Channel[],
  own: ReadonlyMap<string, StudyBoundMultiplet>,
  study: Study,
  problems: Problems,
): Parent[] {
  const summed = new Set([...own.values(), ...groups].flatMap((source) => [...source.summed]));
  const parents: Parent[] = [];
  for (const [k, { from }] of decays.entries()) {
    for (const { hadron } of placedIn(from, groups)) {
      if (parents.some((parent) => parent.hadron.name === hadron.name)) continue;
      const total = totalOf(hadron, summed, study);
      if (total === undefined) {
        problems.add(
          `decays/${k}/from`,
          `${hadron.name} has no total width in the catalogue. Write its multiplet in the study, with \`width: sum\` or a width.`,
        );
        continue;
      }
      const mine = channels.flatMap((channel, index) =>
        channel.parent.name === hadron.name && !isOfItself(channel) ? [index] : [],
      );
      parents.push({ hadron, multiplet: from.id, total, channels: mine, modes: [] });
    }
  }
  return parents;
}

/** Whether a daughter is in the isospin multiplet of the parent: a vertex with a coupling, but no decay. */
function isOfItself({ isospinChannel }: Channel): boolean {
  const [parent, daughters] = isospinChannel.split(" -> ") as [string, string];
  return daughters.split(" ").includes(parent);
}

/** Says of which vertices nothing decays. */
function notesOfThemselves(channels: readonly Channel[]): string[] {
  const open = channels
    .filter(isOfItself)
    .filter(({ waves }) => waves.some(({ kinematicFactor }) => kinematicFactor > 0));
  const names = [...new Set(open.map(({ isospinChannel }) => isospinChannel))];
  if (names.length === 0) return [];
  return [`${names.join("; ")}: a state does not decay into itself; these have couplings and no rows.`];
}

function totalOf(hadron: Hadron, summed: ReadonlySet<string>, study: Study): TotalWidth | undefined {
  if (summed.has(hadron.name)) return { kind: "sum", widthMeV: 0, plusMeV: 0, minusMeV: 0, source: "" };
  if (hadron.widthMeV === null) return undefined;
  const { plus, minus } = hadron.widthErrorMeV ?? { plus: 0, minus: 0 };
  const source = totalSource(study, hadron.name);
  return { kind: "measured", widthMeV: hadron.widthMeV, plusMeV: plus, minusMeV: minus, source };
}

function membersOf(decays: readonly Decay[], groups: readonly MixedStates[]): NamedMember[] {
  const hadrons = new Map<string, Set<string>>();
  for (const { member, hadron } of placedInDecays(decays, groups)) {
    hadrons.set(member, (hadrons.get(member) ?? new Set()).add(hadron.name));
  }
  return [...hadrons].map(([name, names]) => ({ name, hadrons: [...names] }));
}
