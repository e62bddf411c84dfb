import { FormMaker } from "../couplings/form.js";
import { STRONG } from "../couplings/operator.js";
import { InputError } from "../errors.js";
import { rootToNumber } from "../exact/signed-root.js";
import { clebschGordan } from "../su2/clebsch-gordan.js";
import { breakupMomentumMeV } from "../widths/breakup-momentum.js";
import { channelThresholdMeV, foldedFactor } from "../widths/folded-width.js";
import { identicalFactor } from "../widths/partial-width.js";
import type { SpinParity } from "../widths/width-model-definition.js";
import { channelName } from "./channel-names.js";
import { DaughterShapes } from "./daughter-shapes.js";
import { isFolded, massOf, twoBodyChannel, type WaveKinematics } from "./kinematics.js";
import { logarithmicSlope, type MassParameters } from "./masses.js";
import type { Channel, Component, Decay, Wave } from "./model.js";
import { type Placed, placedIn } from "./placed.js";
import type { MixedStates } from "./resolve-mixing.js";
import { allowedByGParity, exchangeSign } from "./selection-rules.js";

/** The three hadrons of one contribution to a channel, daughters in the order of the decay. */
interface Vertex {
  readonly parent: Placed;
  readonly first: Placed;
  readonly second: Placed;
  readonly coefficient: number;
}

/** A channel while its contributions are being collected. */
interface Growing {
  readonly vertex: Vertex;
  readonly waves: Map<
    string,
    { wave: Omit<Wave, "components">; masses: Decay["masses"]; components: Component[] }
  >;
}

/**
 * Every charge channel of the decays, in the order of decays, parents, daughters.
 *
 * A channel collects what all decays contribute to it: other waves side by side, and in one wave the components that
 * mixing brings together. Two daughters that can be exchanged are one channel: with daughters from one multiplet the two
 * orders make one normalised state, (c(a, b) + sign c(b, a))/sqrt2; for a = b both count, and the identical-particle
 * factor 1/2 of the width goes with that.
 *
 * @throws InputError if two decays give one wave of a channel different width models or masses
 */
export function channelsOf(
  decays: readonly Decay[],
  groups: readonly MixedStates[],
  masses: MassParameters,
): Channel[] {
  const shapes = new DaughterShapes();
  const growing = new Map<string, Growing>();
  for (const [index, decay] of decays.entries()) {
    const maker = new FormMaker({ ...decay, operator: STRONG }, decay.reduced);
    const isPair = decay.to[0].id === decay.to[1].id;
    for (const vertex of verticesOf(decay, groups)) {
      const { parent, first, second } = vertex;
      const [a, b] = [first.hadron.name, second.hadron.name];
      const direct = channelName(parent.hadron.name, [a, b]);
      const swapped = channelName(parent.hadron.name, [b, a]);
      const id = growing.has(swapped) && !growing.has(direct) ? swapped : direct;
      const channel = growing.get(id) ?? { vertex, waves: new Map() };
      growing.set(id, channel);
      const sign = exchangeSign(decay);
      const norm = isPair ? Math.SQRT1_2 : 1;
      const orders = a === b ? 1 + sign : id === direct ? 1 : sign;
      if (orders === 0) continue;
      addComponent(channel, decay, masses, shapes, {
        decay: index,
        weight: norm * orders,
        mixing: [parent, first, second].flatMap(({ mixing }) => (mixing === undefined ? [] : [mixing])),
        form: maker.chargeForm(parent.state, [first.state, second.state]),
      });
    }
  }
  return [...growing.values()].filter(({ waves }) => waves.size > 0).map(finishedChannel);
}

function verticesOf(decay: Decay, groups: readonly MixedStates[]): Vertex[] {
  const [firsts, seconds] = decay.to.map((multiplet) => placedIn(multiplet, groups)) as [Placed[], Placed[]];
  return placedIn(decay.from, groups).flatMap((parent) =>
    firsts.flatMap((first) =>
      seconds.flatMap((second) => {
        const coefficient = isospinCoefficient(parent, first, second);
        const placedStates = [parent, first, second].map(({ state }) => state);
        if (!allowedByGParity([decay.from, ...decay.to], placedStates)) return [];
        return coefficient === 0 ? [] : [{ parent, first, second, coefficient }];
      }),
    ),
  );
}

