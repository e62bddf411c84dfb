import { couplet } from "../gen/couplet.js";
import { latexHadron } from "./export-latex-names.js";
import { latexComment, latexNumber, latexWithErrors } from "./export-latex-numbers.js";
import { significant } from "./rounding.js";

import v1 = couplet.v1;

const ORIGINS = ["", "measured", "predicted", "remainder"];

/**
 * Decay tables as LaTeX, a `tabular` with the rules of the package booktabs for each parent.
 *
 * Values are rounded with their errors by the rule of the Particle Data Group; errors from breaking of the symmetry and,
 * where any row of the tables has them, from branch and width model have columns of their own, with two digits. Each line ends in a comment with the row's id.
 */
export function exportDecaysLatex({ header, parents }: v1.DecayTables): string {
  const parts = partsOf(parents);
  const head = [
    `% ${latexComment(header?.title ?? "")} (${latexComment(header?.producer ?? "")})`,
    "% Needs \\usepackage{booktabs}. Errors are those of the data; the column `breaking' is the error from breaking of SU(3).",
    ...parts.slice(1).map(({ words }) => `% ${words}`),
    ...(header?.cautions ?? []).map((caution) => `% Caution: ${latexComment(caution)}`),
  ];
  return `${[...head, ...parents.map((parent) => parentTabular(parent, parts))].join("\n")}\n`;
}

/** A part of a fraction's error with a column of its own. */
interface ErrorPart {
  readonly name: "breaking" | "branch" | "model";
  readonly title: string;
  readonly words: string;
}

const ERROR_PARTS: readonly ErrorPart[] = [
  { name: "breaking", title: "Breaking [\\%]", words: "" },
  {
    name: "branch",
    title: "Branch [\\%]",
    words: "The column `branch' is the largest difference to another minimum of the fit.",
  },
  {
    name: "model",
    title: "Model [\\%]",
    words: "The column `model' is half the range over the width models.",
  },
];

/** The parts that have a column: breaking, and those that any row has. */
function partsOf(parents: readonly v1.Parent.$Properties[]): ErrorPart[] {
  const rows = parents.flatMap((parent) => parent.rows ?? []);
  return ERROR_PARTS.filter(
    ({ name }) => name === "breaking" || rows.some(({ fraction }) => (fraction?.[name] ?? 0) > 0),
  );
}

function parentTabular(parent: v1.Parent.$Properties, parts: readonly ErrorPart[]): string {
  const { hadron, totalWidth, totalWidthError, totalWidthPlus, totalWidthMinus, totalOrigin, rows } = parent;
  const total = `$${latexWithErrors(totalWidth, totalWidthPlus ?? totalWidthError, totalWidthMinus ?? totalWidthError)}$~MeV`;
  const origin = totalOrigin === v1.TotalOrigin.TOTAL_ORIGIN_SUM ? "sum of rows" : "measured";
  const { mass: value, massError, massPlus, massMinus } = hadron ?? {};
  const mass = `$${latexWithErrors(value, massPlus ?? massError, massMinus ?? massError)}$~MeV`;
  const columns = 4 + parts.length;
  return [
    "",
    `\\begin{tabular}{l${"r".repeat(columns - 2)}l}`,
    "\\toprule",
    `\\multicolumn{${columns}}{l}{$${latexHadron(hadron?.name ?? "")}$, mass ${mass}, width ${total} (${origin})} \\\\`,
    "\\midrule",
    `Channel & Fraction [\\%] & ${parts.map(({ title }) => title).join(" & ")} & Partial width [MeV] & Origin \\\\`,
    "\\midrule",
    ...(rows ?? []).map((row) => rowLine(row, parts)),
    "\\bottomrule",
    "\\end{tabular}",
  ].join("\n");
}

function rowLine(row: v1.Row.$Properties, parts: readonly ErrorPart[]): string {
  const { id, daughters, fraction, width, kinematics, origin } = row;
  const closed = kinematics === v1.Kinematics.KINEMATICS_CLOSED;
  const channel =
    (daughters ?? []).length === 0
      ? "remainder"
      : `$${daughters!.map(({ name }) => latexHadron(name ?? "")).join("\\,")}$`;
  const partText = ({ name }: ErrorPart) => {
    const error = fraction?.[name];
    return closed || !error ? "" : `$${latexNumber(significant(100 * error, 2))}$`;
  };
  const cells = [
    channel,
    closed ? "closed" : `$${estimateText(fraction, 100)}$`,
    ...parts.map(partText),
    closed ? "" : `$${estimateText(width, 1)}$`,
    ORIGINS[origin ?? 0]!,
  ];
  return `${cells.join(" & ")} \\\\ % ${latexComment(id ?? "")}`;
}

function estimateText(estimate: v1.Estimate.$Properties | null | undefined, factor: number): string {
  const { value, plus, minus } = estimate ?? {};
  return latexWithErrors((value ?? 0) * factor, (plus ?? 0) * factor, (minus ?? 0) * factor);
}
