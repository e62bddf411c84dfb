import { InputError } from "../errors.js";
import { DaughterShapes } from "../model/daughter-shapes.js";
import type { Fit } from "../model/fit-model.js";
import type { ValidityWarning } from "../model/parent-validity.js";
import { validityWarnings } from "../model/validity.js";
import { alternativesOf, withErrorParts } from "./alternatives.js";
import { withAntiparticles } from "./antiparticle-tables.js";
import { checkRows } from "./check-rows.js";
import { closureOf } from "./closure.js";
import { commonNormalisations } from "./common-normalisations.js";
import { entriesOf, measuredWidths } from "./entries.js";
import { withShortAndLongKaons } from "./neutral-kaons.js";
import { parentTable } from "./parent-table.js";
import { predict } from "./predictions.js";
import { ReplicaRows, worldRatios } from "./replica-rows.js";
import { alternativeWorld, worlds } from "./replicas.js";
import type { ParentTable, Tables } from "./tables.js";
import { withTailWarning } from "./tail-warning.js";
import { completeParent } from "./total-width.js";

/**
 * Complete decay tables of all members and charge states: what is measured stays, the rest is predicted, what is left
 * of a measured total width is an explicit remainder, and each parent's fractions add up to 10^9 parts exactly.
 *
 * The study's policies come in this order: conflicts, antiparticles, neutral kaons. Every row is checked for what decays
 * conserve, and every daughter is a parent or an external.
 * @param minimum - index of the minimum of the fit that predicts
 * @throws InputError naming the entries where measured and predicted fractions add up to more than 1
 */
export function complete(fit: Fit, minimum: number): Tables {
  const { model } = fit;
  const { tables: policies, file } = model.study;
  const predictions = predict(fit, minimum);
  const measured = measuredWidths(predictions);
  const values = [...measured.observables, ...model.modeValues];
  const normalisations = commonNormalisations(model, values);
  const alternatives = alternativesOf(fit, minimum);
  const { replicas: count, seed } = policies;
  const replicas = new ReplicaRows(
    predictions,
    count === 0 ? [] : worlds({ predictions, values, normalisations, alternatives, count, seed }),
  );
  const warnings = validityWarnings(fit, minimum);
  const shapes = new DaughterShapes();
  const problems: string[] = [];
  const plain: ParentTable[] = [];
  for (const [index, parent] of model.parents.entries()) {
    // A stable parent (the proton of a study of semileptonic decays) has nothing to be completed.
    if (parent.total.kind === "measured" && parent.total.widthMeV === 0) continue;
    const entries = entriesOf(predictions, parent, measured);
    const completed = completeParent(parent, entries, {
      covariance: predictions.minimum.covariance,
      values,
      normalisations,
      conflicts: policies.conflicts,
    });
    if ("conflict" in completed) problems.push(`${file}: ${completed.conflict}`);
    else {
      const judged = withErrorParts(completed, parent, index, alternatives);
      const others = alternatives.map((alternative) => ({
        part: alternative.part,
        ratios: worldRatios(
          predictions,
          alternativeWorld(predictions, alternative),
          parent,
          index,
          entries,
          completed,
        ).map((ratio) => ratio ?? 1),
      }));
      const table = withWarnings(parentTable(predictions, parent, entries, judged, shapes, others), warnings);
      plain.push(replicas.withRatios(table, index, entries, completed));
    }
  }
  if (problems.length > 0) throw new InputError(problems.join("\n"));
  checkRows(plain);
  const own = policies.antiparticles === "rows" ? withAntiparticles(plain) : plain;
  const final = policies.neutralKaons === "short-long" ? withShortAndLongKaons(own, file) : own;
  const parents = final.map(withTailWarning);
  return {
    fit,
    minimum,
    parents,
    externals: closureOf(parents, model, shapes),
    replicas: replicas.replicas(),
  };
}

/** A table with the limits of validity that its parent touches, after its own warnings. */
function withWarnings(table: ParentTable, all: readonly ValidityWarning[]): ParentTable {
  const { name } = table.parent.hadron;
  const mine = all.flatMap(({ parents, text }) => (parents.includes(name) ? [text] : []));
  return { ...table, warnings: [...table.warnings, ...mine] };
}
