import { momentumOfMeV } from "../widths/breakup-momentum.js";
import { gridWidth, type MassGrid } from "../widths/mass-grid.js";
import type { RunningWidth } from "../widths/running-width.js";
import type { Kinematics } from "../widths/width-model-definition.js";

/** Partial width of one row against the parent's mass, both in MeV. */
export interface RowWidth {
  /** The width is 0 up to here. */
  readonly thresholdMeV: number;
  /** Asked above the threshold; may still be 0. */
  widthMeV(massMeV: number): number;
}

/** K in MeV over the square of the amplitude's unit, above threshold. */
export type Factor = (kinematics: Kinematics) => number;

// One class for each law: in a loop over the masses of a batch V8 sees through methods, but not through closures.

/** Sum of K of each wave times its scale, for daughters of given masses. */
export class ClosedForm implements RowWidth {
  readonly thresholdMeV: number;
  readonly #heavyMeV: number;
  readonly #lightMeV: number;

  constructor(
    private readonly waves: readonly { readonly factor: Factor; readonly scale: number }[],
    private readonly firstMeV: number,
    private readonly secondMeV: number,
  ) {
    this.#heavyMeV = Math.max(firstMeV, secondMeV);
    this.#lightMeV = Math.min(firstMeV, secondMeV);
    // A sum of masses is rounded, the momentum is exact there: it decides.
    this.thresholdMeV = (this.#heavyMeV + this.#lightMeV) * (1 - 1e-12);
  }

  widthMeV(massMeV: number): number {
    const { waves, firstMeV, secondMeV } = this;
    const momentumMeV = momentumOfMeV(massMeV, this.#heavyMeV, this.#lightMeV);
    if (momentumMeV === 0) return 0;
    const kinematics = { parentMeV: massMeV, firstMeV, secondMeV, momentumMeV };
    let width = 0;
    for (let k = 0; k < waves.length; k++) width += waves[k]!.scale * waves[k]!.factor(kinematics);
    return width;
  }
}

/** A grid. */
export class Tabulated implements RowWidth {
  readonly thresholdMeV: number;
  readonly #grid: RunningWidth;

  constructor(grid: MassGrid) {
    this.thresholdMeV = grid.thresholdMeV;
    this.#grid = gridWidth(grid);
  }

  widthMeV(massMeV: number): number {
    return this.#grid.widthMeV(massMeV);
  }
}

/** A power of the distance from the threshold, 1 at the nominal mass; of power 0 a constant. */
export class PowerOfDistance implements RowWidth {
  constructor(
    readonly thresholdMeV: number,
    private readonly nominalWidthMeV: number,
    private readonly distanceMeV: number,
    private readonly power: number,
  ) {}

  widthMeV(massMeV: number): number {
    if (this.power === 0) return this.nominalWidthMeV;
    return this.nominalWidthMeV * ((massMeV - this.thresholdMeV) / this.distanceMeV) ** this.power;
  }
}
