import { type Fit, fitModel } from "../model/fit-model.js";
import { resolveStudy } from "../model/resolve-study.js";
import { readStudy } from "../study/read-study.js";
import { readInput } from "./read-input.js";

/** The fit of the study in a file. */
export function fitStudyFile(path: string): Fit {
  return fitModel(resolveStudy(readStudy(readInput(path), path)));
}
