import data from "../hadrons/data/ground-state-decays.json";
import { parseQuantity } from "../study/quantity.js";
import type { Quantity, StudyMode } from "../study/study.js";

/** Where the built-in decays of ground states come from, for the header of a table. */
export const GROUND_STATE_SOURCE = `decays of ground states: ${data.source} (${data.provenance})`;

/**
 * The measured decays of a short-lived ground state, by the name of a charge state; empty for one that lives long, or has
 * none here.
 *
 * One mode of each, mostly the largest, takes what the others leave, so that the fractions add up to 1.
 * @example groundStateModes("Sigma0").map(({ mode }) => mode) // ["Sigma0 -> Lambda gamma"]
 */
export function groundStateModes(name: string): StudyMode[] {
  const found = data.hadrons.find(({ names }) => names.includes(name));
  if (found === undefined) return [];
  const place = found.names.indexOf(name);
  return found.modes.map((written): StudyMode => {
    const value: StudyMode["value"] =
      "fraction" in written
        ? { kind: "fraction", measured: parseQuantity(written.fraction!, "1") as Quantity }
        : { kind: "remainder", weight: 1 };
    const { power } = written as { power?: number };
    return {
      path: `tables/daughters`,
      mode: `${name} -> ${written.finals[place] ?? written.finals[0]!}`,
      value,
      power,
      weak: false,
      source: data.source,
    };
  });
}
