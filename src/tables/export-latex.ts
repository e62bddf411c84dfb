import { couplet } from "../gen/couplet.js";
import { latexHadron } from "./export-latex-names.js";
import { roundedValue, significant } from "./rounding.js";

import v1 = couplet.v1;

const ORIGINS = ["", "measured", "predicted", "remainder"];

/**
 * Decay tables as LaTeX, a `tabular` with the rules of the package booktabs for each parent.
 *
 * Values are rounded with their errors by the rule of the Particle Data Group; errors from breaking of the symmetry have
 * a column of their own, with two digits. Each line ends in a comment with the row's id.
 */
export function exportLatex({ header, parents }: v1.DecayTables): string {
  const head = [
    `% ${commentText(header?.title ?? "")} (${commentText(header?.producer ?? "")})`,
    "% Needs \\usepackage{booktabs}. Errors are those of the data; the column `breaking' is the error from breaking of SU(3).",
    ...(header?.cautions ?? []).map((caution) => `% Caution: ${commentText(caution)}`),
  ];
  return `${[...head, ...parents.map(parentTabular)].join("\n")}\n`;
}

function parentTabular(parent: v1.Parent.$Properties): string {
  const { hadron, totalWidth, totalWidthError, totalOrigin, rows } = parent;
  const total = `$${errorText(totalWidth, totalWidthError, totalWidthError)}$~MeV`;
  const origin = totalOrigin === v1.TotalOrigin.TOTAL_ORIGIN_SUM ? "sum of rows" : "measured";
  const mass = `$${errorText(hadron?.mass, hadron?.massError, hadron?.massError)}$~MeV`;
  return [
    "",
    "\\begin{tabular}{lrrrl}",
    "\\toprule",
    `\\multicolumn{5}{l}{$${latexHadron(hadron?.name ?? "")}$, mass ${mass}, width ${total} (${origin})} \\\\`,
    "\\midrule",
    "Channel & Fraction [\\%] & Breaking [\\%] & Partial width [MeV] & Origin \\\\",
    "\\midrule",
    ...(rows ?? []).map(rowLine),
    "\\bottomrule",
    "\\end{tabular}",
  ].join("\n");
}

function rowLine({ id, daughters, fraction, width, kinematics, origin }: v1.Row.$Properties): string {
  const closed = kinematics === v1.Kinematics.KINEMATICS_CLOSED;
  const channel =
    (daughters ?? []).length === 0
      ? "remainder"
      : `$${daughters!.map(({ name }) => latexHadron(name ?? "")).join("\\,")}$`;
  const breaking =
    closed || !fraction?.breaking ? "" : `$${texNumber(significant(100 * fraction.breaking, 2))}$`;
  const cells = [
    channel,
    closed ? "closed" : `$${estimateText(fraction, 100)}$`,
    breaking,
    closed ? "" : `$${estimateText(width, 1)}$`,
    ORIGINS[origin ?? 0]!,
  ];
  return `${cells.join(" & ")} \\\\ % ${commentText(id ?? "")}`;
}

function estimateText(estimate: v1.Estimate.$Properties | null | undefined, factor: number): string {
  const { value, plus, minus } = estimate ?? {};
  return errorText((value ?? 0) * factor, (plus ?? 0) * factor, (minus ?? 0) * factor);
}

/** `12.6 \pm 3.0`, or `2.0^{+0.7}_{-0.5}`, in math mode. */
function errorText(
  value: number | null | undefined,
  plus: number | null | undefined,
  minus: number | null | undefined,
): string {
  const rounded = roundedValue(value ?? 0, plus ?? 0, minus ?? 0);
  const text = texNumber(rounded.value);
  if (rounded.plus === "") return text;
  return rounded.plus === rounded.minus
    ? `${text} \\pm ${rounded.plus}`
    : `${text}^{+${rounded.plus}}_{-${rounded.minus}}`;
}

/** `1.4e-29` as `1.4 \times 10^{-29}`. */
function texNumber(text: string): string {
  const [mantissa, exponent] = text.split("e");
  return exponent === undefined ? text : `${mantissa} \\times 10^{${Number(exponent)}}`;
}

/** Text for a comment: all on one line. */
function commentText(text: string): string {
  return text.replace(/\s+/g, " ");
}
