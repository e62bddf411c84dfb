import {
  assembleMultiplet,
  isospinAveragedMassMeV,
  type Member,
  type Multiplet,
} from "../hadrons/multiplet.js";
import { placeOf } from "../hadrons/place.js";
import { nearestNames } from "../nearest-names.js";
import { refuse } from "../require.js";
import type { Quantity, StudyAngle, StudyMixing, StudyState } from "../study/study.js";
import { mixingMatrix } from "./mixing-matrix.js";
import type { Mixing, Parameter, Rotation } from "./model.js";
import type { Problems } from "./problems.js";
import { memberParticles, resolveMultiplet, type StudyBoundMultiplet } from "./resolve-multiplets.js";
import { tiedRatio } from "./tied-mixing.js";
import { noteWideStates } from "./wide-states.js";

/** Place of a bare state: an isospin multiplet of an irrep. */
export interface BareState {
  readonly multiplet: Multiplet;
  readonly threeY: number;
  readonly twoI: number;
}

/** A mixing group, resolved: its matrix, its bare states and the physical hadrons. */
export interface MixedStates {
  /** Path in the file, for messages. */
  readonly path: string;
  readonly mixing: Mixing;
  readonly bare: readonly BareState[];
  readonly members: readonly Member[];
  /** Names of charge states whose total width is the sum of their rows. */
  readonly summed: ReadonlySet<string>;
}

/** Mixing groups of a study, and their free or constrained angles as parameters from index `firstParameter` on. */
export function resolveMixing(
  written: readonly StudyMixing[],
  own: ReadonlyMap<string, StudyBoundMultiplet>,
  firstParameter: number,
  problems: Problems,
): { groups: MixedStates[]; angles: Parameter[] } {
  const angles: Parameter[] = [];
  const earlier: MixedStates[] = [];
  for (const group of written) {
    const { path } = group;
    const bare = group.bare.map((text, j) => bareState(text, `${path}/bare/${j}`, own, problems));
    const known = bare.filter((state) => state !== undefined);
    if (known.length < bare.length) continue;
    const resolved = problems.attempt(path, () => mixedStates(group, known, firstParameter, angles, earlier));
    if (resolved === undefined) continue;
    for (const [k, { hadrons }] of resolved.members.entries())
      noteWideStates(group.states[k]!, hadrons, `${path}/states/${k}`, problems);
    earlier.push(resolved);
  }
  return { groups: earlier, angles };
}

function bareState(
  text: string,
  path: string,
  own: ReadonlyMap<string, StudyBoundMultiplet>,
  problems: Problems,
): BareState | undefined {
  const [id, place, ...rest] = text.split("/");
  if (id === undefined || place === undefined || rest.length > 0) {
    problems.add(
      path,
      `expected \`multiplet/place\` such as \`pseudoscalar-octet/eta\`, got ${JSON.stringify(text)}.`,
    );
    return undefined;
  }
  const multiplet = resolveMultiplet(id, path, own, problems)?.multiplet;
  if (multiplet === undefined) return undefined;
  return problems.attempt(path, () => ({ multiplet, ...placeOf(multiplet.irrep, place) }));
}

function mixedStates(
  group: StudyMixing,
  bare: readonly BareState[],
  firstIndex: number,
  angles: Parameter[],
  earlier: readonly MixedStates[],
): MixedStates {
  const n = bare.length;
  if (group.states.length !== n)
    refuse("states", `${n} physical states, as many as bare ones`, group.states.length);
  requireAlike(bare);
  const members = group.states.map((state) => physicalMember(state, bare[0]!));
  const pairs = planes(n);
  if (group.angles.length !== pairs.length) {
    refuse(
      "angles",
      `${pairs.length} angles for ${n} states, in the order ${pairs.map(([i, j]) => `(${i + 1},${j + 1})`).join(", ")}`,
      group.angles.length,
    );
  }
  if (group.convention !== "rotation" && n !== 2)
    refuse("convention", "rotation, for more than two states", group.convention);
  const name = group.states.map((state) => state.name).join(", ");
  const rotations = pairs.map(([first, second], k): Rotation => {
    const written = group.angles[k]!;
    if (typeof written === "object" && "tiedTo" in written)
      return tiedRotation(written.tiedTo, { bare, members }, group.convention, earlier);
    const angle = angleOf(written, bare, members);
    const plane = { first, second, ...conventionOf(group.convention), angle: angle.start };
    if (angle.fixed) return plane;
    const parameter = firstIndex + angles.length;
    angles.push({
      name: n === 2 ? `angle(${name})` : `angle(${name}; ${first + 1},${second + 1})`,
      kind: "mixing angle",
      unit: "rad",
      start: angle.start,
      ...(angle.prior === undefined ? {} : { prior: angle.prior }),
    });
    return { ...plane, parameter };
  });
  const summed = group.states.flatMap(({ width }, k) =>
    width === "sum" ? members[k]!.hadrons.map((h) => h.name) : [],
  );
  const mixing: Mixing = { states: group.states.map((state) => state.name), bare: group.bare, rotations };
  const start = mixingMatrix(
    { ...mixing, rotations: rotations.map(({ parameter: _, ...fixed }) => fixed) },
    [],
  );
  const mixed = members.map((member, k) => withContent(member, bare, start.value[k]!));
  return { path: group.path, mixing, bare, members: mixed, summed: new Set(summed) };
}

/** A physical member as the superposition of bare states. */
function withContent(member: Member, bare: readonly BareState[], weights: readonly number[]): Member {
  const hadrons = member.hadrons.map((hadron, k) => {
    const content = bare.map(({ multiplet, threeY, twoI }, r) => {
      const state = { irrep: multiplet.irrep, threeY, twoI, twoI3: twoI - 2 * k };
      return { leg: { multiplet: multiplet.id, state }, weight: weights[r]! };
    });
    return { ...hadron, content };
  });
  return { ...member, hadrons };
}

