import { gellMannOkuboMassMeV, RELATION_ERROR_MEV } from "../hadrons/mass-relation.js";
import { isospinAveragedMassMeV, type Multiplet } from "../hadrons/multiplet.js";
import { whyNoPlainMember } from "../hadrons/no-plain-members.js";
import { placeOf, usualPlaceName } from "../hadrons/place.js";
import type { StudyMeasurement } from "../study/study.js";
import { irrepName, isospinMultiplets, sameIrrep } from "../su3/irrep.js";
import { sumsOf } from "./breaking.js";
import { decayHasFAndD } from "./evaluate.js";
import { type Fit, fittedObservables, MIRROR_DELTA_CHI2, type StudyMinimum } from "./fit-model.js";
import { anglesFromMasses, tiedAngles } from "./mixing-validity.js";
import type { Decay, Model, Observable } from "./model.js";
import { parentWarnings, type ValidityWarning } from "./parent-validity.js";
import { wavePhasesKnown } from "./wave-phases.js";

/** Above this chi2 for each degree of freedom, errors that are not scaled mean little. */
const POOR_CHI2 = 5;

/** Below this momentum, in MeV, mass differences within isospin multiplets matter. */
const SLOW_MEV = 100;

/**
 * Where the numbers of one minimum of a fit should not be trusted: once a study, or once an isospin multiplet of parents.
 *
 * Flags of single rows (near threshold, small amplitude) and parents of whose width most is missing are not repeated here.
 * @param index - of the minimum, best first
 */
export function validityWarnings(fit: Fit, index: number): ValidityWarning[] {
  const { model } = fit;
  const minimum = fit.minima[index]!;
  const texts = [
    ...poorFit(minimum),
    ...mirrors(fit, index),
    ...singleRatios(model),
    ...ranges(model),
    ...anglesFromMasses(model),
    ...tiedAngles(model, minimum),
    ...axialAlone(model),
    ...phasesAsSigns(model),
    ...octetAlone(model),
    ...quarkLine(model),
    ...model.decays.flatMap(({ from }, k) =>
      model.decays.findIndex((decay) => decay.from.id === from.id) === k
        ? [...missingMembers(from, model), ...massesOff(from, model)]
        : [],
    ),
    ...notPlain(model),
    ...freePhases(fit, minimum),
    ...unstableDaughters(model),
    ...averagesNearThreshold(model),
  ];
  return [...texts.map((text) => ({ parents: [], text })), ...parentWarnings(model, minimum)];
}

/** Texts of the warnings about a study as a whole. */
export function studyWarnings(fit: Fit, index: number): string[] {
  return validityWarnings(fit, index).flatMap(({ parents, text }) => (parents.length === 0 ? [text] : []));
}

function poorFit({ chi2, ndf }: StudyMinimum): string[] {
  if (ndf === 0 || chi2 / ndf <= POOR_CHI2) return [];
  return [
    `chi2 is ${chi2.toFixed(1)} with ${ndf} degree${ndf === 1 ? "" : "s"} of freedom, ${(chi2 / ndf).toFixed(1)} for each: errors that are not scaled mean little. See which pulls are large, or let breaking into the fit (\`fit: { theoryError: 0.2 }\`).`,
  ];
}

function mirrors({ minima }: Fit, index: number): string[] {
  const used = minima[index]!;
  const others = minima.filter((other) => other !== used && other.chi2 - minima[0]!.chi2 < MIRROR_DELTA_CHI2);
  if (others.length === 0) return [];
  const list = others.map((other) => {
    const distance = other.chi2 - used.chi2;
    return `${mainParameters(other)} at chi2 ${distance <= -0.005 ? "-" : "+"} ${Math.abs(distance).toFixed(2)}`;
  });
  return [
    `the data do not choose between this solution (${mainParameters(used)}) and ${others.length} more with chi2 closer than ${MIRROR_DELTA_CHI2}: ${list.join("; ")}. Add another channel, or a sign.`,
  ];
}

/** What tells solutions apart at a glance: alpha_F and mixing angles, else the couplings. */
function mainParameters({ parameters }: StudyMinimum): string {
  const told = parameters.filter(({ name, kind }) => kind === "mixing angle" || /(^|\.)alpha_F$/.test(name));
  const chosen = told.length > 0 ? told : parameters.filter(({ kind }) => kind === "coupling");
  return chosen.map(({ name, value }) => `${name} ${value.toFixed(3)}`).join(", ");
}

/** Isospin channels of a fitted observable. */
function channelsIn({ quantum }: Observable, model: Model): string[] {
  return sumsOf(quantum).flatMap((sum) => sum.map(({ channel }) => model.channels[channel]!.isospinChannel));
}

