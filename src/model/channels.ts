import { FormMaker } from "../couplings/form.js";
import { STRONG } from "../couplings/operator.js";
import { rationalToNumber } from "../exact/rational.js";
import { signedSquare } from "../exact/signed-root.js";
import type { Hadron } from "../hadrons/hadron.js";
import { isospinAveragedMassMeV, type Member } from "../hadrons/multiplet.js";
import { clebschGordan } from "../su2/clebsch-gordan.js";
import { breakupMomentumMeV } from "../widths/breakup-momentum.js";
import { identicalFactor } from "../widths/partial-width.js";
import { channelName } from "./channel-names.js";
import { PAIR_WEIGHT } from "./identical-multiplets.js";
import type { Channel, Decay, Wave } from "./model.js";
import { modelOf } from "./resolve-decays.js";

/**
 * Every charge channel of the decays, in the order of decays, parents, daughters. A channel that several decays reach
 * (in other waves) is one channel with several waves.
 */
export function channelsOf(decays: readonly Decay[]): Channel[] {
  const channels = new Map<string, Channel>();
  for (const [index, decay] of decays.entries()) {
    for (const channel of channelsOfDecay(decay, index)) {
      const known = channels.get(channel.id);
      channels.set(
        channel.id,
        known === undefined ? channel : { ...known, waves: [...known.waves, ...channel.waves] },
      );
    }
  }
  return [...channels.values()];
}

/** One hadron with the member it belongs to. */
interface Placed {
  readonly member: Member;
  readonly hadron: Hadron;
  readonly twoI3: number;
}

function channelsOfDecay(decay: Decay, index: number): Channel[] {
  const maker = new FormMaker({ ...decay, operator: STRONG }, decay.reduced);
  const [first, second] = decay.to.map(({ members }) => placed(members));
  const isPair = decay.to[0].id === decay.to[1].id;
  return placed(decay.from.members).flatMap((parent) =>
    first!.flatMap((a, i) =>
      second!.flatMap((b, j) => {
        if (isPair && j < i) return [];
        const share = isospinShare(parent, a, b);
        if (share === 0) return [];
        return [channelOf(decay, index, maker, parent, [a, b], share, isPair)];
      }),
    ),
  );
}

function placed(members: readonly Member[]): Placed[] {
  return members.flatMap((member) =>
    member.hadrons.map((hadron, k) => ({ member, hadron, twoI3: member.twoI - 2 * k })),
  );
}

/** Square of the SU(2) coefficient; 0 where charge, hypercharge or isospin are not conserved. */
function isospinShare(parent: Placed, a: Placed, b: Placed): number {
  if (a.member.threeY + b.member.threeY !== parent.member.threeY || a.twoI3 + b.twoI3 !== parent.twoI3)
    return 0;
  const { twoI } = parent.member;
  if (twoI < Math.abs(a.member.twoI - b.member.twoI) || twoI > a.member.twoI + b.member.twoI) return 0;
  const coefficient = clebschGordan(a.member.twoI, a.twoI3, b.member.twoI, b.twoI3, twoI, parent.twoI3);
  return Math.abs(rationalToNumber(signedSquare(coefficient)));
}

function channelOf(
  decay: Decay,
  index: number,
  maker: FormMaker,
  parent: Placed,
  daughters: readonly [Placed, Placed],
  isospinShare: number,
  isPair: boolean,
): Channel {
  const [a, b] = daughters;
  const mass = ({ hadron, member }: Placed) =>
    decay.masses === "charge" ? hadron.massMeV : isospinAveragedMassMeV(member);
  const wave: Wave = {
    decay: index,
    components: componentsOf(maker, parent.hadron, a.hadron, b.hadron, isPair ? PAIR_WEIGHT : 1),
    kinematicFactor: modelOf(decay).kinematicFactorMeV(mass(parent), mass(a), mass(b), {
      L: decay.L,
      parent: decay.from,
      daughters: decay.to,
    }),
  };
  return {
    id: channelName(parent.hadron.name, [a.hadron.name, b.hadron.name]),
    parent: parent.hadron,
    daughters: [a.hadron, b.hadron],
    isospinChannel: channelName(parent.member.name, [a.member.name, b.member.name]),
    isospinShare,
    identicalFactor: identicalFactor(a.hadron.name === b.hadron.name) as 1 | 0.5,
    thresholdMeV: mass(a) + mass(b),
    momentumMeV: breakupMomentumMeV(mass(parent), mass(a), mass(b)),
    waves: [wave],
  };
}

/** Exact forms between the pure states in three hadrons, with the products of their weights. */
function componentsOf(
  maker: FormMaker,
  parent: Hadron,
  a: Hadron,
  b: Hadron,
  weight: number,
): Wave["components"] {
  const { from, to } = maker.scheme;
  const terms = (hadron: Hadron, multiplet: string) =>
    hadron.content.filter(({ leg }) => leg.multiplet === multiplet);
  return terms(parent, from.id).flatMap((p) =>
    terms(a, to[0]!.id).flatMap((x) =>
      terms(b, to[1]!.id).map((y) => ({
        weight: weight * p.weight * x.weight * y.weight,
        form: maker.chargeForm(p.leg.state, [x.leg.state, y.leg.state]),
      })),
    ),
  );
}
