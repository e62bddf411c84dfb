import { type Fit, type FittedParameter, LISTED_DELTA_CHI2 } from "../model/fit-model.js";
import { significant, withError } from "../tables/rounding.js";
import type { ErrorParts } from "../uncertainty/error-parts.js";
import type { LeftOut } from "../uncertainty/leave-one-out.js";
import type { ModelFit, ModelSpread } from "../uncertainty/model-spread.js";
import type { QuantityProfile } from "../uncertainty/profile.js";
import type { PseudoExperiments } from "../uncertainty/pseudo-experiments.js";
import type { Uncertainties } from "./fit-uncertainty.js";
import { measuredText } from "./measured-text.js";
import { textTable } from "./text-table.js";

/** Further errors of a fit in words and tables. */
export function describeUncertainties(fit: Fit, all: Uncertainties): string {
  const { profiles, pseudoExperiments, leaveOneOut, models, errorParts } = all;
  return [
    profiles && describeProfiles(profiles),
    pseudoExperiments && describePseudoExperiments(pseudoExperiments),
    leaveOneOut && describeLeaveOneOut(leaveOneOut),
    models && describeModels(models),
    errorParts && describeErrorParts(fit, errorParts),
  ]
    .filter((text) => text !== undefined)
    .join("");
}

const HELD_BY_PRIORS: readonly string[] = ["total width", "mass", "normalisation", "breaking"];

/** What a study is about: not the parameters that priors hold. */
const isMain = ({ kind }: { readonly kind: FittedParameter["kind"] | "width" }) =>
  !HELD_BY_PRIORS.includes(kind);

const shownUnit = (unit: string) => (unit === "1" ? "" : unit);

/** A number with the digits that an error of this size leaves. */
function withDigitsOf(value: number | undefined, error: number): string {
  if (value === undefined) return "?";
  if (!Number.isFinite(value)) return "open";
  return value === 0 ? "0" : withError(value, error).split(" +- ")[0]!;
}

function describeProfiles(profiles: readonly QuantityProfile[]): string {
  const rows = profiles.filter(isMain).map(({ name, unit, value, error, intervals }) => {
    const texts = intervals.map(({ lower, upper }) => {
      const ends = [lower.value, upper.value].filter((end) => end !== undefined && Number.isFinite(end));
      const size = Math.max(...ends.map((end) => Math.abs(end! - value)));
      return `${withDigitsOf(lower.value, size)} to ${withDigitsOf(upper.value, size)}`;
    });
    return [name, withError(value, error), shownUnit(unit), ...texts];
  });
  const head = ["", "linear error", "", "68.3 %", "95.4 %"];
  return `\nIntervals by profile likelihood, all other parameters fitted again:\n${textTable([head, ...rows], { indent: 2 })}`;
}

function describePseudoExperiments(result: PseudoExperiments): string {
  const { count, seed, unconverged, probability, branches, quantities } = result;
  const rows = quantities.filter(isMain).map(({ name, unit, truth, quantiles, coverage }) => {
    const size = (quantiles[2] - quantiles[0]) / 2;
    return [
      name,
      ...[truth, ...quantiles].map((value) => withDigitsOf(value, size)),
      shownUnit(unit),
      `${(100 * coverage).toFixed(1)} %`,
    ];
  });
  const head = ["", "drawn from", "16 %", "50 %", "84 %", "", "within 1 error"];
  const others = branches
    .map((times, k) => ({ times, k }))
    .filter(({ times, k }) => k > 0 && times > 0)
    .map(({ times, k }) => `  in ${times} of them minimum ${k + 1} is the best\n`);
  const failed = unconverged === 0 ? "" : `  ${unconverged} fits did not converge and are left out\n`;
  const title = `\n${count} pseudo-experiments, seed ${seed}; ${(100 * probability).toFixed(1)} % have at least the chi2 of the data:\n`;
  return title + textTable([head, ...rows], { indent: 2, right: [1, 2, 3, 4, 6] }) + others.join("") + failed;
}

