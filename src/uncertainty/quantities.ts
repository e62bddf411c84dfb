import { mixedRatios } from "../model/derived-numbers.js";
import { decayHasFAndD, type Evaluation, type Graded } from "../model/evaluate.js";
import type { FittedParameter, StudyMinimum } from "../model/fit-model.js";
import type { Model, PriorTarget, WidthSum } from "../model/model.js";

/** A number that a fit determines: a parameter, what is derived from parameters, or a predicted width. */
export interface StudyQuantity {
  readonly name: string;
  readonly unit: string;
  readonly kind: FittedParameter["kind"] | "width";
  /** Least value it can have; 0 for widths. */
  readonly least?: number;
  of(evaluation: Evaluation): Graded;
}

const DERIVED = ["D", "F", "F/D", "alpha_F", "alpha_D"] as const;

/** Every parameter of a model, then F, D and their ratios for each decay that has them, and ratios of mixed pairs. */
export function parameterQuantities(model: Model): StudyQuantity[] {
  const quantity = (
    name: string,
    unit: string,
    kind: StudyQuantity["kind"],
    target: PriorTarget,
  ): StudyQuantity => ({ name, unit, kind, of: (evaluation) => evaluation.priorTarget(target) });
  const direct = model.parameters.map(({ name, unit, kind }, parameter) =>
    quantity(name, unit, kind, { parameter }),
  );
  const derived = model.decays.flatMap((resolved, decay) => {
    if (!decayHasFAndD(resolved)) return [];
    const unit = model.parameters[resolved.couplingRows[0]!.findIndex((c) => c !== 0)]!.unit;
    const prefix = resolved.name === "" ? "" : `${resolved.name}.`;
    return DERIVED.map((name) =>
      quantity(`${prefix}${name}`, name === "D" || name === "F" ? unit : "1", "derived", { decay, name }),
    );
  });
  const ratios = mixedRatios(model).map(
    ({ name, at }): StudyQuantity => ({
      name,
      unit: "1",
      kind: "derived",
      of: ({ parameters }) => at(parameters),
    }),
  );
  return [...direct, ...derived, ...ratios];
}

/** The partial width of every charge channel, in the order of `model.channels`. */
export function channelWidths(model: Model): StudyQuantity[] {
  return model.channels.map(({ id }, channel) => widthQuantity(id, [{ channel, weight: 1 }]));
}

/** The partial width of every open isospin channel: summed over the daughters' charges, averaged over the parents'. */
export function isospinWidths(model: Model): StudyQuantity[] {
  const names = new Set(
    model.channels
      .filter(({ waves }) => waves.some(({ kinematicFactor }) => kinematicFactor > 0))
      .map(({ isospinChannel }) => isospinChannel),
  );
  return [...names].map((name) => {
    const members = model.channels.flatMap(({ isospinChannel, parent }, channel) =>
      isospinChannel === name ? [{ channel, parent: parent.name }] : [],
    );
    const weight = 1 / new Set(members.map(({ parent }) => parent)).size;
    return widthQuantity(
      name,
      members.map(({ channel }) => ({ channel, weight })),
    );
  });
}

function widthQuantity(name: string, sum: WidthSum): StudyQuantity {
  return { name, unit: "MeV", kind: "width", least: 0, of: (evaluation) => evaluation.widthSum(sum) };
}

/** Standard deviation of a quantity by linear propagation of a covariance matrix. */
export function linearError({ gradient }: Graded, covariance: StudyMinimum["covariance"]): number {
  let variance = 0;
  for (let j = 0; j < gradient.length; j++) {
    const d = gradient[j]!;
    if (d === 0) continue;
    const row = covariance[j]!;
    for (let k = 0; k < gradient.length; k++) variance += d * row[k]! * gradient[k]!;
  }
  return Math.sqrt(Math.max(0, variance));
}
