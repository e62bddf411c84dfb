import { formatRational, rational } from "../exact/rational.js";
import { formatRoot } from "../exact/signed-root.js";
import { couplet } from "../gen/couplet.js";
import { dAndFSum, dAndFText, formText, type SumStyle } from "./coupling-sums.js";
import { latexEscaped, latexHadron } from "./export-latex-names.js";
import { latexComment, latexNumber, latexWithErrors } from "./export-latex-numbers.js";
import { significant } from "./rounding.js";
import { byVertexFamily } from "./vertex-families.js";

import v1 = couplet.v1;

type Maybe<T> = T | null | undefined;

/** Sums as math mode sets them. */
const MATH: SumStyle = {
  factor: (size) => `${latexRoot(formatRoot(size))}\\,`,
  name: latexCoupling,
  weight: (size) => `${latexNumber(significant(size, 4))}\\,`,
};

/** A line of a tabular: its cells, and what stands behind it as a comment. */
interface Line {
  readonly cells: readonly string[];
  readonly id: string;
}

/**
 * Coupling tables as LaTeX, each a `tabular` with the rules of the package booktabs: the reduced couplings; then for each
 * vertex family and wave the isospin channels, the charge states in both conventions, and the isospin Lagrangian.
 *
 * Coefficients are exact. Values are rounded with their errors by the rule of the Particle Data Group, errors from
 * breaking of the symmetry have a column of their own, with two digits. Columns that no row fills are left out. Each
 * line ends in a comment with its name in the table.
 */
export function exportCouplingsLatex(tables: v1.CouplingTables): string {
  const { header, matrixConvention, isospinLagrangians } = tables;
  const head = [
    `${header?.title} (${header?.producer})`,
    "Needs \\usepackage{booktabs}. Errors are those of the data; the column `breaking' is the error from breaking of SU(3).",
    `Phases of states: ${header?.convention}; phases of matrices: ${matrixConvention?.id}, ${matrixConvention?.lagrangian}.`,
    "By isospin: times the SU(2) coefficient <I1 m1; I2 m2 | I m> they are the couplings of the charge states.",
    "The sign of all couplings of one decaying multiplet together is free.",
    ...(header?.cautions ?? []).map((caution) => `Caution: ${caution}`),
  ];
  const parts = [
    reducedTabular(tables.reduced),
    ...byVertexFamily(tables.isospin).map(({ families, rows }) => isospinTabular(families, rows)),
    ...byVertexFamily(tables.charged).map(({ families, rows }) => chargedTabular(families, rows)),
    ...isospinLagrangians.map(lagrangianTabular),
  ];
  return `${[...head.map((line) => `% ${latexComment(line)}`), ...parts].join("\n")}\n`;
}

function reducedTabular(reduced: readonly v1.ReducedCoupling.$Properties[]): string {
  const lines = reduced.map(({ name, from, to, twoL, twoS, value, unit }) => ({
    cells: [
      `$${latexCoupling(name ?? "")}$`,
      familyText(`${from} -> ${(to ?? []).join(" ")}`),
      waveText(twoL, twoS),
      valueText(value),
      unitText(unit),
    ],
    id: name ?? "",
  }));
  return tabular("Reduced couplings", ["Coupling", "Decay", "Wave", "Value", "Unit"], lines);
}

function isospinTabular(families: readonly string[], rows: readonly v1.Coupling.$Properties[]): string {
  const lines = rows.map((row) => ({
    cells: [
      channelText(row),
      `$${formText(row, "coefficient", MATH)}$`,
      mathOrEmpty(dAndFText(row, "dAndF", MATH)),
      valueText(row.value),
      breakingText(row.value),
      row.isospinConstant == null ? "" : `$\\propto ${constantText(row.isospinConstant)}$`,
      unitText(row.unit),
    ],
    id: row.id ?? "",
  }));
  const head = ["Channel", "Coupling", "In $D$ and $F$", "Value", "Breaking", "Constant", "Unit"];
  return tabular(titleText(families, rows, "by isospin"), head, lines, modelTexts(rows));
}

function chargedTabular(families: readonly string[], rows: readonly v1.Coupling.$Properties[]): string {
  const lines = rows.map((row) => ({
    cells: [
      channelText(row),
      `$${formText(row, "coefficient", MATH)}$`,
      valueText(row.value),
      mathOrEmpty(dAndFText(row, "matrixDAndF", MATH) || formText(row, "matrixCoefficient", MATH)),
      row.matrixValue == null ? "not defined" : valueText(row.matrixValue),
      breakingText(row.value),
      unitText(row.unit),
    ],
    id: row.id ?? "",
  }));
  const head = ["Channel", "Phases of states", "Value", "Phases of matrices", "Value", "Breaking", "Unit"];
  return tabular(titleText(families, rows, "by charge state"), head, lines, modelTexts(rows));
}

