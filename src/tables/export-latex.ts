import { couplet } from "../gen/couplet.js";
import { latexHadron } from "./export-latex-names.js";
import { latexComment, latexNumber, latexWithErrors } from "./export-latex-numbers.js";
import { significant } from "./rounding.js";

import v1 = couplet.v1;

const ORIGINS = ["", "measured", "predicted", "remainder"];

/**
 * Decay tables as LaTeX, a `tabular` with the rules of the package booktabs for each parent.
 *
 * Values are rounded with their errors by the rule of the Particle Data Group; errors from breaking of the symmetry have
 * a column of their own, with two digits. Each line ends in a comment with the row's id.
 */
export function exportDecaysLatex({ header, parents }: v1.DecayTables): string {
  const head = [
    `% ${latexComment(header?.title ?? "")} (${latexComment(header?.producer ?? "")})`,
    "% Needs \\usepackage{booktabs}. Errors are those of the data; the column `breaking' is the error from breaking of SU(3).",
    ...(header?.cautions ?? []).map((caution) => `% Caution: ${latexComment(caution)}`),
  ];
  return `${[...head, ...parents.map(parentTabular)].join("\n")}\n`;
}

function parentTabular(parent: v1.Parent.$Properties): string {
  const { hadron, totalWidth, totalWidthError, totalOrigin, rows } = parent;
  const total = `$${latexWithErrors(totalWidth, totalWidthError, totalWidthError)}$~MeV`;
  const origin = totalOrigin === v1.TotalOrigin.TOTAL_ORIGIN_SUM ? "sum of rows" : "measured";
  const mass = `$${latexWithErrors(hadron?.mass, hadron?.massError, hadron?.massError)}$~MeV`;
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
    closed || !fraction?.breaking ? "" : `$${latexNumber(significant(100 * fraction.breaking, 2))}$`;
  const cells = [
    channel,
    closed ? "closed" : `$${estimateText(fraction, 100)}$`,
    breaking,
    closed ? "" : `$${estimateText(width, 1)}$`,
    ORIGINS[origin ?? 0]!,
  ];
  return `${cells.join(" & ")} \\\\ % ${latexComment(id ?? "")}`;
}

function estimateText(estimate: v1.Estimate.$Properties | null | undefined, factor: number): string {
  const { value, plus, minus } = estimate ?? {};
  return latexWithErrors((value ?? 0) * factor, (plus ?? 0) * factor, (minus ?? 0) * factor);
}
