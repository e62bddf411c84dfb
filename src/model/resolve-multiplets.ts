import { findParticle } from "../hadrons/catalogue.js";
import { catalogueMultiplet, catalogueMultipletIds } from "../hadrons/catalogue-multiplet.js";
import { chargeStates } from "../hadrons/charge-states.js";
import { gellMannOkuboMassMeV, type KnownMass, RELATION_ERROR_MEV } from "../hadrons/mass-relation.js";
import {
  assembleMultiplet,
  type MemberParticles,
  type Multiplet,
  type MultipletQuantumNumbers,
  placeText,
} from "../hadrons/multiplet.js";
import { antiparticleName, type Particle } from "../hadrons/particle.js";
import { findPlace, placeOf } from "../hadrons/place.js";
import { nearestNames } from "../nearest-names.js";
import { refuse, requirePositive } from "../require.js";
import type { StudyChargeState, StudyMember, StudyMultiplet, StudyState } from "../study/study.js";
import { type Irrep, type IsospinMultiplet, parseIrrep } from "../su3/irrep.js";
import type { Problems } from "./problems.js";
import { requireOwnName } from "./taken-names.js";
import { noteWideStates } from "./wide-states.js";

/** A multiplet with what only a study knows of it. */
export interface StudyBoundMultiplet {
  readonly multiplet: Multiplet;
  /** Names of charge states whose total width is the sum of their rows. */
  readonly summed: ReadonlySet<string>;
}

/** The multiplet of an id: the study's own, else the catalogue's. Problems are noted where the id stands. */
export function resolveMultiplet(
  id: string,
  path: string,
  own: ReadonlyMap<string, StudyBoundMultiplet>,
  problems: Problems,
): StudyBoundMultiplet | undefined {
  const found = own.get(id);
  if (found !== undefined) return found;
  // One that has problems of its own would only make its decays and mixing fail as well.
  if (problems.has(`multiplets/${id}`)) return undefined;
  const known = catalogueMultipletIds();
  if (known.includes(id)) return { multiplet: catalogueMultiplet(id), summed: new Set() };
  const [nearest] = nearestNames(id, [...own.keys(), ...known], 1);
  problems.add(
    path,
    `expected a multiplet of this study (${[...own.keys()].join(", ") || "it has none"}) or of the catalogue (${known.join(", ")}), got ${JSON.stringify(id)}.${nearest === undefined ? "" : ` Did you mean ${nearest}?`}`,
  );
  return undefined;
}

/** A multiplet that a study writes member by member, with catalogue values where the study gives none. */
export function studyMultiplet(
  id: string,
  written: StudyMultiplet,
  problems: Problems,
): StudyBoundMultiplet | undefined {
  const path = `multiplets/${id}`;
  const irrep = problems.attempt(`${path}/irrep`, () => parseIrrep(written.irrep));
  if (irrep === undefined) return undefined;
  const quantum = { irrep, ...quantumNumbers(written) };
  const known: KnownMass[] = [];
  const resolve = (member: StudyMember, k: number): MemberParticles | undefined =>
    problems.attempt(`${path}/members/${k}`, () => {
      const place = placeOf(irrep, member.place);
      requirePlaceOfItsOwn(place, k, written.members, irrep);
      if (member.mass === "relation") return filledMember(place, quantum, member, known);
      const { mass, ...rest } = member;
      const particles = memberParticles(place, quantum, { ...rest, mass });
      known.push({ ...place, massMeV: meanMassMeV(particles) });
      return particles;
    });
  // Members to be filled come last, since they need the masses of the others; the order of the study stays.
  const measured = written.members.map((member, k) =>
    member.mass === "relation" ? undefined : resolve(member, k),
  );
  const members = written.members.map((member, k) =>
    member.mass === "relation" ? resolve(member, k) : measured[k],
  );
  for (const [k, member] of members.entries()) {
    if (member !== undefined)
      noteWideStates(written.members[k]!, member.particles, `${path}/members/${k}`, problems);
  }
  const usable = members.filter((member) => member !== undefined);
  if (usable.length < members.length) return undefined;
  const multiplet = problems.attempt(path, () =>
    assembleMultiplet(
      id,
      quantum,
      usable.map((member) => withCParity(member, written.cParity)),
    ),
  );
  if (multiplet === undefined) return undefined;
  const summed = written.members
    .filter((member) => member.width === "sum")
    .flatMap((member) => multiplet.members.find(({ name }) => name === member.name)!.hadrons)
    .map((hadron) => hadron.name);
  return { multiplet, summed: new Set(summed) };
}

/** Refuses a place that an earlier member has; a place that the irrep does not have is for that member to say. */
function requirePlaceOfItsOwn(
  place: IsospinMultiplet,
  k: number,
  members: readonly StudyMember[],
  irrep: Irrep,
): void {
  const taken = members.slice(0, k).find((earlier) => {
    const other = findPlace(irrep, earlier.place);
    return other?.threeY === place.threeY && other.twoI === place.twoI;
  });
  if (taken === undefined) return;
  const { name } = members[k]!;
  const mend = "An irrep has one isospin multiplet at each place.";
  refuse(name, `a place that ${taken.name} has not taken`, placeText(place), mend);
}