/** Decays with F and D of which the fit knows two channels: alpha then hangs on their ratio. */
function singleRatios(model: Model): string[] {
  const fitted = fittedObservables(model);
  return model.decays.flatMap((decay, index) => {
    if (!decayHasFAndD(decay)) return [];
    const known = fitted.flatMap((observable) => {
      const { quantum, label } = observable;
      if (quantum.kind === "axial") return [label];
      if (quantum.kind === "parameter")
        return "decay" in quantum.parameter && quantum.parameter.decay === index ? [label] : [];
      return channelsIn(observable, model).filter((name) => isOf(name, index, model));
    });
    const channels = [...new Set(known)];
    if (channels.length !== 2) return [];
    const alpha = decay.name === "" ? "alpha_F" : `${decay.name}.alpha_F`;
    return [
      `${alpha} rests on a single ratio, of ${channels.join(" and ")}: every such ratio has two solutions, and one wrong measurement moves alpha_F as far as it likes.`,
    ];
  });
}

function isOf(isospinChannel: string, decay: number, model: Model): boolean {
  const channel = model.channels.find((candidate) => candidate.isospinChannel === isospinChannel)!;
  return channel.waves.some(({ components }) => components.some((component) => component.decay === decay));
}

function ranges(model: Model): string[] {
  const measured = fittedObservables(model).filter(({ quantum }) => quantum.kind !== "parameter");
  const soft = measured.filter(({ measured: { soft } }) => soft === true);
  if (soft.length === 0) return [];
  return [
    `${soft.length} of ${measured.length} fitted measurements are ranges, whose half-widths are no standard deviations: take chi2 and errors as rough.`,
  ];
}

/** Decays of whose channels nothing is fitted, and whose couplings are fixed by axial measurements. */
function axialAlone(model: Model): string[] {
  const fitted = fittedObservables(model);
  const rows = fitted.flatMap(({ quantum }) => (quantum.kind === "axial" ? [quantum.row] : []));
  const channels = new Set(fitted.flatMap((observable) => channelsIn(observable, model)));
  const alone = model.decays.filter((decay, index) => {
    const isAxial = rows.some((row) =>
      row.some((c, k) => c !== 0 && decay.couplingRows.some((own) => own[k] !== 0)),
    );
    return isAxial && ![...channels].some((name) => isOf(name, index, model));
  });
  return alone.map(
    ({ from, to }) =>
      `the couplings of ${from.id} to ${to.map(({ id }) => id).join(" and ")} are fixed by axial measurements alone: they are axial couplings, in units of g1/f1, not those of a width model. Widths and fractions made of them mean nothing: use \`couplet couplings\`, not \`couplet tables\`.`,
  );
}

/** Phases of residues are given with errors, of which the fit makes no use. */
function phasesAsSigns({ study }: Model): string[] {
  const phases = study.measurements.filter(
    ({ kind, use, phase }) => kind === "residue" && use !== "table" && phase !== undefined && phase.plus > 0,
  );
  const isElastic = ({ channels: [entrance, exit] }: StudyMeasurement) => entrance === exit;
  const names = (of: readonly StudyMeasurement[]) =>
    of.map(({ channels }) => channels.join(" and ")).join("; ");
  const elastic = phases.filter(isElastic);
  const others = phases.filter((each) => !isElastic(each));
  return [
    ...(others.length === 0
      ? []
      : [
          `phases of residues enter as signs alone, + up to 90 deg and - beyond, since couplings are real here; their values and errors are not fitted: ${names(others)}.`,
        ]),
    ...(elastic.length === 0
      ? []
      : [
          `phases of elastic residues are not used: the amplitude is a square here, and the phase that of the background: ${names(elastic)}. Where it is large, take the couplings as rough.`,
        ]),
  ];
}

/** States of which most is in a multiplet that no decay is declared for: the octet's coupling predicts nothing there. */
function octetAlone(model: Model): string[] {
  const declared = new Set(model.decays.flatMap(({ to }) => to.map(({ id }) => id)));
  const found = new Map<string, { share: number; multiplet: string; channels: Set<string> }>();
  for (const { daughters, isospinChannel, waves } of model.channels) {
    if (waves.every(({ kinematicFactor }) => kinematicFactor === 0)) continue;
    for (const { name, content } of daughters) {
      const absent = content.filter(({ leg }) => !declared.has(leg.multiplet));
      const share = absent.reduce((sum, { weight }) => sum + weight * weight, 0);
      if (share <= 0.5) continue;
      const entry = found.get(name) ?? { share, multiplet: absent[0]!.leg.multiplet, channels: new Set() };
      found.set(name, entry);
      entry.channels.add(isospinChannel);
    }
  }
  return [...found].map(
    ([name, { share, multiplet, channels }]) =>
      `${(100 * share).toFixed(0)} % of ${name} is in ${multiplet}, whose coupling nothing fixes: no decay into it is declared, and it counts as 0. Rows with ${name} are no predictions (${[...channels].join(", ")}).`,
  );
}

function quarkLine({ study }: Model): string[] {
  return study.quarkLine.map(
    (family) =>
      `the couplings of ${family.join(", ")} are tied by the quark-line rule: an assumption, not a result of SU(3).`,
  );
}

