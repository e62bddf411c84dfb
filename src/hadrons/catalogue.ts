import { nearestNames } from "../nearest-names.js";
import { refuse } from "../require.js";
import edition2024 from "./data/particles-2024.json";
import { antiparticle, antiparticleName, type Particle } from "./particle.js";

/** Where the numbers of the catalogue come from, for the header of a table. */
export interface CatalogueEdition {
  readonly edition: string;
  readonly source: string;
  readonly provenance: string;
  readonly transcribed: string;
  readonly notes: readonly string[];
}

/** The edition of the particle catalogue: source, how it was read, and what its numbers mean. */
export function catalogueEdition(): CatalogueEdition {
  const { edition, source, provenance, transcribed, notes } = edition2024;
  return { edition, source, provenance, transcribed, notes };
}

/** Every particle of the catalogue in its order, each followed by its antiparticle where that is another one. */
export function catalogueParticles(): Particle[] {
  return LISTED.flatMap((particle) => {
    const other = antiparticle(particle);
    return other === null ? [particle] : [particle, other];
  });
}

/**
 * The particle of a name, or undefined.
 *
 * Reads the names of the catalogue (`Sigma(1385)+`, `K0bar`), names without the mass where only one is meant (`rho+`,
 * `K*0`, `phi`, `Delta++`), and a `bar` before the charge of a neutral particle (`Kbar0`, `Kbar*(892)0`).
 */
export function findParticle(name: string): Particle | undefined {
  const canonical = canonicalName(name);
  for (const particle of LISTED) {
    if (particle.name === canonical) return particle;
    if (antiparticleName(particle) === canonical) return antiparticle(particle) ?? undefined;
  }
  return undefined;
}

/**
 * The particle of a name; see `findParticle` for the names it reads.
 *
 * @throws InputError for an unknown name; suggests the nearest
 * @example catalogueParticle("K-").mcNumber // -321
 */
export function catalogueParticle(name: string): Particle {
  const particle = findParticle(name);
  if (particle !== undefined) return particle;
  const near = nearestNames(
    name,
    catalogueParticles().map((candidate) => candidate.name),
  );
  const mend = near.length === 0 ? "" : `Did you mean ${near.join(", ")}?`;
  refuse("catalogueParticle: name", `a particle of the catalogue (${edition2024.edition})`, name, mend);
}

/**
 * The name the catalogue uses for a particle; a name it does not know comes back as it is.
 *
 * @example canonicalName("Kbar*0") // "K*(892)0bar"
 */
export function canonicalName(name: string): string {
  const barLast = name.replace(/^([A-Z][a-z]*)bar(.*0)$/, "$1$2bar");
  const [, stem = barLast, charge = "", bar = ""] = /^(.*?)([+-]+|0)?(bar)?$/.exec(barLast) ?? [];
  const stems: Readonly<Record<string, string>> = edition2024.stems;
  return `${Object.hasOwn(stems, stem) ? stems[stem] : stem}${charge}${bar}`;
}

/** The entries as they stand in the file, each with its aliases; shape and ranges of the values are tested. */
const LISTED: readonly Particle[] = edition2024.particles.map((entry) => {
  const aliases: Readonly<Record<string, readonly number[]>> = edition2024.mcAliases;
  return { ...(entry as Omit<Particle, "mcAliases">), mcAliases: aliases[entry.name] ?? [] };
});
