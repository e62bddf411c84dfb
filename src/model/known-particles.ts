import { canonicalName, catalogueParticles, findParticle } from "../hadrons/catalogue.js";
import { catalogueMultiplet, catalogueMultipletIds } from "../hadrons/catalogue-multiplet.js";
import type { Hadron } from "../hadrons/hadron.js";
import { findLightParticle, lightParticleNames } from "../hadrons/light-particles.js";
import { antiparticle, antiparticleName, type Particle } from "../hadrons/particle.js";
import { nearestNames } from "../nearest-names.js";
import { refuse } from "../require.js";
import type { StudyParticle } from "../study/study.js";
import type { Placed } from "./placed.js";

/** One charge state that a name stands for. */
export interface KnownParticle {
  readonly hadron: Hadron;
  /** Name of the isospin multiplet; of a particle that is in none here, its own. */
  readonly member: string;
  /** Twice the isospin; null where it is not defined (photon, leptons, K_S0) or not known. */
  readonly twoI: number | null;
}

/**
 * Every particle a mode may name: of the study's multiplets and mixing, of its `particles`, of the catalogue, photons and
 * leptons; by charge state, or by isospin multiplet for all its charge states.
 */
export class KnownParticles {
  readonly #byName = new Map<string, KnownParticle>();
  readonly #byMember = new Map<string, KnownParticle[]>();

  /**
   * @param placed - the hadrons of the study's decays, which come before the catalogue's
   * @throws InputError for a particle of the study that the catalogue has already, and for a Monte Carlo number or alias
   * that two of these hadrons have
   */
  constructor(placed: readonly Placed[], own: readonly StudyParticle[]) {
    for (const { hadron, member, state } of placed) this.#add({ hadron, member, twoI: state.twoI });
    for (const id of catalogueMultipletIds()) {
      for (const { name, hadrons, twoI } of catalogueMultiplet(id).members) {
        for (const hadron of hadrons) this.#add({ hadron, member: name, twoI });
      }
    }
    for (const written of own) this.#addOwn(written);
    requireDistinctNumbers([
      ...placed.map(({ hadron }) => hadron),
      ...own.map(({ name }) => this.#byName.get(name)!.hadron),
    ]);
  }

  #add(particle: KnownParticle): void {
    const { name } = particle.hadron;
    if (this.#byName.has(name)) return;
    this.#byName.set(name, particle);
    this.#byMember.set(particle.member, [...(this.#byMember.get(particle.member) ?? []), particle]);
  }

  #addOwn(written: StudyParticle): void {
    const { name, mass, width } = written;
    if (this.#find(name) !== undefined)
      refuse(name, "a particle that is not known yet", name, "Leave it out.");
    const particle: Particle = {
      name,
      mcNumber: written.mcNumber ?? null,
      mcAliases: written.mcAliases,
      massMeV: mass.value,
      massErrorMeV: { plus: mass.plus, minus: mass.minus },
      widthMeV: width?.value ?? null,
      widthErrorMeV: width === undefined ? null : { plus: width.plus, minus: width.minus },
      // Nothing reads this; what the study says of isospin goes with the name.
      twoI: written.twoI ?? 0,
      twoJ: written.twoJ,
      parity: written.parity,
      cParity: written.cParity,
      gParity: null,
      charge: written.charge,
      strangeness: written.strangeness,
      charm: written.charm,
      baryonNumber: written.baryonNumber,
      chargeAveraged: false,
    };
    for (const each of [particle, antiparticle(particle)]) {
      if (each !== null)
        this.#add({ hadron: bareHadron(each), member: each.name, twoI: written.twoI ?? null });
    }
  }

  #find(name: string): KnownParticle | undefined {
    const known = this.#byName.get(name) ?? this.#byName.get(canonicalName(name));
    if (known !== undefined) return known;
    const light = findLightParticle(name);
    if (light !== undefined) return { hadron: light, member: name, twoI: null };
    const particle = findParticle(name);
    if (particle === undefined) return undefined;
    return { hadron: bareHadron(particle), member: particle.name, twoI: particle.twoI };
  }

  /**
   * The charge states a name stands for: itself, or all of an isospin multiplet by falling charge.
   *
   * @throws InputError for a name that is unknown, or a particle whose spin is not known
   */
  states(name: string): readonly KnownParticle[] {
    const one = this.#find(name);
    if (one !== undefined) return [one];
    const member = this.#byMember.get(name) ?? this.#byMember.get(canonicalName(name));
    if (member !== undefined) return member;
    const names = [
      ...this.#byName.keys(),
      ...this.#byMember.keys(),
      ...lightParticleNames(),
      ...catalogueParticles().map((particle) => particle.name),
    ];
    const near = nearestNames(name, [...new Set(names)]).join(", ");
    const mend = near === "" ? "" : `Did you mean ${near}? `;
    return refuse(
      "mode",
      "particles of the study, of the catalogue, a photon or leptons",
      name,
      `${mend}Another one goes under \`particles\`.`,
    );
  }
}

/** A hadron that is in no multiplet, so that nothing is said of its flavour content. */
function bareHadron(particle: Particle): Hadron {
  const { twoI, gParity, twoJ, parity, ...rest } = particle;
  if (twoJ === null || parity === null) {
    refuse(`${particle.name}: spin and parity`, "both known", [twoJ, parity], "Leave it out of the study.");
  }
  return { ...rest, twoJ, parity, antiparticle: antiparticleName(particle), content: [], notes: [] };
}

/** A generator that looks a number up must find one hadron. */
function requireDistinctNumbers(hadrons: readonly Hadron[]): void {
  const owners = new Map<number, string>();
  for (const { name, mcNumber, mcAliases } of hadrons) {
    for (const number of mcNumber === null ? mcAliases : [mcNumber, ...mcAliases]) {
      const owner = owners.get(number) ?? name;
      if (owner !== name) {
        refuse(
          `${name}: Monte Carlo number ${number}`,
          "a number of its own",
          `the number of ${owner}`,
          "Give one of the two another.",
        );
      }
      owners.set(number, name);
    }
  }
}