/** SU(2) coefficient of a channel; 0 where charge, hypercharge or isospin are not conserved. */
function isospinCoefficient({ state: r }: Placed, { state: a }: Placed, { state: b }: Placed): number {
  if (a.threeY + b.threeY !== r.threeY || a.twoI3 + b.twoI3 !== r.twoI3) return 0;
  if (r.twoI < Math.abs(a.twoI - b.twoI) || r.twoI > a.twoI + b.twoI) return 0;
  return rootToNumber(clebschGordan(a.twoI, a.twoI3, b.twoI, b.twoI3, r.twoI, r.twoI3));
}

function addComponent(
  channel: Growing,
  decay: Decay,
  massParameters: MassParameters,
  shapes: DaughterShapes,
  component: Component,
): void {
  const { L, twoS, model, masses } = decay;
  const key = `${L}/${twoS}`;
  const known = channel.waves.get(key);
  if (known === undefined) {
    const factors = factorsOf(channel.vertex, decay, massParameters, shapes);
    channel.waves.set(key, { wave: { L, twoS, model, ...factors }, masses, components: [component] });
    return;
  }
  if (known.masses !== masses || JSON.stringify(known.wave.model) !== JSON.stringify(model)) {
    const { parent, first, second } = channel.vertex;
    throw new InputError(
      `${channelName(parent.hadron.name, [first.hadron.name, second.hadron.name])}: expected one width model for all decays that add up in a wave, got ${JSON.stringify(known.wave.model)} and ${JSON.stringify(model)}. Give them the same model, options and masses.`,
    );
  }
  known.components.push(component);
}

/** K at nominal masses, averaged over the line shapes of unstable daughters unless the study wants them nominal. */
function factorsOf(
  { parent, first, second }: Vertex,
  decay: Decay,
  massParameters: MassParameters,
  shapes: DaughterShapes,
): Pick<Wave, "kinematics" | "kinematicFactor" | "massSlopes" | "folded"> {
  const { L, model, masses, daughters, from, to } = decay;
  const spin = ({ twoJ, parity }: SpinParity) => ({ twoJ, parity });
  const kinematics: WaveKinematics = {
    L,
    model,
    masses,
    daughters,
    legs: [parent, first, second],
    spins: [spin(from), spin(to[0]), spin(to[1])],
  };
  const channel = twoBodyChannel(kinematics, shapes);
  const parentMeV = massOf(parent, masses);
  const factor = (massMeV: number) => foldedFactor(channel, massMeV).value;
  const kinematicFactor = factor(parentMeV);
  const parameter = massParameters.get(parent.member);
  const fixed = { kinematics, kinematicFactor, massSlopes: [], folded: isFolded(channel) };
  if (parameter === undefined || kinematicFactor === 0) return fixed;
  const slope = logarithmicSlope(factor, parentMeV, channelThresholdMeV(channel));
  return { ...fixed, massSlopes: [{ parameter, slope }] };
}

function finishedChannel({ vertex, waves }: Growing): Channel {
  const { parent, first, second, coefficient } = vertex;
  const average = [...waves.values()].every(({ masses }) => masses === "average");
  const mass = (placed: Placed) => massOf(placed, average ? "average" : "charge");
  return {
    id: channelName(parent.hadron.name, [first.hadron.name, second.hadron.name]),
    parent: parent.hadron,
    daughters: [first.hadron, second.hadron],
    isospinChannel: channelName(parent.member, [first.member, second.member]),
    isospinCoefficient: coefficient,
    identicalFactor: identicalFactor(first.hadron.name === second.hadron.name) as 1 | 0.5,
    thresholdMeV: mass(first) + mass(second),
    momentumMeV: breakupMomentumMeV(mass(parent), mass(first), mass(second)),
    waves: [...waves.values()].map(({ wave, components }) => ({ ...wave, components })),
  };
}