function lagrangianTabular(lagrangian: v1.IsospinLagrangian.$Properties): string {
  const { convention, multiplets, from, to, constants, unit, twoL, twoS } = lagrangian;
  const lines = (constants ?? []).map(({ name, vertex, dAndF, value }) => ({
    cells: [
      `$${constantText(name ?? "")}$`,
      `$${dAndFSum(dAndF, MATH)}$`,
      valueText(value),
      breakingText(value),
      `\\texttt{${latexText(vertex ?? "")}}`,
      unitText(unit),
    ],
    id: `g(${name})`,
  }));
  const family = `${familyText(`${from} -> ${(to ?? []).join(" ")}`)}, ${waveText(twoL, twoS)}`;
  const head = ["Constant", "In $D$ and $F$", "Value", "Breaking", "Vertex", "Unit"];
  return tabular(`Isospin Lagrangian, ${family}`, head, lines, [`${convention}, ${multiplets}`]);
}

/** One table, without the columns that no line fills; `remarks` stand before it as comments. */
function tabular(
  title: string,
  head: readonly string[],
  lines: readonly Line[],
  remarks: readonly string[] = [],
): string {
  const kept = head.map((_, column) => lines.some(({ cells }) => cells[column] !== ""));
  const row = (cells: readonly string[]) => `${cells.filter((_, column) => kept[column]).join(" & ")} \\\\`;
  const columns = kept.filter((isKept) => isKept).length;
  return [
    "",
    ...remarks.map((text) => `% ${latexComment(text)}`),
    `\\begin{tabular}{${"l".repeat(columns)}}`,
    "\\toprule",
    `\\multicolumn{${columns}}{l}{${title}} \\\\`,
    "\\midrule",
    row(head),
    "\\midrule",
    ...lines.map(({ cells, id }) => `${row(cells)} % ${latexComment(id)}`),
    "\\bottomrule",
    "\\end{tabular}",
  ].join("\n");
}

function titleText(
  families: readonly string[],
  rows: readonly v1.Coupling.$Properties[],
  by: string,
): string {
  const [{ twoL, twoS }] = rows as [v1.Coupling.$Properties];
  const models = [...new Set(rows.map(({ model }) => model))].map((model) => latexEscaped(model ?? ""));
  return `${families.map(familyText).join("; ")}, ${waveText(twoL, twoS)}, ${by}, model ${models.join(", ")}`;
}

/** The width models of some rows with their scales, each once: a coupling of one goes into no other. */
function modelTexts(rows: readonly v1.Coupling.$Properties[]): string[] {
  const texts = rows.map(({ model, options }) => {
    const scales = (options ?? []).map(({ name, value, unit }) => `${name} = ${value} [${unit}]`);
    return [`Width model ${model}`, ...scales].join(", ");
  });
  return [...new Set(texts)];
}

/** `octet $\to$ baryon-octet pseudoscalar-octet`. */
function familyText(family: string): string {
  return family
    .split(" -> ")
    .map((part) => latexText(part))
    .join(" $\\to$ ");
}

function channelText({ parent, daughters }: v1.Coupling.$Properties): string {
  const names = (daughters ?? []).map(({ name }) => latexHadron(name ?? ""));
  return `$${latexHadron(parent?.name ?? "")} \\to ${names.join("\\,")}$`;
}

function valueText(estimate: Maybe<v1.Estimate.$Properties>): string {
  const { value, plus, minus } = estimate ?? {};
  return `$${latexWithErrors(value, plus, minus)}$`;
}

function breakingText(estimate: Maybe<v1.Estimate.$Properties>): string {
  return estimate?.breaking ? `$${latexNumber(significant(estimate.breaking, 2))}$` : "";
}

function mathOrEmpty(text: string): string {
  return text === "" ? "" : `$${text}$`;
}

function unitText(unit: Maybe<string>): string {
  return !unit || unit === "1" ? "" : latexText(unit);
}

/** `$L=2$, $S=1/2$`. */
function waveText(twoL: Maybe<number>, twoS: Maybe<number>): string {
  const [L, S] = [twoL, twoS].map((twice) => formatRational(rational(twice ?? 0, 2)));
  return `$L=${L}$, $S=${S}$`;
}

/** `sqrt(9/20)` as `\sqrt{9/20}`, `1/2` as `\frac{1}{2}`. */
function latexRoot(text: string): string {
  return text.replace(/^sqrt\((.*)\)$/, "\\sqrt{$1}").replace(/^(\d+)\/(\d+)$/, "\\frac{$1}{$2}");
}

/** `octet.g(10bar_1)` as `\mathrm{octet}.g(\overline{10}_{1})`; D and F as they are. */
function latexCoupling(name: string): string {
  const [, prefix, letter, label] = /^(?:(.*)\.)?([gh])\((.*)\)$/.exec(name) ?? [];
  if (label === undefined) return name.length === 1 ? name : latexUpright(name);
  const irreps = label.replace(/(\d+)bar/g, "\\overline{$1}").replace(/_(\d+)/g, "_{$1}");
  return `${prefix === undefined ? "" : `${latexUpright(prefix)}.`}${letter}(${irreps})`;
}

/** `N Sigma K` as `g_{N\,\Sigma\,K}`. */
function constantText(name: string): string {
  const hadrons = name.split(" ").map((part) => (part === "eta8" ? "\\eta_{8}" : latexHadron(part)));
  return `g_{${hadrons.join("\\,")}}`;
}

function latexUpright(name: string): string {
  return `\\mathrm{${latexEscaped(name).replaceAll(" ", "\\ ")}}`;
}

/** Text outside math mode that prints as it stands. */
function latexText(text: string): string {
  return /[\\~^]/.test(text) ? `$${latexUpright(text)}$` : latexEscaped(text);
}
