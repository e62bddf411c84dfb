import type { Minimum } from "../fit/minima.js";
import { Evaluation, type Evaluator } from "./evaluate.js";

/** Relative agreement of amplitudes that makes two minima the same physics. */
const SAME_PHYSICS = 1e-4;

/** A minimum with the number of other parameter values that predict the same. */
export interface DistinctMinimum {
  readonly minimum: Minimum;
  readonly equivalents: number;
}

/**
 * The minima that differ in physics, best first.
 *
 * Two minima are the same physics when all amplitudes of each parent agree up to one sign a parent: (theta, g_b) and
 * (-theta, -g_b) are, and a turn by 180 degrees with turned couplings. Of those the one with the least angles is kept,
 * positive ones before negative; the others that are not plainly the same point are counted.
 */
export function distinctPhysics(ready: Evaluator, minima: readonly Minimum[]): DistinctMinimum[] {
  const angles = ready.model.parameters.flatMap(({ kind }, k) => (kind === "mixing angle" ? [k] : []));
  const groups: { signature: number[][]; members: Minimum[] }[] = [];
  for (const minimum of minima) {
    const signature = signatureOf(ready, minimum.parameters);
    const group = groups.find(
      (other) =>
        Math.abs(other.members[0]!.chi2 - minimum.chi2) < 1e-4 * (1 + minimum.chi2) &&
        sameUpToSigns(other.signature, signature),
    );
    if (group === undefined) groups.push({ signature, members: [minimum] });
    else if (!group.members.some((other) => samePoint(other.parameters, minimum.parameters)))
      group.members.push(minimum);
  }
  const size = (minimum: Minimum) =>
    angles.reduce(
      (sum, k) => sum + Math.abs(minimum.parameters[k]!) - (minimum.parameters[k]! > 0 ? 1e-3 : 0),
      0,
    );
  return groups
    .map(({ members }) => {
      const [minimum] = [...members].sort((a, b) => size(a) - size(b));
      return { minimum: minimum!, equivalents: members.length - 1 };
    })
    .sort((a, b) => a.minimum.chi2 - b.minimum.chi2);
}

/** The amplitudes of each parent's channels, times the root of their phase space where open. */
function signatureOf(ready: Evaluator, parameters: readonly number[]): number[][] {
  const evaluation = new Evaluation(ready, parameters);
  return ready.model.parents.map(({ channels }) =>
    channels.flatMap((c) => ready.model.channels[c]!.waves.map((_, w) => evaluation.amplitude(c, w).value)),
  );
}

function sameUpToSigns(a: readonly (readonly number[])[], b: readonly (readonly number[])[]): boolean {
  const scale = Math.max(...a.flat().map(Math.abs));
  const close = (x: readonly number[], y: readonly number[], sign: number) =>
    x.every((value, k) => Math.abs(value - sign * y[k]!) < SAME_PHYSICS * scale);
  return a.every((x, p) => close(x, b[p]!, 1) || close(x, b[p]!, -1));
}

function samePoint(a: readonly number[], b: readonly number[]): boolean {
  return a.every((value, k) => Math.abs(value - b[k]!) < 1e-3 * (1e-3 + Math.abs(value)));
}
