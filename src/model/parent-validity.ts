import { sumsOf } from "./breaking.js";
import { Evaluation, evaluator } from "./evaluate.js";
import { fittedObservables, type StudyMinimum } from "./fit-model.js";
import type { Channel, Model, Observable } from "./model.js";
import { overfullParents, overfullText } from "./overfull-parents.js";

/** A width that is a larger part of the mass makes Breit-Wigner quantities a matter of definition. */
const BROAD = 0.15;

/** K is extrapolated no farther than this factor in momentum, and no higher than this momentum. */
const MOMENTUM_FACTOR = 2;
const HIGHEST_MOMENTUM_MEV = 1000;

/** A limit of validity that a fit touches, in words with its numbers. */
export interface ValidityWarning {
  /** Names of the charge states it is about; empty where it is about the study as a whole. */
  readonly parents: readonly string[];
  readonly text: string;
}

/** All channels of one isospin multiplet of parents. */
interface Family {
  readonly name: string;
  readonly hadrons: readonly string[];
  readonly massMeV: number;
  readonly widthMeV: number;
  readonly channels: readonly IsospinChannel[];
}

/** The charge channels of one isospin channel, with what they share. */
interface IsospinChannel {
  readonly name: string;
  /** By index into `Model.channels`. */
  readonly indices: readonly number[];
  readonly decays: ReadonlySet<number>;
  readonly momentumMeV: number;
  readonly thresholdMeV: number;
  readonly isSWave: boolean;
  readonly widthMeV: number;
}

/** Limits of validity that parents touch: overfull and broad ones, and ones whose predictions reach far in momentum. */
export function parentWarnings(model: Model, minimum: StudyMinimum): ValidityWarning[] {
  const families = familiesOf(model, new Evaluation(evaluator(model), minimum.vector));
  const fitted = fittedObservables(model);
  // A limit says how small a width is, not how large a coupling: it none is a fitted momentum.
  const sized = fitted.filter(({ measured }) => measured.limit === undefined);
  const momenta = families
    .flatMap(({ channels }) => channels)
    .filter(({ indices, momentumMeV }) => momentumMeV > 0 && indices.some((k) => isIn(k, sized)));
  const overfull = overfullParents(model, minimum).map((parent) => ({
    parents: parent.hadrons,
    text: `${parent.name}: ${overfullText(parent)}. Tables need a policy for it (\`conflicts\`); above some 1.5 times, breaking does not explain it: look at the other minima, the assignment and the width model.`,
  }));
  const others = families.flatMap((family) =>
    [...broad(family, fitted), ...farMomenta(family, momenta, model)].map((text) => ({
      parents: family.hadrons,
      text: `${family.name}: ${text}`,
    })),
  );
  return [...overfull, ...others];
}

function familiesOf(model: Model, evaluation: Evaluation): Family[] {
  const families = new Map<string, { channels: number[]; hadrons: string[] }>();
  for (const { hadron, channels } of model.parents) {
    const [first] = channels;
    if (first === undefined) continue;
    const name = model.channels[first]!.isospinChannel.split(" -> ")[0]!;
    const family = families.get(name) ?? { channels: [], hadrons: [] };
    families.set(name, family);
    family.channels.push(...channels);
    family.hadrons.push(hadron.name);
  }
  return [...families].map(([name, { channels, hadrons }]): Family => {
    const { parent } = model.channels[channels[0]!]!;
    const isospin = new Set(channels.map((k) => model.channels[k]!.isospinChannel));
    const parts = [...isospin].map((channel) =>
      isospinChannel(
        channel,
        channels.filter((k) => model.channels[k]!.isospinChannel === channel),
        hadrons.length,
        model,
        evaluation,
      ),
    );
    const summed = parts.reduce((sum, { widthMeV }) => sum + widthMeV, 0);
    return { name, hadrons, massMeV: parent.massMeV, widthMeV: parent.widthMeV ?? summed, channels: parts };
  });
}

