import { type Fit, LISTED_DELTA_CHI2 } from "../model/fit-model.js";
import type { Parent, WidthModelChoice } from "../model/model.js";
import { modelRefits } from "../uncertainty/model-spread.js";
import { entriesOf, type Measured, measuredWidths } from "./entries.js";
import { otherRows } from "./other-rows.js";
import { type Predictions, predict } from "./predictions.js";
import type { Estimate } from "./tables.js";
import type { Completed, CompletedRow, Entry } from "./total-width.js";

/** Another answer to the same data: another minimum, or the minimum on the same branch with another width model. */
export interface Alternative {
  readonly part: "branch" | "model";
  readonly predictions: Predictions;
  readonly measured: Measured;
  /** Index of the minimum in the study's own fit; for another model that of the minimum it was compared with. */
  readonly minimum: number;
  /** The width model of all decays; absent where it is the study's own. */
  readonly model?: WidthModelChoice;
}

/** The alternatives of a fit's minimum: other minima within chi2 + 9 and, where the study compares them, width models. */
export function alternativesOf(fit: Fit, minimum: number): Alternative[] {
  const limit = fit.minima[0]!.chi2 + LISTED_DELTA_CHI2;
  const branches = fit.minima.flatMap(({ chi2 }, index): Alternative[] => {
    if (index === minimum || chi2 >= limit) return [];
    return [{ part: "branch", minimum: index, ...predicted(fit, index) }];
  });
  if (fit.model.study.tables.widthModels === "own") return branches;
  const models = modelRefits(fit, minimum).fits.map(
    ({ model, fit: refit, minimum: index }): Alternative => ({
      part: "model",
      minimum,
      model,
      ...predicted(refit, index),
    }),
  );
  return [...branches, ...models];
}

function predicted(fit: Fit, minimum: number): Pick<Alternative, "predictions" | "measured"> {
  const predictions = predict(fit, minimum);
  return { predictions, measured: measuredWidths(predictions) };
}

/** Entries of the parent at an index of the study's parents, as an alternative has them. */
export function alternativeEntries({ predictions, measured }: Alternative, parentIndex: number): Entry[] {
  return entriesOf(predictions, predictions.fit.model.parents[parentIndex]!, measured);
}

/**
 * A completed parent whose rows also quote the errors from the choice of the minimum and of the width model.
 *
 * Branch: the largest difference to another minimum; model: half the range over the models, the study's own among them.
 */
export function withErrorParts(
  completed: Completed,
  parent: Parent,
  parentIndex: number,
  alternatives: readonly Alternative[],
): Completed {
  const rows = (part: Alternative["part"]) =>
    alternatives
      .filter((alternative) => alternative.part === part)
      .map((alternative) => {
        const entries = alternativeEntries(alternative, parentIndex);
        return otherRows(parent, entries, parent.total.widthMeV, completed);
      });
  const [branches, models] = [rows("branch"), rows("model")];
  const estimate = (own: Estimate, of: "fractions" | "widthsMeV", k: number): Estimate => {
    const values = (others: typeof branches) => [own.value, ...others.map((other) => other[of][k]!)];
    const away = Math.max(...values(branches).map((value) => Math.abs(value - own.value)));
    const range = Math.max(...values(models)) - Math.min(...values(models));
    // What is lost in the digits of a double is none.
    const size = (error: number) => (error > 1e-12 * own.value ? error : 0);
    return {
      ...own,
      branch: size(away),
      ...(models.length === 0 ? {} : { model: size(range / 2) }),
    };
  };
  const row = (own: CompletedRow, k: number): CompletedRow => ({
    ...own,
    fraction: estimate(own.fraction, "fractions", k),
    widthMeV: estimate(own.widthMeV, "widthsMeV", k),
  });
  const { estimates, remainder } = completed;
  return {
    ...completed,
    estimates: estimates.map(row),
    ...(remainder === undefined ? {} : { remainder: row(remainder, estimates.length) }),
  };
}
