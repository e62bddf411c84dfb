import { scaleFactor } from "../fit/chi-square.js";
import { type Fit, type FittedParameter, LISTED_DELTA_CHI2, type StudyMinimum } from "../model/fit-model.js";
import type { Model } from "../model/model.js";
import { notesOfOpenChannels } from "../model/notes.js";
import { overfullParents, overfullText } from "../model/overfull-parents.js";
import { validityWarnings } from "../model/validity.js";
import { asGiven, significant, withError } from "../tables/rounding.js";
import { describeUncertainties } from "./describe-uncertainty.js";
import {
  toyOptions,
  type UncertaintyOptions,
  uncertaintiesJson,
  uncertaintiesOf,
} from "./fit-uncertainty.js";
import { degreesText } from "./labels.js";
import { measuredText } from "./measured-text.js";
import { print, printJson } from "./print.js";
import { fitStudyFile } from "./run-study.js";
import { textTable } from "./text-table.js";

/** What `couplet fit` was asked for. */
export interface FitOptions extends UncertaintyOptions {
  readonly json?: true;
}

/** `couplet fit`: every minimum of a study's fit, and further errors of the best one, for people or as JSON. */
export async function runFit(path: string, options: FitOptions): Promise<void> {
  toyOptions(options);
  const fit = fitStudyFile(path);
  const further = await uncertaintiesOf(fit, options);
  if (options.json) printJson({ ...fitJson(fit), ...uncertaintiesJson(fit, further) });
  else print(describeFit(fit) + describeUncertainties(fit, further));
}

/** A fit as plain data for programs; minima best first. */
export function fitJson(fit: Fit) {
  return {
    title: fit.model.study.title,
    minima: fit.minima.map((minimum) => ({
      chi2: minimum.chi2,
      ndf: minimum.ndf,
      probability: minimum.probability ?? null,
      scaleFactor: scaleFactor(minimum.chi2, minimum.ndf) ?? null,
      parameters: minimum.parameters,
      covariance: minimum.covariance,
      pulls: minimum.pulls.map(({ observable, fitted, pull }) => ({
        quantity: observable.label,
        measured: observable.measured.value,
        plus: observable.measured.plus,
        minus: observable.measured.minus,
        unit: observable.measured.unit,
        fitted,
        pull,
        source: observable.source,
      })),
      verdicts: minimum.verdicts,
      reactionSigns: minimum.reactionSigns,
      equivalents: minimum.equivalents,
    })),
    notes: notesOfOpenChannels(fit.model),
    warnings: validityWarnings(fit, 0),
  };
}

/** A fit in words and tables. */
export function describeFit(fit: Fit): string {
  const [best] = fit.minima;
  const parts = [`${fit.model.study.title}\n`, describeMinimum(best!, "Best minimum"), describePulls(best!)];
  for (const [k, minimum] of fit.minima.slice(1).entries()) {
    const distance = minimum.chi2 - best!.chi2;
    const title = `Minimum ${k + 2}, chi2 higher by ${distance.toFixed(2)}`;
    parts.push(
      distance < LISTED_DELTA_CHI2
        ? describeMinimum(minimum, title) + describeOverfull(fit.model, minimum)
        : `\n${title}: ${shortText(minimum)}\n`,
    );
  }
  if (fit.minima.length === 1) parts.push("\nThere is no other minimum.\n");
  parts.push(...notesOfOpenChannels(fit.model).map((note) => `\nNote: ${note}\n`), describeWarnings(fit, 0));
  return parts.join("");
}

/** For minima beside the best, whose warnings are printed in full: what may exclude them. */
function describeOverfull(model: Model, minimum: StudyMinimum): string {
  return overfullParents(model, minimum)
    .map((parent) => `  WARNING: ${parent.name}: ${overfullText(parent)}\n`)
    .join("");
}

/** Where the numbers of a minimum should not be trusted, a paragraph for each reason. */
export function describeWarnings(fit: Fit, minimum: number): string {
  return validityWarnings(fit, minimum)
    .map(({ text }) => `\nWarning: ${text}\n`)
    .join("");
}

function shortText({ parameters }: StudyMinimum): string {
  return parameters
    .filter(({ kind }) => MAIN_KINDS.includes(kind))
    .map(({ name, value }) => `${name} ${significant(value, 4)}`)
    .join(", ");
}

/** Kinds of parameters in the order they are printed: those a study is about, then the ones held by priors. */
const MAIN_KINDS: readonly FittedParameter["kind"][] = ["coupling", "derived", "mixing angle"];

