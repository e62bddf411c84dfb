import type { MassParameters } from "./masses.js";
import { mixingMatrix } from "./mixing-matrix.js";
import type { Channel, Decay, Model } from "./model.js";
import { type Placed, placedInDecays } from "./placed.js";
import type { MixedStates } from "./resolve-mixing.js";

/** Approximations made for a study, e.g. mixing that is ignored; `masses` are its parameters of masses. */
export function notesOf(
  decays: readonly Decay[],
  groups: readonly MixedStates[],
  masses: MassParameters,
): string[] {
  const placed = placedInDecays(decays, groups);
  const notes = placed.flatMap(({ hadron }) => hadron.notes);
  const used = new Set(decays.flatMap(({ from, to }) => [from.id, ...to.map(({ id }) => id)]));
  for (const { mixing, bare } of groups) {
    for (const { multiplet } of bare) {
      if (used.has(multiplet.id)) continue;
      notes.push(
        `${mixing.states.join(", ")} have a component in ${multiplet.id}, for which no decay is declared; it counts as 0.`,
      );
    }
    const weights = mixingMatrix(
      { ...mixing, rotations: mixing.rotations.map(({ parameter: _, ...fixed }) => fixed) },
      [],
    ).value;
    const fixed = mixing.rotations.every(({ parameter }) => parameter === undefined);
    for (const [k, name] of mixing.states.entries()) {
      const terms = weights[k]!.map((w, r) => `${w.toFixed(4)} ${mixing.bare[r]}`).join(" + ");
      if (fixed) notes.push(`${name} = ${terms}.`.replaceAll("+ -", "- "));
    }
  }
  return [...new Set([...notes, ...massesThatMoveTogether(placed, masses)])];
}

/** Mass parameters of isospin multiplets whose charge states have masses of their own. */
function massesThatMoveTogether(placed: readonly Placed[], masses: MassParameters): string[] {
  const found = [...masses.keys()].flatMap((member) => {
    const states = placed.filter((each) => each.member === member).map(({ hadron }) => hadron);
    const isSplit = states.some(({ massMeV }) => massMeV !== states[0]!.massMeV);
    return isSplit ? [`\`mass ${member}\` has value and error of ${states[0]!.name}`] : [];
  });
  return found.length === 0 ? [] : [`${found.join(", ")}; the other charge states move by as much with it.`];
}

/** The notes of a model without those of hadrons that only closed channels name: what nothing is fitted or predicted for. */
export function notesOfOpenChannels({ channels, notes }: Model): string[] {
  const notesIn = (wanted: readonly Channel[]) =>
    new Set(
      wanted.flatMap(({ parent, daughters }) => [parent, ...daughters].flatMap((hadron) => hadron.notes)),
    );
  const isOpen = ({ waves }: Channel) => waves.some(({ kinematicFactor }) => kinematicFactor > 0);
  const [all, open] = [notesIn(channels), notesIn(channels.filter(isOpen))];
  return notes.filter((note) => open.has(note) || !all.has(note));
}
