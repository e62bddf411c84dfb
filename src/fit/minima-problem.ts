import { refuse, requirePositive } from "../require.js";
import type { Kink } from "./least-squares.js";

type Vector = readonly number[];

/** A fit of couplings whose observables do not tell the signs of some amplitudes, as plain numbers. */
export interface MinimaProblem {
  /** Couplings first, then nuisance parameters. */
  readonly parameterNames: readonly string[];
  readonly couplingCount: number;
  /**
   * Linear forms in the couplings whose sign matters: the amplitudes that enter observables, and those to be predicted.
   * Couplings that no form joins count as unrelated in sign, and of (a, b) and (a, -b) only one is listed.
   */
  readonly forms: readonly Vector[];
  /**
   * What is known of |forms[form] . g|, for starts only; may be empty. `amplitude` >= 0, `sigma` > 0. For a square w +- s
   * these are sqrt(w) and the less of s / (2 sqrt(w)) and sqrt(s); 0 and sqrt(s) where w is negative.
   */
  readonly amplitudeTargets: readonly {
    readonly form: number;
    readonly amplitude: number;
    readonly sigma: number;
  }[];
  readonly nuisanceStarts: readonly number[];
  /** One interval per parameter. */
  readonly bounds?: readonly { readonly lower: number; readonly upper: number }[];
  /** (predicted - measured) / error, priors of nuisance parameters included. */
  residuals(parameters: Vector): number[];
  /** Rows = residuals. */
  jacobian?(parameters: Vector): number[][];
  /** As in `LeastSquaresProblem`. */
  readonly kinks?: readonly Kink[];
}

/** Refuses a problem whose parts do not fit together; throws InputError naming the part. */
export function checkMinimaProblem(problem: MinimaProblem): void {
  const nuisances = problem.parameterNames.length - problem.couplingCount;
  if (nuisances < 0 || problem.nuisanceStarts.length !== nuisances) {
    refuse(
      "findMinima: nuisanceStarts",
      `${nuisances} numbers, one per name after the couplings`,
      problem.nuisanceStarts,
    );
  }
  if (problem.bounds && problem.bounds.length !== problem.parameterNames.length) {
    refuse(
      "findMinima: bounds",
      `${problem.parameterNames.length} intervals, one per parameter`,
      problem.bounds.length,
    );
  }
  for (const [k, form] of problem.forms.entries()) {
    if (form.length === problem.couplingCount && form.every(Number.isFinite)) continue;
    refuse(`findMinima: forms ${k}`, `${problem.couplingCount} finite numbers, one per coupling`, form);
  }
  for (const [i, { form, amplitude, sigma }] of problem.amplitudeTargets.entries()) {
    if (problem.forms[form] === undefined) {
      refuse(`findMinima: amplitudeTargets ${i}, form`, `an index below ${problem.forms.length}`, form);
    }
    requirePositive(`findMinima: amplitudeTargets ${i}, sigma`, sigma);
    if (!(amplitude >= 0 && Number.isFinite(amplitude))) {
      refuse(`findMinima: amplitudeTargets ${i}, amplitude`, "a finite number >= 0", amplitude);
    }
  }
}