/** Places of a multiplet that stand empty; a meson's antiparticle fills its own. */
function missingMembers(multiplet: Multiplet, model: Model): string[] {
  const { id, irrep, baryonNumber, members } = multiplet;
  const filled = [...members, ...mixedPlaces(multiplet, model)];
  const isFilled = (threeY: number, twoI: number) =>
    filled.some((place) => place.threeY === threeY && place.twoI === twoI);
  const empty = isospinMultiplets(irrep).filter(
    ({ threeY, twoI }) =>
      !isFilled(threeY, twoI) &&
      !(baryonNumber === 0 && sameIrrep(irrep, { p: irrep.q, q: irrep.p }) && isFilled(-threeY, twoI)),
  );
  if (empty.length === 0) return [];
  const names = empty.map((place) => usualPlaceName(place, baryonNumber)).join(", ");
  return [
    `${id}, irrep ${irrepName(irrep)}, has no member for ${names}: one wrong assignment moves the couplings by more than their errors, and no mass relation can tell. Try \`couplet fit --leave-one-out\`.`,
  ];
}

/** Places of a multiplet that physical states share by mixing. */
function mixedPlaces({ id, irrep }: Multiplet, { mixing }: Model): { threeY: number; twoI: number }[] {
  return mixing.flatMap(({ bare }) =>
    bare.flatMap((text) => {
      const [multiplet, place] = text.split("/");
      return multiplet === id ? [placeOf(irrep, place!)] : [];
    }),
  );
}

/** An octet of baryons whose four unmixed members are farther from the mass relation than octets are known to be. */
function massesOff(multiplet: Multiplet, model: Model): string[] {
  const { id, irrep, baryonNumber, members } = multiplet;
  const isOctet = irrep.p === 1 && irrep.q === 1 && baryonNumber === 1;
  if (!isOctet || members.length < 4 || mixedPlaces(multiplet, model).length > 0) return [];
  const known = members.map((member) => ({
    threeY: member.threeY,
    twoI: member.twoI,
    massMeV: isospinAveragedMassMeV(member),
    name: member.name,
  }));
  const xi = known.find(({ threeY }) => threeY === -3)!;
  const expected = gellMannOkuboMassMeV(
    known.filter((member) => member !== xi),
    xi,
    1,
  );
  if (Math.abs(expected - xi.massMeV) <= RELATION_ERROR_MEV) return [];
  return [
    `the relation of Gell-Mann and Okubo puts ${xi.name} of ${id} at ${expected.toFixed(0)} MeV, ${Math.abs(expected - xi.massMeV).toFixed(0)} MeV from its mass; octets obey it to about ${RELATION_ERROR_MEV} MeV. A member may be wrong, or mixed.`,
  ];
}

/** Every isospin multiplet in the decays that is known not to be a plain member of one. */
function notPlain({ decays, mixing }: Model): string[] {
  const members = decays.flatMap(({ from, to }: Decay) => [from, ...to].flatMap((m) => m.members));
  const names = new Set([...members.map(({ name }) => name), ...mixing.flatMap(({ states }) => states)]);
  return [...names].flatMap((name) => {
    const why = whyNoPlainMember(name);
    return why === undefined
      ? []
      : [`${name} is no plain member of a multiplet: ${why}. Do not fit it as one (\`use: table\`).`];
  });
}

function unstableDaughters({ channels }: Model): string[] {
  const names = new Set(
    channels.flatMap(({ isospinChannel, waves }) =>
      waves.some(({ folded, kinematicFactor }) => folded && kinematicFactor > 0) ? [isospinChannel] : [],
    ),
  );
  if (names.size === 0) return [];
  return [
    `channels with an unstable daughter are added as rates, though those that end in the same particles interfere: ${[...names].join(", ")}.`,
  ];
}

/** Channels whose waves interfere with a sign that nothing measured fixes. */
function freePhases(fit: Fit, minimum: StudyMinimum): string[] {
  const known = wavePhasesKnown(fit, minimum);
  const names = fit.model.channels.flatMap(({ isospinChannel, waves }, c) =>
    !known[c] && waves.some(({ kinematicFactor }) => kinematicFactor > 0) ? [isospinChannel] : [],
  );
  if (names.length === 0) return [];
  return [
    `no measurement fixes the signs of the waves against each other in ${[...new Set(names)].join(", ")}: their interference, which rules angular distributions, is a choice. Add signed amplitudes of each wave.`,
  ];
}

/** Isospin averages of masses where the differences between charge states rule the phase space. */
function averagesNearThreshold({ channels, decays }: Model): string[] {
  const slow = channels.filter(
    ({ momentumMeV, waves }) =>
      momentumMeV > 0 &&
      momentumMeV < SLOW_MEV &&
      waves.some(({ components }) => components.some(({ decay }) => decays[decay]!.masses === "average")),
  );
  if (slow.length === 0) return [];
  const names = [...new Set(slow.map(({ isospinChannel }) => isospinChannel))].join(", ");
  return [
    `\`masses: average\` is used for channels of less than ${SLOW_MEV} MeV of momentum, where only the masses of charge states will do: ${names}.`,
  ];
}
