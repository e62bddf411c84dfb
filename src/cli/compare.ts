import { refuse } from "../require.js";
import {
  type Change,
  type Comparison,
  compareTables,
  DEFAULT_THRESHOLDS,
  type ItemChange,
  type Thresholds,
} from "../tables/compare.js";
import { fieldOf, type Leaf } from "../tables/compare-leaves.js";
import { readInput } from "../tables/read-input.js";
import { significant } from "../tables/rounding.js";
import { print, printJson } from "./print.js";
import { textTable } from "./text-table.js";

/** Options of `couplet compare` as the command line gives them. */
export interface CompareOptions {
  readonly percent?: string;
  readonly sigma?: string;
  readonly json?: true;
}

/** `couplet compare`: what changed between two table files. Exit code 1 if anything that counts did. */
export function runCompare(first: string, second: string, options: CompareOptions): void {
  const thresholds = thresholdsOf(options);
  const [a, b] = [first, second].map((file) => ({ file, bytes: readInput(file) }));
  const comparison = compareTables(a!, b!, thresholds);
  if (options.json) printJson({ first, second, thresholds, ...comparison });
  else print(describeComparison(comparison, first, second, thresholds));
  if (comparison.counted > 0) process.exitCode = 1;
}

/** Thresholds as given; both defaults where none is, and only the given one where one is. */
function thresholdsOf({ percent, sigma }: CompareOptions): Thresholds {
  if (percent === undefined && sigma === undefined) return DEFAULT_THRESHOLDS;
  return {
    ...(percent === undefined ? {} : { percent: threshold("--percent", percent) }),
    ...(sigma === undefined ? {} : { sigma: threshold("--sigma", sigma) }),
  };
}

function threshold(option: string, text: string): number {
  const value = Number(text);
  if (text.trim() === "" || !(value >= 0) || !Number.isFinite(value)) refuse(option, "a number >= 0", text);
  return value;
}

/** A comparison in words: how the tables were made first, then what is new, gone and changed beyond the thresholds. */
export function describeComparison(
  { kind, items, studyLines, changed, counted }: Comparison,
  first: string,
  second: string,
  thresholds: Thresholds,
): string {
  const limits = [
    thresholds.percent === undefined ? [] : [`${thresholds.percent} %`],
    thresholds.sigma === undefined ? [] : [`${thresholds.sigma} sigma`],
  ].flat();
  const made = [...madeLines(items), ...studyDifference(studyLines)];
  const come = items
    .filter(({ status }) => status !== "changed")
    .map((item) => `  ${item.status} ${item.kind}: ${item.name}\n`);
  const exact = kind === "couplet.v1.FactorTable";
  const values = exact
    ? firstOf(items.flatMap(coefficientText), COEFFICIENTS)
    : items.map(itemText).filter((text) => text !== "");
  const section = (title: string, lines: readonly string[]) =>
    lines.length === 0 ? "" : `\n${title}\n${lines.join("")}`;
  const sum =
    changed === 0
      ? "No value differs."
      : `${changed} values differ, ${counted} of them count${exact ? "" : `: new, gone, or beyond ${limits.join(" or ")}`}.`;
  return [
    `from ${first}\nto   ${second}\n${kind}\n`,
    section("Conventions, models, editions", made),
    section("New and vanished", come),
    section(exact ? "Changed coefficients" : "Changed beyond the thresholds", values),
    `\n${sum}\n`,
  ].join("");
}

/** Fields that say how a number is to be read. */
const READINGS = ["model", "convention", "matrixConvention", "unit"];

/** Whether a change is one of how the tables are made or read. */
function isReading({ kind }: ItemChange, { path, from, to }: Change): boolean {
  const ofTable = kind === "header" || kind === "conventions of matrices";
  const ofFit = kind === "fit" && ["used", "mirrors"].includes(path);
  if (kind === "other minimum") return false;
  // The error of an estimate from the width model is called `model` too, and is a number.
  const isText = from?.kind === "text" || to?.kind === "text";
  return ofTable || ofFit || (isText && READINGS.includes(fieldOf(path))) || path.includes("options[");
}

/** Changes of conventions, models and editions, the same change in many rows once. */
function madeLines(items: readonly ItemChange[]): string[] {
  const counts = new Map<string, number>();
  for (const item of items) {
    for (const change of item.changes.filter((each) => isReading(item, each))) {
      for (const line of changeLines(change))
        counts.set(`  ${item.kind} ${line}`, (counts.get(`  ${item.kind} ${line}`) ?? 0) + 1);
    }
  }
  return [...counts].map(([line, count]) => `${line}${count === 1 ? "" : ` (${count} times)`}\n`);
}

