import { InputError } from "../errors.js";
import { type Fit, LISTED_DELTA_CHI2, MIRROR_DELTA_CHI2, type StudyMinimum } from "../model/fit-model.js";

/**
 * The minima to make tables from, by index, best first: what the study says about mirrors, and never a silent choice.
 *
 * @throws InputError if a second minimum lies within `MIRROR_DELTA_CHI2` and the study does not say what to do; if the
 * best fit did not converge, or leaves a coupling undetermined
 */
export function minimaToTabulate(fit: Fit): number[] {
  const { study } = fit.model;
  const best = fit.minima[0]!;
  requireSound(fit, best);
  const mirrors = fit.minima.flatMap((minimum, k) =>
    minimum.chi2 - best.chi2 < MIRROR_DELTA_CHI2 ? [k] : [],
  );
  if (study.fit.mirrors === "best" || mirrors.length === 1) return [0];
  if (study.fit.mirrors === "each") {
    for (const k of mirrors) requireSound(fit, fit.minima[k]!);
    return mirrors;
  }
  const listed = mirrors.map(
    (k) => `  chi2 ${fit.minima[k]!.chi2.toFixed(2)}: ${parameterText(fit.minima[k]!)}`,
  );
  throw new InputError(
    [
      `${study.file}: the data allow ${mirrors.length} solutions, with chi2 closer than ${MIRROR_DELTA_CHI2}:`,
      ...listed,
      "  Add a measurement that tells them apart, or choose in the study: `fit: { mirrors: best }` or `fit: { mirrors: each }` (one file for each).",
    ].join("\n"),
  );
}

function requireSound(fit: Fit, { verdicts, parameters }: StudyMinimum): void {
  const { file } = fit.model.study;
  if (!verdicts.converged) {
    throw new InputError(
      `${file}: the fit did not converge (${verdicts.stoppedBy}); no table was written. See \`couplet fit\`.`,
    );
  }
  if (verdicts.degenerateDirections.length === 0) return;
  const names = [
    ...new Set(
      verdicts.degenerateDirections.flatMap((d) =>
        d.flatMap((c, k) => (Math.abs(c) > 1e-3 ? [parameters[k]!.name] : [])),
      ),
    ),
  ];
  throw new InputError(
    `${file}: the data do not determine ${names.join(", ")} separately; no table was written. Add a measurement of another channel. Minima within chi2 + ${LISTED_DELTA_CHI2}: see \`couplet fit\`.`,
  );
}

function parameterText({ parameters }: StudyMinimum): string {
  return parameters.map(({ name, value }) => `${name} ${value.toPrecision(4)}`).join(", ");
}