function describeLeaveOneOut(left: readonly LeftOut[]): string {
  const shown = (name: string, kind: string) =>
    kind === "coupling" || kind === "mixing angle" || /(^|\.)alpha_F$/.test(name);
  const names = left[0]!.parameters.filter(({ name, kind }) => shown(name, kind)).map(({ name }) => name);
  const rows = left.map(({ observable, predicted, determined, pull, chi2, verdicts, parameters }) => {
    const shifts = parameters
      .filter(({ name }) => names.includes(name))
      .map(({ value: now, error, determined: isFixed, shift }) =>
        isFixed ? `${withDigitsOf(now, error)} (${signed(shift, error)})` : "free",
      );
    const mark = verdicts.degenerateDirections.length > 0 ? "<- not fixed by the others" : "";
    return [
      observable.label,
      measuredText(observable),
      determined ? significant(predicted, 4) : "free",
      determined ? pull.toFixed(2) : "",
      chi2.toFixed(2),
      ...shifts,
      mark,
    ];
  });
  const head = ["left out", "measured", "predicted", "pull", "chi2", ...names, ""];
  return `\nFits without one measurement each, shifts in brackets:\n${textTable([head, ...rows], { indent: 2, right: [2, 3, 4] })}`;
}

function signed(value: number, error: number): string {
  return `${value < 0 ? "-" : "+"}${withDigitsOf(Math.abs(value), error)}`;
}

function describeModels({ own, fits, skipped }: ModelSpread): string {
  const comparable = (parameters: ModelFit["parameters"]) =>
    parameters.filter(
      ({ name, kind }) => kind === "mixing angle" || (kind === "derived" && /(F\/D|alpha_F)$/.test(name)),
    );
  const names = comparable(own.parameters).map(({ name }) => name);
  const row = (label: string, { chi2, ndf, parameters }: ModelSpread["own"], remark: string) => [
    label,
    `${chi2.toFixed(2)}/${ndf}`,
    ...comparable(parameters).map(({ value, error }) => withError(value, error)),
    remark,
  ];
  const rows = fits.map((fit) =>
    row(
      modelText(fit),
      fit,
      fit.aboveBest > 0.005 ? `another minimum is lower by ${fit.aboveBest.toFixed(2)}` : "",
    ),
  );
  const head = ["width model", "chi2/ndf", ...names, ""];
  const left = skipped.map(({ model, reason }) => `  not ${modelText({ model })}: ${reason}\n`);
  const wide = comparable(own.parameters).flatMap(({ name, value, error }) => {
    const others = fits.flatMap(({ parameters }) => parameters.filter((p) => p.name === name));
    const values = [value, ...others.map((other) => other.value)];
    const spread = (Math.max(...values) - Math.min(...values)) / 2;
    return spread > error ? [`${name} (${significant(spread, 2)} against ${significant(error, 2)})`] : [];
  });
  const warning =
    wide.length === 0
      ? ""
      : `  WARNING: half the range over the models is larger than the error of the data for ${wide.join(", ")}: quote the spread as the error\n`;
  return `\nThe same data with other width models:\n${textTable([head, row("as in the study", own, ""), ...rows], { indent: 2 })}${left.join("")}${warning}`;
}

function modelText({ model: { id, options } }: Pick<ModelFit, "model">): string {
  const values = Object.entries(options).map(([name, value]) => ` ${name} ${significant(value, 4)}`);
  return `${id}${values.join(",")}`;
}

function describeErrorParts({ model, minima }: Fit, parts: readonly ErrorParts[]): string {
  const rows = model.channels.flatMap(({ id, waves }, channel) => {
    if (waves.every(({ kinematicFactor }) => kinematicFactor === 0)) return [];
    const { statistical, branch, model: ofModel, breaking } = parts[channel]!;
    return [[id, ...[statistical, branch, ofModel ?? 0, breaking].map((part) => significant(part, 2))]];
  });
  const head = ["error of a predicted width, MeV", "statistical", "branch", "model", "breaking"];
  const hasBranches = minima.some(({ chi2 }, k) => k > 0 && chi2 < minima[0]!.chi2 + LISTED_DELTA_CHI2);
  const note = hasBranches
    ? `  branch: the largest difference to another minimum within delta chi2 = ${LISTED_DELTA_CHI2}\n`
    : "";
  return `\n${textTable([head, ...rows], { indent: 2, right: [1, 2, 3, 4] })}${note}`;
}
