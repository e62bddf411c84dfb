import { chiSquareProblem } from "./chi-square-problem.js";
import { Evaluation, evaluator } from "./evaluate.js";
import { type Fit, fittedObservables, MIRROR_DELTA_CHI2, type StudyMinimum } from "./fit-model.js";
import type { Model } from "./model.js";

/** Sets of couplings whose signs are turned together are tried in all combinations up to this many sets. */
const MOST_SETS = 12;

/**
 * By channel of the model, whether the data fix the signs of its waves against each other; true where fewer than two waves
 * have an amplitude.
 *
 * Partial widths know nothing of it, only signed amplitudes do. So the couplings of each wave are turned, in all combinations
 * with those of other decays, and a sign is fixed where chi2 rises by at least MIRROR_DELTA_CHI2. Other parameters rest.
 */
export function wavePhasesKnown({ model }: Fit, { vector }: StudyMinimum): boolean[] {
  const ready = evaluator(model);
  const own = new Evaluation(ready, vector);
  const several = model.channels.map(
    ({ waves }, c) => waves.filter((_, w) => own.amplitude(c, w).value !== 0).length > 1,
  );
  if (!several.includes(true)) return several.map(() => true);
  const sets = turnableSets(model);
  if (sets.length > MOST_SETS) return several.map((many) => !many);
  const { residuals } = chiSquareProblem(ready, fittedObservables(model));
  const chi2 = (at: readonly number[]) => residuals(at).reduce((sum, residual) => sum + residual ** 2, 0);
  const least = chi2(vector);
  const known = several.map(() => true);
  // The last set stays: turning all of them changes no relative sign.
  for (let subset = 1; subset < 2 ** (sets.length - 1); subset++) {
    const turned = new Set(sets.flatMap((parameters, k) => ((subset >> k) & 1 ? parameters : [])));
    const at = vector.map((value, k) => (turned.has(k) ? -value : value));
    if (chi2(at) - least >= MIRROR_DELTA_CHI2) continue;
    const other = new Evaluation(ready, at);
    for (const [c, { waves }] of model.channels.entries()) {
      const signs = waves.map((_, w) => Math.sign(own.amplitude(c, w).value * other.amplitude(c, w).value));
      if (signs.includes(1) && signs.includes(-1)) known[c] = false;
    }
  }
  return known;
}

/** Parameters that turn their signs together: couplings that meet in some wave, and what breaks the symmetry there. */
function turnableSets({ channels, decays, couplingCount }: Model): number[][] {
  const couplings = decays.map(({ couplingRows }) =>
    Array.from({ length: couplingCount }, (_, j) => j).filter((j) =>
      couplingRows.some((row) => row[j] !== 0),
    ),
  );
  const meeting = channels.flatMap(({ waves }) =>
    waves.map(({ components, breaking }) => [
      ...components.flatMap(({ decay }) => couplings[decay]!),
      ...(breaking === undefined ? [] : [breaking]),
    ]),
  );
  return meeting.reduce<number[][]>((sets, members) => {
    const joined = sets.filter((set) => set.some((k) => members.includes(k)));
    const rest = sets.filter((set) => !joined.includes(set));
    return [...rest, [...new Set([...joined.flat(), ...members])]];
  }, []);
}
