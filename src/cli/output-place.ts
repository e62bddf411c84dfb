import { realpathSync, statSync } from "node:fs";
import { InputError } from "../errors.js";

/** Names under which people write studies; no command puts its results into such a file. */
const STUDY_NAME = /\.ya?ml$/i;

/**
 * Refuses places for results where work of a person's would be lost: an input of the same command, under whatever name,
 * or a study that is there. Earlier results may be replaced.
 *
 * @param outputs - files to be written
 * @param inputs - files the command reads
 * @throws InputError that names the place
 */
export function requireOutputPlaces(outputs: readonly string[], inputs: readonly string[] = []): void {
  const read = inputs.map((path) => realPath(path)).filter((path) => path !== undefined);
  for (const output of outputs) {
    const real = realPath(output);
    if (real === undefined) continue;
    if (read.includes(real)) {
      throw new InputError(
        `${output}: expected a place other than the input's, got the input itself. It stays as it is; choose another name.`,
      );
    }
    if (STUDY_NAME.test(real) && statSync(real).isFile()) {
      throw new InputError(
        `${output}: expected a place without a study, got one. It stays as it is; choose another name.`,
      );
    }
  }
}

/** A path with all links followed; undefined where nothing can be found, which reading or writing will tell. */
function realPath(path: string): string | undefined {
  try {
    return realpathSync(path);
  } catch {
    return undefined;
  }
}