/** Chi-square, parameters and verdicts of one minimum. */
export function describeMinimum(minimum: StudyMinimum, title: string): string {
  const chance =
    minimum.probability === undefined ? "" : `, probability ${minimum.probability.toPrecision(3)}`;
  const head = `\n${title}: chi2 ${minimum.chi2.toFixed(2)} with ${degreesText(minimum.ndf)}${chance}\n`;
  const scale = scaleFactor(minimum.chi2, minimum.ndf) ?? 1;
  const isScaled = scale >= 1.005;
  const scaled = isScaled
    ? `  in brackets: errors times the scale factor S = sqrt(chi2/ndf) = ${scale.toFixed(2)}; used nowhere else\n`
    : "";
  const rank = ({ kind }: FittedParameter) =>
    (MAIN_KINDS.indexOf(kind) + MAIN_KINDS.length + 1) % (MAIN_KINDS.length + 1);
  const idle = minimum.parameters.filter((parameter) => !isMeasured(parameter));
  const rest =
    idle.length === 0
      ? ""
      : `  not listed, since no measurement depends on ${idle.length === 1 ? "it" : "them"}: ${idle.map(({ name }) => name).join("; ")}\n`;
  const rows = minimum.parameters
    .filter(isMeasured)
    .sort((x, y) => rank(x) - rank(y))
    .map(({ name, value, error, unit, determined }) =>
      determined
        ? [
            name,
            withError(value, error),
            unit === "1" ? "" : unit,
            inDegrees(value, error, unit),
            isScaled ? `(+- ${withError(value, scale * error).split(" +- ")[1] ?? "0"})` : "",
          ]
        : [name, "not determined"],
    );
  const signs = Object.entries(minimum.reactionSigns).map(
    ([reaction, sign]) => `  sign ${sign === 1 ? "+" : "-"} for ${reaction}\n`,
  );
  const equivalents =
    minimum.equivalents === 0
      ? ""
      : `  ${minimum.equivalents === 1 ? "1 other set of parameters predicts exactly the same; it is" : `${minimum.equivalents} other sets of parameters predict exactly the same; they are`} not listed\n`;
  return (
    head +
    textTable(rows, { indent: 2 }) +
    rest +
    scaled +
    signs.join("") +
    equivalents +
    describeVerdicts(minimum)
  );
}

/** Whether the fit says more of a parameter than was given of it. */
function isMeasured({ given }: FittedParameter): boolean {
  return given === undefined || given.measured;
}

function inDegrees(value: number, error: number, unit: string): string {
  const degrees = 180 / Math.PI;
  return unit === "rad" ? `= ${withError(value * degrees, error * degrees)} deg` : "";
}

function describeVerdicts({ verdicts, parameters }: StudyMinimum): string {
  const lines: string[] = [];
  if (!verdicts.converged)
    lines.push(`did not converge (${verdicts.stoppedBy} after ${verdicts.iterations} iterations)`);
  for (const k of verdicts.atBound) lines.push(`${parameters[k]!.name} is at its bound`);
  for (const direction of verdicts.degenerateDirections) {
    const terms = direction
      .map((c, k) => ({ c, name: parameters[k]!.name }))
      .filter(({ c }) => Math.abs(c) > 1e-3);
    lines.push(`the data do not fix ${terms.map(({ c, name }) => `${c.toFixed(3)} ${name}`).join(" + ")}`);
  }
  if (!verdicts.covariancePositiveDefinite) lines.push("the covariance matrix is not positive definite");
  return lines.map((line) => `  WARNING: ${line}\n`).join("");
}

/** A smaller pull of a given mass or total width is not worth a line. */
const LISTED_PULL = 1;

/**
 * Measurements against the fit, the largest pulls marked; after them what the fit moved of the masses, total widths and
 * angles that were given with errors, which are terms of chi2 as well.
 */
export function describePulls({ pulls, parameters }: StudyMinimum): string {
  const measured = pulls.map(({ observable, fitted, pull }) =>
    pullLine(observable.label, measuredText(observable), observable.measured.unit, fitted, pull),
  );
  const given = parameters.flatMap(({ name, kind, unit, value, given: prior }) =>
    prior === undefined || !prior.measured || kind === "breaking"
      ? []
      : [{ name, unit, fitted: value, ...prior }],
  );
  const moved = given
    .filter(({ pull }) => Math.abs(pull) >= LISTED_PULL)
    .map(({ name, unit, fitted, value, plus, minus, pull }) =>
      pullLine(name, asGiven(value, plus, minus), unit, fitted, pull),
    );
  const rest = given.length - moved.length;
  const head = ["quantity", "measured", "", "fitted", "pull", ""];
  return `\n${textTable([head, ...measured, ...moved], { indent: 2, right: [1, 3, 4] })}${
    rest === 0
      ? ""
      : `  ${rest === 1 ? "the pull of 1 given mass, total width or angle is" : `pulls of ${rest} given masses, total widths or angles are`} below ${LISTED_PULL}\n`
  }`;
}

function pullLine(label: string, measured: string, unit: string, fitted: number, pull: number): string[] {
  const mark = Math.abs(pull) >= 2 ? "<- contradicts the others" : "";
  return [label, measured, unit === "1" ? "" : unit, fitted.toPrecision(4), pull.toFixed(2), mark];
}
