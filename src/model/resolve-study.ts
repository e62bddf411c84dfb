import { catalogueEdition } from "../hadrons/catalogue.js";
import type { Hadron } from "../hadrons/hadron.js";
import type { Multiplet } from "../hadrons/multiplet.js";
import type { Study } from "../study/study.js";
import { channelsOf } from "./channels.js";
import type { Channel, Decay, Model, Parameter, Parent, TotalWidth } from "./model.js";
import { Problems } from "./problems.js";
import { modelOf, resolveDecays } from "./resolve-decays.js";
import { resolveMeasurements } from "./resolve-measurements.js";
import { type StudyBoundMultiplet, studyMultiplet } from "./resolve-multiplets.js";

/**
 * A study with hadrons, exact forms, parameters and observables looked up.
 *
 * @throws InputError with every problem of the study, each with its line and column
 */
export function resolveStudy(study: Study): Model {
  const problems = new Problems(study);
  const own = new Map<string, StudyBoundMultiplet>();
  for (const [id, written] of Object.entries(study.multiplets)) {
    const multiplet = studyMultiplet(id, written, problems);
    if (multiplet !== undefined) own.set(id, multiplet);
  }
  // A missing multiplet would only make its decays fail as well.
  problems.throwIfAny();
  const decays = resolveDecays(study, own, problems);
  problems.throwIfAny();
  const channels = channelsOf(decays);
  const couplings = decays.flatMap(couplingParameters);
  const parents = parentsOf(decays, channels, own, problems);
  const multiplets = uniqueMultiplets(decays);
  const { observables, totals } = resolveMeasurements(
    study,
    { channels, parents, multiplets, couplings },
    problems,
  );
  problems.throwIfAny();
  return {
    study,
    parameters: [...couplings, ...totals],
    couplingCount: couplings.length,
    decays,
    parents,
    channels,
    observables,
    notes: notesOf(multiplets),
    editions: [`hadrons: ${catalogueEdition().edition}, ${catalogueEdition().source}`],
  };
}

function couplingParameters(decay: Decay): Parameter[] {
  const unit = modelOf(decay).amplitudeUnit({ L: decay.L, parent: decay.from, daughters: decay.to });
  return decay.reduced.map(({ name }) => ({ name, kind: "coupling", unit, start: 1 }));
}

function parentsOf(
  decays: readonly Decay[],
  channels: readonly Channel[],
  own: ReadonlyMap<string, StudyBoundMultiplet>,
  problems: Problems,
): Parent[] {
  const parents: Parent[] = [];
  for (const [k, { from }] of decays.entries()) {
    for (const hadron of from.members.flatMap(({ hadrons }) => hadrons)) {
      if (parents.some((parent) => parent.hadron.name === hadron.name)) continue;
      const total = totalOf(hadron, own.get(from.id));
      if (total === undefined) {
        problems.add(
          `decays/${k}/from`,
          `${hadron.name} has no total width in the catalogue. Write its multiplet in the study, with \`width: sum\` or a width.`,
        );
        continue;
      }
      const mine = channels.flatMap(({ parent }, index) => (parent.name === hadron.name ? [index] : []));
      parents.push({ hadron, multiplet: from.id, total, channels: mine });
    }
  }
  return parents;
}

function totalOf(hadron: Hadron, bound: StudyBoundMultiplet | undefined): TotalWidth | undefined {
  if (bound?.summed.has(hadron.name)) return { kind: "sum", widthMeV: 0, plusMeV: 0, minusMeV: 0 };
  if (hadron.widthMeV === null) return undefined;
  const { plus, minus } = hadron.widthErrorMeV ?? { plus: 0, minus: 0 };
  return { kind: "measured", widthMeV: hadron.widthMeV, plusMeV: plus, minusMeV: minus };
}

function uniqueMultiplets(decays: readonly Decay[]): Multiplet[] {
  const byId = new Map<string, Multiplet>();
  for (const { from, to } of decays) for (const multiplet of [from, ...to]) byId.set(multiplet.id, multiplet);
  return [...byId.values()];
}

function notesOf(multiplets: readonly Multiplet[]): string[] {
  const notes = multiplets.flatMap(({ members }) =>
    members.flatMap(({ hadrons }) => hadrons.flatMap((hadron) => hadron.notes)),
  );
  return [...new Set(notes)];
}
