import type { StudyMinimum } from "./fit-model.js";
import { rotationAngle } from "./mixing-matrix.js";
import type { Model } from "./model.js";

/** Warnings about mixing angles that come from a mass formula. */
export function anglesFromMasses({ study, mixing }: Model): string[] {
  return study.mixing.flatMap(({ angles, states }, k) =>
    angles.flatMap((angle, j) => {
      if (angle !== "quadratic masses" && angle !== "linear masses") return [];
      const degrees = (mixing[k]!.rotations[j]!.angle * 180) / Math.PI;
      const names = states.map(({ name }) => name).join(" and ");
      return [
        `the mixing angle of ${names}, ${degrees.toFixed(1)} deg, is from ${angle} alone, and squares of masses give another than masses: measure a decay of each state.`,
      ];
    }),
  );
}

/** Warnings about pairs that follow another pair's angle as far as first-order breaking holds, or cannot. */
export function tiedAngles({ mixing }: Model, { vector }: StudyMinimum): string[] {
  return mixing.flatMap(({ states, rotations }) =>
    rotations.flatMap(({ tiedBy, ...leader }) => {
      if (tiedBy === undefined) return [];
      const names = states.join(" and ");
      const sine = tiedBy * Math.sin(2 * rotationAngle(leader, vector).value);
      return [
        Math.abs(sine) > 1
          ? `${names} cannot mix as much as the pair their angle is tied to: it would take |sin 2t| = ${Math.abs(sine).toFixed(2)}. They count as mixed at 45 deg; check the masses, or give them an angle of their own.`
          : `the mixing angle of ${names} is that of another pair by first-order breaking, which is good to some 20-30 %: measure a decay of each state.`,
      ];
    }),
  );
}
