import { type Fit, fitModel } from "../../src/model/fit-model.js";
import { resolveStudy } from "../../src/model/resolve-study.js";
import { readStudy } from "../../src/study/read-study.js";
import { studyText } from "../chain/run.js";

/** The fit of a study's text. */
export function fitOf(text: string): Fit {
  return fitModel(resolveStudy(readStudy(Buffer.from(text), "study.yaml")));
}

/** The six widths of the 5/2- octet with their measured values and errors replaced; some may be left out. */
export function octet(values: readonly (readonly [value: number, error: number] | undefined)[]): string {
  const [head, list] = studyText("octet-5-2").split("measurements:\n") as [string, string];
  const lines = list.trimEnd().split("\n");
  const rows = lines.flatMap((line, k) => {
    const pair = values[k];
    return pair === undefined ? [] : [line.replace(/value: [^,]*,/, `value: ${pair[0]} +- ${pair[1]} MeV,`)];
  });
  return `${head}measurements:\n${rows.join("\n")}\n`;
}
