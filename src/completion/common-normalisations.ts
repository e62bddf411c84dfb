import { InputError } from "../errors.js";
import type { Model, Observable, TableValue } from "../model/model.js";

/** A normalisation that measured values share: all are moved by the factor 1 + error z, z one standard normal number. */
export interface CommonNormalisation {
  readonly name: string;
  /** Relative standard deviation, > 0. */
  readonly error: number;
}

/**
 * The common normalisation of each value; undefined for a value that has none.
 *
 * @param values - observables of the model, and others, which have none
 * @throws InputError for a name that is not among the study's normalisations
 */
export function commonNormalisations(
  { study, observables }: Model,
  values: readonly TableValue[],
): (CommonNormalisation | undefined)[] {
  return values.map((value) => {
    // The first observables are the study's measurements, one each and in their order; priors follow.
    const index = observables.indexOf(value as Observable);
    const name = study.measurements[index]?.normalisation;
    if (name === undefined) return undefined;
    const error = study.normalisations[name];
    if (error === undefined) {
      const { file, line, column } = value.position;
      const known = Object.keys(study.normalisations).join(", ") || "there are none";
      throw new InputError(
        `${file}:${line}:${column}: ${value.label}: expected a name among \`normalisations\` (${known}), got ${JSON.stringify(name)}.`,
      );
    }
    return error > 0 ? { name, error } : undefined;
  });
}