function isospinChannel(
  name: string,
  indices: readonly number[],
  parents: number,
  model: Model,
  evaluation: Evaluation,
): IsospinChannel {
  const channels = indices.map((k) => model.channels[k]!);
  const mean = (of: (channel: Channel) => number) =>
    channels.reduce((sum, channel) => sum + of(channel), 0) / channels.length;
  const waves = channels.flatMap((channel) => channel.waves);
  return {
    name,
    indices,
    decays: new Set(waves.flatMap(({ components }) => components.map(({ decay }) => decay))),
    momentumMeV: mean(({ momentumMeV }) => momentumMeV),
    thresholdMeV: mean(({ thresholdMeV }) => thresholdMeV),
    isSWave: waves.some(({ L }) => L === 0),
    widthMeV: indices.reduce((sum, k) => sum + evaluation.width(k).value, 0) / parents,
  };
}

function isIn(channel: number, observables: readonly Observable[]): boolean {
  return observables.some(({ quantum }) =>
    sumsOf(quantum).some((sum) => sum.some((term) => term.channel === channel)),
  );
}

/** A parent whose couplings depend on how they are defined, where it is fitted by Breit-Wigner quantities. */
function broad({ massMeV, widthMeV, channels }: Family, fitted: readonly Observable[]): string[] {
  const mine = fitted.filter((observable) => channels.some(({ indices }) => isIn(indices[0]!, [observable])));
  const residues = mine.filter(({ quantum }) => quantum.kind === "residue");
  if (residues.length === mine.length) return [];
  const near = channels.filter(
    ({ indices, isSWave, thresholdMeV }) =>
      Math.abs(massMeV - thresholdMeV) < widthMeV && (isSWave || indices.some((k) => isIn(k, mine))),
  );
  const reasons = [
    ...(widthMeV > BROAD * massMeV
      ? [`its width is ${((100 * widthMeV) / massMeV).toFixed(0)} % of its mass`]
      : []),
    ...near.map(
      ({ name, thresholdMeV }) =>
        `${name.split(" -> ")[1]} opens ${Math.abs(massMeV - thresholdMeV).toFixed(0)} MeV ${thresholdMeV < massMeV ? "below" : "above"} its mass, within its width of ${widthMeV.toFixed(0)} MeV`,
    ),
  ];
  const texts =
    reasons.length === 0
      ? []
      : [
          `${reasons.join("; ")}. Breit-Wigner widths and fractions depend on their definition there: prefer pole residues (\`residue\`).`,
        ];
  if (residues.length > 0)
    texts.push(
      "Breit-Wigner quantities and pole residues are fitted together, two definitions of one coupling.",
    );
  return texts;
}

/** Predicted channels whose momenta lie far from all fitted ones of the same decays, or very high. */
function farMomenta({ channels }: Family, fitted: readonly IsospinChannel[], model: Model): string[] {
  const settled = model.observables.filter(
    ({ use, quantum, measured }) =>
      use !== "fit" && quantum.kind !== "parameter" && measured.limit === undefined,
  );
  const far = channels.flatMap(({ name, indices, decays, momentumMeV, widthMeV }) => {
    const known = fitted.filter((other) => [...other.decays].some((decay) => decays.has(decay)));
    if (widthMeV === 0 || momentumMeV === 0 || known.length === 0) return [];
    if (indices.some((k) => isIn(k, settled))) return [];
    const momenta = known.map((other) => other.momentumMeV);
    const [low, high] = [Math.min(...momenta), Math.max(...momenta)];
    const isNear = momentumMeV <= MOMENTUM_FACTOR * high && MOMENTUM_FACTOR * momentumMeV >= low;
    if (isNear && momentumMeV <= HIGHEST_MOMENTUM_MEV) return [];
    const range = [...new Set([low.toFixed(0), high.toFixed(0)])].join(" to ");
    return [`${name.split(" -> ")[1]} at ${momentumMeV.toFixed(0)} MeV, fitted at ${range} MeV`];
  });
  if (far.length === 0) return [];
  return [
    `momenta far from the fitted ones (by more than a factor ${MOMENTUM_FACTOR}, or above ${HIGHEST_MOMENTUM_MEV} MeV), where no width model is reliable: ${far.join("; ")}.`,
  ];
}
