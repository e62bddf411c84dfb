import type { Hadron } from "../hadrons/hadron.js";
import { isospinAveragedMassMeV, type Member, type Multiplet } from "../hadrons/multiplet.js";
import type { State } from "../su3/state.js";
import type { Decay, MixingElement } from "./model.js";
import type { MixedStates } from "./resolve-mixing.js";

/** A hadron at its place in a multiplet: as the pure state itself, or as one that contains it through mixing. */
export interface Placed {
  readonly hadron: Hadron;
  /** Name of the isospin multiplet. */
  readonly member: string;
  /** The pure state of the multiplet that is in the hadron. */
  readonly state: State;
  /** Undefined for a pure state, which has weight 1. */
  readonly mixing?: MixingElement;
  readonly averageMassMeV: number;
  /** Mean width of the charge states; null where one is not known. */
  readonly averageWidthMeV: number | null;
}

/** Every hadron with a component in a multiplet. Mixed states take the places of the multiplet's own members. */
export function placedIn(multiplet: Multiplet, groups: readonly MixedStates[]): Placed[] {
  const own = multiplet.members
    .filter(
      (member) =>
        !groups.some(({ bare }) =>
          bare.some((state) => state.multiplet.id === multiplet.id && samePlace(state, member)),
        ),
    )
    .flatMap((member) => ofMember(multiplet, member));
  const mixed = groups.flatMap((group, mixing) =>
    group.bare.flatMap((state, bare) =>
      state.multiplet.id !== multiplet.id
        ? []
        : group.members.flatMap((member, k) => ofMember(multiplet, member, { mixing, state: k, bare })),
    ),
  );
  return [...own, ...mixed];
}

/** Everything that is placed in a multiplet of the decays, each multiplet once. */
export function placedInDecays(decays: readonly Decay[], groups: readonly MixedStates[]): Placed[] {
  const multiplets = new Map<string, Multiplet>();
  for (const { from, to } of decays)
    for (const multiplet of [from, ...to]) multiplets.set(multiplet.id, multiplet);
  return [...multiplets.values()].flatMap((multiplet) => placedIn(multiplet, groups));
}

function samePlace(a: { threeY: number; twoI: number }, b: { threeY: number; twoI: number }): boolean {
  return a.threeY === b.threeY && a.twoI === b.twoI;
}

function ofMember(multiplet: Multiplet, member: Member, mixing?: MixingElement): Placed[] {
  const { threeY, twoI } = member;
  const averageMassMeV = isospinAveragedMassMeV(member);
  const widths = member.hadrons.map(({ widthMeV }) => widthMeV);
  const averageWidthMeV = widths.some((width) => width === null)
    ? null
    : widths.reduce<number>((sum, width) => sum + width!, 0) / widths.length;
  return member.hadrons.map((hadron, k) => ({
    hadron,
    member: member.name,
    state: { irrep: multiplet.irrep, threeY, twoI, twoI3: twoI - 2 * k },
    averageMassMeV,
    averageWidthMeV,
    ...(mixing === undefined ? {} : { mixing }),
  }));
}
