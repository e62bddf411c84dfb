import { Evaluation, evaluator } from "./evaluate.js";
import type { StudyMinimum } from "./fit-model.js";
import type { Model } from "./model.js";

/** Predicted widths may exceed the total width by this factor before it is worth a word. */
const TOLERATED = 1.1;

/** A parent whose predicted partial widths add up to more than its total width. */
export interface OverfullParent {
  /** Of the isospin multiplet, e.g. `Sigma(1620)`. */
  readonly name: string;
  /** Names of its charge states. */
  readonly hadrons: readonly string[];
  /** Sum of the predicted widths of the fullest charge state, in MeV. */
  readonly predictedMeV: number;
  readonly totalMeV: number;
  /** Its widest isospin channel, e.g. `N Kbar`, and that width in MeV. */
  readonly widest: { readonly channel: string; readonly widthMeV: number };
}

/** Parents that a minimum predicts more partial width for than their total width leaves room for. */
export function overfullParents(model: Model, { vector }: Pick<StudyMinimum, "vector">): OverfullParent[] {
  const evaluation = new Evaluation(evaluator(model), vector);
  const found = new Map<string, OverfullParent>();
  for (const { hadron, channels, total } of model.parents) {
    if (total.kind === "sum") continue;
    const totalMeV = total.widthMeV;
    const widths = new Map<string, number>();
    for (const k of channels) {
      const { isospinChannel } = model.channels[k]!;
      widths.set(isospinChannel, (widths.get(isospinChannel) ?? 0) + evaluation.width(k).value);
    }
    const predictedMeV = [...widths.values()].reduce((sum, width) => sum + width, 0);
    if (predictedMeV <= TOLERATED * totalMeV) continue;
    const [full, widthMeV] = [...widths].reduce((a, b) => (b[1] > a[1] ? b : a));
    const [name, channel] = full.split(" -> ") as [string, string];
    const known = found.get(name);
    const hadrons = [...(known?.hadrons ?? []), hadron.name];
    found.set(
      name,
      known !== undefined && known.predictedMeV > predictedMeV
        ? { ...known, hadrons }
        : { name, hadrons, predictedMeV, totalMeV, widest: { channel, widthMeV } },
    );
  }
  return [...found.values()];
}

/** An overfull parent in words, without its name. */
export function overfullText({ predictedMeV, totalMeV, widest }: OverfullParent): string {
  const times = (predictedMeV / totalMeV).toPrecision(2);
  return `predicted partial widths add up to ${predictedMeV.toFixed(0)} MeV, ${times} times its total width of ${totalMeV.toFixed(0)} MeV, ${widest.channel} alone to ${widest.widthMeV.toFixed(0)} MeV`;
}