/** Planes of rotation in the order (1,2), (1,3), ..., (2,3), ... */
function planes(n: number): [number, number][] {
  const list: [number, number][] = [];
  for (let i = 0; i < n; i++) for (let j = i + 1; j < n; j++) list.push([i, j]);
  return list;
}

function requireAlike(bare: readonly BareState[]): void {
  const [first] = bare;
  for (const state of bare) {
    for (const key of ["twoJ", "parity", "baryonNumber", "charm"] as const) {
      if (state.multiplet[key] === first!.multiplet[key]) continue;
      refuse(
        `${state.multiplet.id}: ${key}`,
        `${first!.multiplet[key]}, that of ${first!.multiplet.id}, since only like states mix`,
        state.multiplet[key],
      );
    }
    if (state.threeY !== first!.threeY || state.twoI !== first!.twoI) {
      refuse(
        `${state.multiplet.id}: 3Y and 2I`,
        `${first!.threeY} and ${first!.twoI}, since only like states mix`,
        [state.threeY, state.twoI],
      );
    }
  }
  const places = bare.map(({ multiplet }) => multiplet.id);
  if (new Set(places).size < places.length) refuse("bare", "each multiplet once", places);
}

/** A physical isospin multiplet, with the quantum numbers of its first bare state. */
function physicalMember(state: StudyState, bare: BareState): Member {
  const { multiplet, threeY, twoI } = bare;
  const particles = memberParticles({ threeY, twoI }, multiplet, state);
  const [member] = assembleMultiplet(multiplet.id, multiplet, [particles]).members;
  return member!;
}

function conventionOf(convention: StudyMixing["convention"]): Pick<Rotation, "sign" | "offset"> {
  // For |1> = cos|8> - sin|1| the rotation is -theta; the quark basis adds phi = theta + arctan sqrt2.
  if (convention === "rotation") return { sign: 1, offset: 0 };
  return { sign: -1, offset: convention === "quark" ? Math.atan(Math.SQRT2) : 0 };
}

interface Angle {
  readonly start: number;
  readonly fixed: boolean;
  readonly prior?: { readonly value: number; readonly plus: number; readonly minus: number };
}

/** Where a free angle starts; the search covers the whole circle. */
const FREE_START = 0.3;

/** The rotation of a pair that follows the angle of an earlier pair. */
function tiedRotation(
  name: string,
  pair: Pick<MixedStates, "bare" | "members">,
  convention: StudyMixing["convention"],
  earlier: readonly MixedStates[],
): Rotation {
  const pairs = earlier.filter(({ mixing }) => mixing.states.length === 2);
  const leader = pairs.find(({ mixing }) => mixing.states.includes(name));
  if (leader === undefined || pair.members.length !== 2) {
    const known = pairs.flatMap(({ mixing }) => mixing.states);
    const near = nearestNames(name, known).join(", ") || "none";
    return refuse("angle", "tied to a state of a pair that stands above", name, `Nearest: ${near}.`);
  }
  const [rotation] = leader.mixing.rotations;
  const { sign, offset } = conventionOf(convention);
  if (rotation!.tiedBy !== undefined)
    refuse("angle", "tied to a pair with an angle of its own", name, "Tie both to that one.");
  if (rotation!.sign !== sign || rotation!.offset !== offset)
    refuse("convention", `that of ${name}, which the angle is tied to`, convention);
  return { ...rotation!, tiedBy: tiedRatio(pair, leader) };
}

function angleOf(
  angle: Exclude<StudyAngle, { tiedTo: string }>,
  bare: readonly BareState[],
  members: readonly Member[],
): Angle {
  if (angle === "free") return { start: FREE_START, fixed: false };
  if (angle === "quadratic masses" || angle === "linear masses") {
    return { start: massFormulaAngle(angle === "quadratic masses" ? 2 : 1, bare, members), fixed: true };
  }
  const { value, plus, minus }: Quantity = angle;
  return plus > 0
    ? { start: value, fixed: false, prior: { value, plus, minus } }
    : { start: value, fixed: true };
}

/**
 * Octet-singlet angle theta of mesons from their masses, in radians: tan^2 theta = (m8 - m')/(m - m8) with masses to a
 * power, 3 m8 = 4 m_K - m_a; its sign is that of (4 m_K - m_a - 3 m')/(m_a - m_K) in masses themselves.
 *
 * Source: S. Navas et al. (Particle Data Group), Phys. Rev. D 110, 030001 (2024), review "Quark model"; provenance: memory.
 */
function massFormulaAngle(power: 1 | 2, bare: readonly BareState[], members: readonly Member[]): number {
  const octet = bare[0]!.multiplet;
  const mass = (threeY: number, twoI: number): number => {
    const member = octet.members.find((m) => m.threeY === threeY && m.twoI === twoI);
    if (member === undefined)
      refuse("angle", `a kaon and an isovector in ${octet.id} for the mass formula`, "none");
    return isospinAveragedMassMeV(member);
  };
  const [kaon, isovector] = [mass(3, 1), mass(0, 2)];
  const [upper, lower] = members.map(isospinAveragedMassMeV) as [number, number];
  const octetMass = (4 * kaon ** power - isovector ** power) / 3;
  const square = (octetMass - upper ** power) / (lower ** power - octetMass);
  if (!(square >= 0)) refuse("angle", "masses whose octet mean lies between the two states", [upper, lower]);
  return Math.sign((4 * kaon - isovector - 3 * upper) / (isovector - kaon)) * Math.atan(Math.sqrt(square));
}
