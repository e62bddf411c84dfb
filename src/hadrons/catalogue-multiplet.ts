import { nearestNames } from "../nearest-names.js";
import { refuse } from "../require.js";
import { catalogueParticle } from "./catalogue.js";
import assignments from "./data/multiplets.json";
import { assembleMultiplet, type Multiplet } from "./multiplet.js";

/** Ids of the multiplets of ground states that the catalogue fills: `pseudoscalar-octet`, `baryon-octet`, ... */
export function catalogueMultipletIds(): string[] {
  return assignments.multiplets.map(({ id }) => id);
}

/**
 * A complete multiplet of ground states with the masses and widths of the catalogue.
 *
 * Isoscalar mesons are taken unmixed; each says so in its notes.
 * @throws InputError for an unknown id; names the nearest and all there are
 * @example catalogueMultiplet("baryon-octet").members.map(({ name }) => name) // ["N", "Sigma", "Lambda", "Xi"]
 */
export function catalogueMultiplet(id: string): Multiplet {
  const found = assignments.multiplets.find((multiplet) => multiplet.id === id);
  if (found === undefined) {
    const ids = catalogueMultipletIds();
    const [nearest] = nearestNames(id, ids, 1);
    const hint = nearest === undefined ? "" : `Did you mean ${nearest}? `;
    refuse(
      "catalogueMultiplet: id",
      "a multiplet of the catalogue",
      id,
      `${hint}There are: ${ids.join(", ")}.`,
    );
  }
  const { irrep, twoJ, parity, baryonNumber, charm, members } = found;
  const [p, q] = irrep as [number, number];
  return assembleMultiplet(
    id,
    { irrep: { p, q }, twoJ, parity: parity as 1 | -1, baryonNumber, charm },
    members.map((member) => ({
      name: member.name,
      particles: member.hadrons.map(catalogueParticle),
      notes: "note" in member ? [member.note] : [],
    })),
  );
}
