import { InputError } from "../errors.js";
import { type Fit, fitModel } from "../model/fit-model.js";
import type { Model } from "../model/model.js";
import { resolveStudy } from "../model/resolve-study.js";
import { listProblems } from "../study/list-problems.js";
import { draftStudy } from "../study/read-study.js";
import { MAX_STUDY_BYTES } from "../study/syntax.js";
import { readInput } from "../tables/read-input.js";
import { progressBar } from "./progress.js";

/**
 * The study in a file, resolved.
 *
 * @throws InputError with everything that is wrong in the file, from syntax to particle names
 */
export function resolveStudyFile(path: string): Model {
  const { study, problems } = draftStudy(readInput(path, { maxBytes: MAX_STUDY_BYTES, what: "study" }), path);
  if (study === undefined) throw new InputError(listProblems(problems));
  return resolveStudy(study, problems);
}

/** A fit that takes longer than this, in milliseconds, shows how far it has come. */
const LONG_FIT_MS = 1000;

/** The fit of the study in a file. */
export function fitStudyFile(path: string): Fit {
  const model = resolveStudyFile(path);
  const bar = progressBar("fit", true, LONG_FIT_MS);
  try {
    return fitModel(model, { onProgress: bar.report });
  } finally {
    bar.end();
  }
}
