import { rootToNumber } from "../exact/signed-root.js";
import { type LineShapeChannels, lineShapeChannels } from "../hadrons/line-shape-channels.js";
import { isospinAveragedMassMeV, type Member } from "../hadrons/multiplet.js";
import { clebschGordan } from "../su2/clebsch-gordan.js";
import { type LineShape, lineShape } from "../widths/line-shape.js";
import {
  couplingWidth,
  LINE_SHAPE_RADIUS_FM,
  type RunningWidth,
  totalWidth,
} from "../widths/running-width.js";
import { widthModel } from "../widths/width-model.js";
import type { Placed } from "./placed.js";

/** A state narrower than this, in MeV, has its nominal mass for any purpose here. */
const NARROW_MEV = 1;

/** Line shapes of unstable daughters, each made once. */
export class DaughterShapes {
  readonly #shapes = new Map<string, LineShape | undefined>();

  /**
   * The line shape of a hadron, or undefined if it counts as stable: narrow, or without decays in the catalogue.
   *
   * Its width runs with the momenta of its decays into charge states (or isospin averages), with the barrier of model c
   * at the radius of line shapes.
   */
  of(placed: Placed, masses: "charge" | "average"): LineShape | undefined {
    const key = `${placed.hadron.name}/${masses}`;
    if (!this.#shapes.has(key)) this.#shapes.set(key, shapeOf(placed, masses));
    return this.#shapes.get(key);
  }
}

function shapeOf(placed: Placed, masses: "charge" | "average"): LineShape | undefined {
  const decays = lineShapeChannels(placed.member);
  const average = masses === "average";
  const widthMeV = average ? placed.averageWidthMeV : placed.hadron.widthMeV;
  if (decays === undefined || widthMeV === null || widthMeV < NARROW_MEV) return undefined;
  const massMeV = average ? placed.averageMassMeV : placed.hadron.massMeV;
  const running = decays.channels.map(({ daughters, fraction }) =>
    throughWidth(chargeChannels(placed, daughters, average), decays, massMeV, widthMeV * fraction),
  );
  // The fractions left out (radiative decays) share the shape of the rest.
  const whole = totalWidth(running.flat());
  const scale = widthMeV / whole.widthMeV(massMeV);
  return lineShape(massMeV, { ...whole, widthMeV: (w) => scale * whole.widthMeV(w) });
}

interface ChargeChannel {
  readonly firstMeV: number;
  readonly secondMeV: number;
  readonly share: number;
}

/** The charge channels of a decay with their SU(2) shares, or one of average masses. */
function chargeChannels(
  { state }: Placed,
  [first, second]: readonly [Member, Member],
  average: boolean,
): ChargeChannel[] {
  if (average) {
    return [{ firstMeV: isospinAveragedMassMeV(first), secondMeV: isospinAveragedMassMeV(second), share: 1 }];
  }
  return first.hadrons.flatMap((a, i) =>
    second.hadrons.flatMap((b, j) => {
      const [m1, m2] = [first.twoI - 2 * i, second.twoI - 2 * j];
      if (m1 + m2 !== state.twoI3) return [];
      const share =
        rootToNumber(clebschGordan(first.twoI, m1, second.twoI, m2, state.twoI, state.twoI3)) ** 2;
      return share === 0 ? [] : [{ firstMeV: a.massMeV, secondMeV: b.massMeV, share }];
    }),
  );
}

/** The running widths of charge channels that add up to a width at the nominal mass. */
function throughWidth(
  channels: readonly ChargeChannel[],
  { L }: LineShapeChannels,
  massMeV: number,
  widthMeV: number,
): RunningWidth[] {
  const model = widthModel("c", { radiusFm: LINE_SHAPE_RADIUS_FM });
  const factor = ({ firstMeV, secondMeV, share }: ChargeChannel) =>
    share * model.kinematicFactorMeV(massMeV, firstMeV, secondMeV, { L });
  const sum = channels.reduce((total, channel) => total + factor(channel), 0);
  return channels.map(({ firstMeV, secondMeV, share }) =>
    couplingWidth({ model, vertex: { L }, firstMeV, secondMeV }, (widthMeV * share) / sum),
  );
}
