import type { Daughter, TwoBodyChannel } from "../widths/folded-width.js";
import { widthModel } from "../widths/width-model.js";
import type { SpinParity } from "../widths/width-model-definition.js";
import type { DaughterShapes } from "./daughter-shapes.js";
import type { WidthModelChoice } from "./model.js";
import type { Placed } from "./placed.js";

/** What turns an amplitude of a wave into a width: hadrons, width model, and how their masses count. Plain data. */
export interface WaveKinematics {
  readonly L: number;
  readonly model: WidthModelChoice;
  readonly masses: "charge" | "average";
  readonly daughters: "folded" | "nominal";
  /** Parent, first and second daughter. */
  readonly legs: readonly [Placed, Placed, Placed];
  /** Spins and parities of the same. */
  readonly spins: readonly [SpinParity, SpinParity, SpinParity];
}

/** A hadron's mass as a study wants it: of the charge state, or the isospin average. */
export function massOf({ hadron, averageMassMeV }: Placed, masses: "charge" | "average"): number {
  return masses === "charge" ? hadron.massMeV : averageMassMeV;
}

/** The two-body channel of a wave, unstable daughters with their line shapes unless they are to stand at nominal masses. */
export function twoBodyChannel(kinematics: WaveKinematics, shapes: DaughterShapes): TwoBodyChannel {
  const { L, model, masses, daughters, legs, spins } = kinematics;
  const daughter = (placed: Placed): Daughter =>
    (daughters === "folded" ? shapes.of(placed, masses) : undefined) ?? massOf(placed, masses);
  return {
    model: widthModel(model.id, model.options),
    vertex: { L, parent: spins[0], daughters: [spins[1], spins[2]] },
    daughters: [daughter(legs[1]), daughter(legs[2])],
  };
}

/** Whether a daughter of a channel is averaged over its line shape. */
export function isFolded({ daughters }: TwoBodyChannel): boolean {
  return daughters.some((daughter) => typeof daughter !== "number");
}