/** A meson multiplet's C parity is that of every member that is its own antiparticle. */
function withCParity(member: MemberParticles, cParity: StudyMultiplet["cParity"]): MemberParticles {
  if (cParity === null) return member;
  const particles = member.particles.map((particle) =>
    antiparticleName(particle) === null ? { ...particle, cParity } : particle,
  );
  return { ...member, particles };
}

function meanMassMeV({ particles }: Pick<MemberParticles, "particles">): number {
  return particles.reduce((sum, { massMeV }) => sum + massMeV, 0) / particles.length;
}

/** A member whose mass comes from the Gell-Mann-Okubo relation; its hadrons say so. */
function filledMember(
  place: IsospinMultiplet,
  quantum: MultipletQuantumNumbers,
  { name, mass: _, ...rest }: StudyMember,
  known: readonly KnownMass[],
): MemberParticles {
  const value = gellMannOkuboMassMeV(known, place, quantum.baryonNumber === 0 ? 2 : 1);
  requirePositive(`mass of ${name} by the relation`, value, "Check the masses of the other members.");
  const mass = { value, plus: RELATION_ERROR_MEV, minus: RELATION_ERROR_MEV, unit: "MeV" } as const;
  const particles = memberParticles(place, quantum, { name, ...rest, mass });
  const note = `The mass of ${name}, ${value.toFixed(1)} +- ${RELATION_ERROR_MEV} MeV, is filled by the relation of Gell-Mann and Okubo from unmixed members.`;
  return { ...particles, notes: [note] };
}

function quantumNumbers({ twoJ, parity, baryonNumber }: StudyMultiplet) {
  return { twoJ, parity, baryonNumber, charm: 0 };
}

/**
 * The charge states of a member of a study, with the catalogue's values where the study gives none.
 *
 * @throws InputError where neither has a mass or a width, and for the name of another particle of the catalogue
 */
export function memberParticles(
  place: IsospinMultiplet,
  quantum: MultipletQuantumNumbers,
  member: StudyState,
): MemberParticles {
  const { mass, width } = member;
  const states = chargeStates(member.name, place, quantum, {
    massMeV: mass?.value ?? Number.NaN,
    massErrorMeV: mass ?? { plus: 0, minus: 0 },
    widthMeV: width === undefined || width === "sum" ? null : width.value,
    widthErrorMeV: width === undefined || width === "sum" ? null : width,
  });
  const names = states.map(({ name }) => name);
  for (const name of Object.keys(member.chargeStates)) {
    if (!names.includes(name)) refuse(`${member.name}: charge state`, `one of ${names.join(", ")}`, name);
  }
  const particles = states.map((state) =>
    particleOf(state, member, member.chargeStates[state.name] ?? { mcAliases: [] }),
  );
  requireOwnName(member.name, place, quantum, meanMassMeV({ particles }));
  return { name: member.name, particles };
}

/** A charge state's values: its own in the study, else the member's, else the catalogue's. */
function particleOf(state: Particle, member: StudyState, own: StudyChargeState): Particle {
  const known = findParticle(state.name);
  const fromCatalogue = member.mass === undefined && own.mass === undefined;
  if (fromCatalogue && known === undefined) {
    refuse(
      `${member.name}: mass`,
      "a mass, since the catalogue has no such particle",
      state.name,
      "Add `mass: ... MeV`.",
    );
  }
  const mass = own.mass ?? member.mass;
  const width = own.width ?? (member.width === "sum" ? undefined : member.width);
  const useKnownWidth = width === undefined && member.width === undefined;
  const widthMeV = width?.value ?? (useKnownWidth ? (known?.widthMeV ?? null) : null);
  if (widthMeV === null && member.width !== "sum") {
    refuse(
      `${member.name}: width`,
      "a total width, since the catalogue has none",
      state.name,
      "Add `width: ... MeV`, or `width: sum`.",
    );
  }
  return {
    ...state,
    mcNumber: own.mcNumber ?? state.mcNumber,
    mcAliases: [...state.mcAliases, ...own.mcAliases],
    massMeV: mass?.value ?? known!.massMeV,
    massErrorMeV: errors(mass) ?? known!.massErrorMeV,
    widthMeV,
    widthErrorMeV: errors(width) ?? (useKnownWidth ? (known?.widthErrorMeV ?? null) : null),
    chargeAveraged: own.mass === undefined && (mass !== undefined || known!.chargeAveraged),
  };
}

function errors(quantity: { plus: number; minus: number } | undefined) {
  return quantity === undefined ? undefined : { plus: quantity.plus, minus: quantity.minus };
}
