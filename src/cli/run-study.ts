import { InputError } from "../errors.js";
import { type Fit, fitModel } from "../model/fit-model.js";
import type { Model } from "../model/model.js";
import { resolveStudy } from "../model/resolve-study.js";
import { listProblems } from "../study/list-problems.js";
import { draftStudy } from "../study/read-study.js";
import { MAX_STUDY_BYTES } from "../study/syntax.js";
import { readInput } from "./read-input.js";

/**
 * The study in a file, resolved.
 *
 * @throws InputError with everything that is wrong in the file, from syntax to particle names
 */
export function resolveStudyFile(path: string): Model {
  const { study, problems } = draftStudy(readInput(path, MAX_STUDY_BYTES), path);
  if (study === undefined) throw new InputError(listProblems(problems));
  return resolveStudy(study, problems);
}

/** The fit of the study in a file. */
export function fitStudyFile(path: string): Fit {
  return fitModel(resolveStudyFile(path));
}
