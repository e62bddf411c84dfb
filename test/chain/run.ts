import { readFileSync } from "node:fs";
import { join } from "node:path";
import { complete } from "../../src/completion/complete.js";
import type { Tables } from "../../src/completion/tables.js";
import { type Fit, fitModel, type StudyMinimum } from "../../src/model/fit-model.js";
import { resolveStudy } from "../../src/model/resolve-study.js";
import { readStudy } from "../../src/study/read-study.js";

/** The text of a study in `studies/`. */
export function studyText(name: string): string {
  return readFileSync(join(__dirname, "studies", `${name}.yaml`), "utf8");
}

/** The fit of a study's text. */
export function fitOf(text: string): Fit {
  return fitModel(resolveStudy(readStudy(Buffer.from(text), "study.yaml")));
}

/** The completed tables of a study's text, at its best minimum. */
export function tablesOf(text: string): Tables {
  return complete(fitOf(text), 0);
}

/** Value of a fitted or derived parameter. */
export function parameterValue(minimum: StudyMinimum, name: string): number {
  const found = minimum.parameters.find((parameter) => parameter.name === name);
  if (found === undefined)
    throw new Error(`no parameter ${name} among ${minimum.parameters.map((p) => p.name).join(", ")}`);
  return found.value;
}

/** The study with only the measurements whose lines contain one of the texts. */
export function withMeasurements(text: string, wanted: readonly string[]): string {
  const [head, list] = text.split("measurements:\n") as [string, string];
  const lines = list.split("\n").filter((line) => wanted.some((part) => line.includes(part)));
  return `${head}measurements:\n${lines.join("\n")}\n`;
}

/** Sum of the widths of a parent's rows whose id ends in a channel of `daughters`, in MeV. */
export function rowWidthMeV(tables: Tables, parent: string, daughters: readonly string[]): number {
  const table = tables.parents.find(({ parent: { hadron } }) => hadron.name === parent);
  if (table === undefined) throw new Error(`no parent ${parent}`);
  return table.rows
    .filter(({ id }) => daughters.some((pair) => id === `${parent} -> ${pair}`))
    .reduce((sum, { widthMeV }) => sum + widthMeV.value, 0);
}