/** A change of a text in a line; of a list of texts, such as notes, a line for each that is gone or new. */
function changeLines({ path, from, to }: Change): string[] {
  const [before, after] = [from, to].map((leaf) => (leaf?.kind === "text" ? leaf.entries : undefined));
  if (before === undefined && after === undefined) return [`${path}: ${leafText(from)} -> ${leafText(to)}`];
  const gone = (before ?? []).filter((text) => !after?.includes(text));
  const added = (after ?? []).filter((text) => !before?.includes(text));
  return [...gone.map((text) => `${path}, gone: ${text}`), ...added.map((text) => `${path}, new: ${text}`)];
}

/** Most lines of a study, and coefficients, that are shown; `--json` has them all. */
const STUDY_LINES = 12;
const COEFFICIENTS = 100;

function firstOf(lines: readonly string[], most: number): string[] {
  const more = lines.length > most ? [`  and ${lines.length - most} more; --json has them all\n`] : [];
  return [...lines.slice(0, most), ...more];
}

/** `  factor <...>: sqrt(1/20) -> -sqrt(1/20)`. */
function coefficientText(item: ItemChange): string[] {
  return item.changes
    .filter((change) => !isReading(item, change))
    .map(({ from, to }) => `  ${item.kind} ${item.name}: ${leafText(from)} -> ${leafText(to)}\n`);
}

function studyDifference({ vanished, added }: Comparison["studyLines"]): string[] {
  const lines = [...vanished.map((line) => `    - ${line}\n`), ...added.map((line) => `    + ${line}\n`)];
  if (lines.length === 0) return [];
  const more = lines.length > STUDY_LINES ? [`    and ${lines.length - STUDY_LINES} lines more\n`] : [];
  return ["  study\n", ...lines.slice(0, STUDY_LINES), ...more];
}

/** Parts of a row that follow from its numbers; they are told in one line. */
const DETAILS = /^(waves|grid|hadron\.lineShape|lineShape|partsPerBillion)/;

/** Errors of a row's numbers, told in one line too: of the data, to another minimum, between width models. */
const ERRORS = /^error of |\.(branch|model)$/;

/** The changes of an item that count, its main numbers one by one. */
function itemText(item: ItemChange): string {
  const told = item.changes.filter((change) => change.counts && !isReading(item, change));
  if (told.length === 0) return "";
  const errors = told.filter(({ path }) => ERRORS.test(path));
  const details = told.filter(({ path }) => DETAILS.test(path) && !ERRORS.test(path));
  const main = told.filter((change) => !errors.includes(change) && !details.includes(change));
  const rows = main.map(({ path, from, to, percent, sigma }) => [
    path,
    leafText(from),
    "->",
    leafText(to),
    percent === undefined ? "" : percentText(percent),
    sigma === undefined ? "" : `${signed(sigma, 2)} sigma`,
  ]);
  const also = alsoText(details, (path) => path.split(/[.[]/)[0]!) + alsoText(errors, (path) => path);
  const title = item.kind === item.name ? item.kind : `${item.kind} ${item.name}`;
  return `  ${title}\n${textTable(rows, { indent: 4, right: [4, 5] })}${also}`;
}

/** Several changes by their names and the largest of them; one that has no first value has no size. */
function alsoText(changes: readonly Change[], nameOf: (path: string) => string): string {
  if (changes.length === 0) return "";
  const sizes = changes.flatMap(({ percent }) => (percent === undefined ? [] : [Math.abs(percent)]));
  const size = sizes.length === 0 ? "" : `, by up to ${percentText(Math.max(...sizes))}`;
  return `    also ${[...new Set(changes.map(({ path }) => nameOf(path)))].join(", ")}${size}\n`;
}

function percentText(percent: number): string {
  return Number.isFinite(percent) ? `${signed(percent, 3)} %` : "from 0";
}

function signed(value: number, digits: number): string {
  return `${value > 0 ? "+" : ""}${significant(value, digits)}`;
}

function leafText(leaf: Leaf | undefined): string {
  if (leaf === undefined) return "(none)";
  if (leaf.kind === "text") return leaf.text.replace(/\b(FLAG|ORIGIN|TOTAL_ORIGIN|KINEMATICS)_/g, "");
  if (leaf.kind === "list") return `${leaf.values.length} points`;
  const error = (leaf.plus + leaf.minus) / 2;
  // Not rounded by the error: a change far below it is to be seen.
  return `${significant(leaf.value, 5)}${error > 0 ? ` +- ${significant(error, 2)}` : ""}`;
}
