import { formatRoot } from "../exact/signed-root.js";
import { couplet } from "../gen/couplet.js";
import { dAndFSum, dAndFText, formText, type SumStyle, sumText } from "../tables/coupling-sums.js";
import { significant, withError } from "../tables/rounding.js";
import { fractionText } from "./labels.js";
import { textTable } from "./text-table.js";

import v1 = couplet.v1;

import { degreesText } from "./labels.js";

type Maybe<T> = T | null | undefined;

/** Sums as a terminal shows them. */
const PLAIN: SumStyle = {
  factor: (size) => `${formatRoot(size)} `,
  name: (name) => name,
  weight: (size) => `${significant(size, 4)} `,
};

/**
 * A coupling table in words: reduced couplings, isospin channels, charge states, isospin Lagrangian.
 *
 * @param source - the file it is from
 */
export function describeCouplings(tables: v1.CouplingTables.$Properties, source: string): string {
  return [
    describeHead(tables, source),
    describeReduced(tables.reduced ?? []),
    describeIsospin(tables.isospin ?? []),
    describeCharged(tables.charged ?? []),
    ...(tables.isospinLagrangians ?? []).map(describeLagrangian),
    ...(tables.header?.cautions ?? []).map((caution) => `\nCaution: ${caution}`),
    ...(tables.header?.notes ?? []).map((note) => `\nNote: ${note}`),
    "\n",
  ].join("");
}

function describeHead(
  { header, fit, matrixConvention }: v1.CouplingTables.$Properties,
  source: string,
): string {
  const used = fit?.used ?? 0;
  const minimum = fit?.minima?.[used];
  const octets = (matrixConvention?.octets ?? []).map(matrixText);
  return [
    `${source}: ${header?.title}`,
    `couplings by ${header?.producer}, schema 1.${header?.schemaMinor}`,
    `fit: minimum ${used + 1} of ${fit?.minima?.length ?? 0} (mirrors: ${fit?.mirrors}), chi2 ${minimum?.chi2?.toFixed(2)} with ${degreesText(minimum?.ndf)}`,
    `phases of states: ${header?.convention}; phases of matrices: ${matrixConvention?.id}, with`,
    `  ${matrixConvention?.lagrangian}`,
    ...octets,
    ...(matrixConvention?.tensors ?? []).map((text) => `  ${text}`),
    "",
  ].join("\n");
}

/** `  B = [ ..., ..., ... ; ... ]`, one row a line. */
function matrixText({ symbol, entries }: v1.Matrix.$Properties): string {
  const cells = [1, 2, 3].map((row) =>
    [1, 2, 3].map((column) => {
      const entry = (entries ?? []).find((e) => e.row === row && e.column === column);
      return sumText(
        (entry?.parts ?? []).map(({ times, hadron }) => [times, hadron ?? ""]),
        PLAIN,
      );
    }),
  );
  return textTable(
    cells.map((row, k) => [k === 0 ? `${symbol} =` : "", ...row]),
    { indent: 2 },
  ).trimEnd();
}

function describeReduced(reduced: readonly v1.ReducedCoupling.$Properties[]): string {
  const rows = reduced.map(({ name, from, to, twoL, twoS, value, unit }) => [
    name ?? "",
    estimateText(value, unit),
    `${from} -> ${(to ?? []).join(" ")}`,
    waveText(twoL, twoS),
  ]);
  return `\nReduced couplings\n${textTable(rows, { indent: 2 })}`;
}

function describeIsospin(rows: readonly v1.Coupling.$Properties[]): string {
  const head = ["channel", "wave", "coupling", "in D and F", "value", "constant"];
  const cells = rows.map((row) => [
    row.id ?? "",
    waveText(row.twoL, row.twoS),
    formText(row, "coefficient", PLAIN),
    dAndFText(row, "dAndF", PLAIN),
    estimateText(row.value, row.unit),
    row.isospinConstant == null ? "" : `~ g(${row.isospinConstant})`,
  ]);
  const title = `\nBy isospin (times <I1 m1; I2 m2 | I m> for a charge state), model ${modelTexts(rows)}\n`;
  return title + textTable(withoutEmptyColumns(head, cells), { indent: 2 });
}

function describeCharged(rows: readonly v1.Coupling.$Properties[]): string {
  const head = ["channel", "wave", "phases of states", "value", "phases of matrices", "value"];
  const cells = rows.map((row) => [
    row.id ?? "",
    waveText(row.twoL, row.twoS),
    formText(row, "coefficient", PLAIN),
    estimateText(row.value, row.unit),
    dAndFText(row, "matrixDAndF", PLAIN) || formText(row, "matrixCoefficient", PLAIN),
    row.matrixValue == null ? "not defined" : estimateText(row.matrixValue, row.unit),
  ]);
  return `\nBy charge state\n${textTable(withoutEmptyColumns(head, cells), { indent: 2 })}`;
}

/** Head and rows, without the columns that no row fills. */
function withoutEmptyColumns(head: readonly string[], rows: readonly (readonly string[])[]): string[][] {
  const kept = head.map((_, column) => rows.some((row) => row[column] !== ""));
  return [head, ...rows].map((row) => row.filter((_, column) => kept[column]));
}

function describeLagrangian(lagrangian: v1.IsospinLagrangian.$Properties): string {
  const { convention, multiplets, from, to, constants, unit, twoL, twoS } = lagrangian;
  const rows = (constants ?? []).map(({ name, vertex, dAndF, value }) => [
    `g(${name})`,
    dAndFSum(dAndF, PLAIN),
    estimateText(value, unit),
    vertex ?? "",
  ]);
  return `\nIsospin Lagrangian (${convention}) of ${from} -> ${(to ?? []).join(" ")}, ${waveText(twoL, twoS)}\n  ${multiplets}\n${textTable(rows, { indent: 2 })}`;
}

function estimateText(estimate: Maybe<v1.Estimate.$Properties>, unit: Maybe<string>): string {
  const { value, plus, breaking } = estimate ?? {};
  const br = breaking ? ` (br. ${significant(breaking, 2)})` : "";
  return `${withError(value ?? 0, plus ?? 0)}${br}${unit === "1" || !unit ? "" : ` ${unit}`}`;
}

/** `L=2 S=1/2`. */
function waveText(twoL: Maybe<number>, twoS: Maybe<number>): string {
  return `L=${fractionText(twoL ?? 0, 2)} S=${fractionText(twoS ?? 0, 2)}`;
}

/** The width models of some rows with their scales, each once. */
function modelTexts(rows: readonly v1.Coupling.$Properties[]): string {
  const texts = rows.map(({ model, options }) => {
    const scales = (options ?? []).map(
      ({ name, value, unit }) => `${name} ${value}${unit === "1" ? "" : ` ${unit}`}`,
    );
    return `${model}${scales.length === 0 ? "" : ` (${scales.join(", ")})`}`;
  });
  return [...new Set(texts)].join("; ");
}
