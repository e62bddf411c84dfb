import type { Hadron } from "../hadrons/hadron.js";
import type { Study } from "../study/study.js";
import type { Decay, Parameter } from "./model.js";
import { placedIn } from "./placed.js";
import type { MixedStates } from "./resolve-mixing.js";
import type { StudyBoundMultiplet } from "./resolve-multiplets.js";

/** Parameter index of a parent's mass, by the name of its isospin multiplet. */
export type MassParameters = ReadonlyMap<string, number>;

/**
 * Masses of parents that a study writes with an error, as parameters with that prior; one for each isospin multiplet,
 * which moves all its charge states. Appended to `parameters`.
 */
export function massParameters(
  study: Study,
  decays: readonly Decay[],
  groups: readonly MixedStates[],
  own: ReadonlyMap<string, StudyBoundMultiplet>,
  parameters: Parameter[],
): MassParameters {
  const indices = new Map<string, number>();
  if (study.fit.masses === "fixed") return indices;
  for (const { from } of decays) {
    for (const { member, hadron, mixing } of placedIn(from, groups)) {
      const ofStudy = own.has(from.id) || mixing !== undefined;
      if (!ofStudy || indices.has(member) || !hasError(hadron)) continue;
      const { plus, minus } = hadron.massErrorMeV;
      const value = hadron.massMeV;
      indices.set(member, parameters.length);
      parameters.push({
        name: `mass ${member}`,
        kind: "mass",
        unit: "MeV",
        start: value,
        prior: { value, plus, minus },
      });
    }
  }
  return indices;
}

function hasError({ massErrorMeV }: Hadron): boolean {
  return massErrorMeV.plus > 0 && massErrorMeV.minus > 0;
}

/** Step for the slope of a kinematic factor, as a part of the distance to threshold. */
const STEP = 1e-4;

/** d ln K / dM at a mass above threshold, by central difference; `factor` is K against the parent's mass in MeV. */
export function logarithmicSlope(
  factor: (massMeV: number) => number,
  massMeV: number,
  thresholdMeV: number,
): number {
  const step = STEP * (massMeV - thresholdMeV);
  return Math.log(factor(massMeV + step) / factor(massMeV - step)) / (2 * step);
}
