import { describe, expect, test } from "vitest";
import { couplingTable } from "../../src/completion/tabulate-couplings.js";
import { parseRoot } from "../../src/exact/signed-root.js";
import { couplet } from "../../src/gen/couplet.js";
import { couplingsMessage } from "../../src/tables/encode-couplings.js";
import { rootOfExact } from "../../src/tables/exact-message.js";
import { exportCouplingsLatex } from "../../src/tables/export-couplings-latex.js";
import { latexHadron } from "../../src/tables/export-latex-names.js";
import { roundedValue, significant } from "../../src/tables/rounding.js";
import { DECUPLET, fitOf, MIXED_OCTET, TWENTY_SEVEN, VECTORS } from "../completion/coupling-studies.js";

import v1 = couplet.v1;

const tablesOf = (study: string) =>
  v1.CouplingTables.create(couplingsMessage(couplingTable(fitOf(study), 0)));

interface Tabular {
  readonly title: string;
  readonly columns: number;
  readonly head: readonly string[];
  /** Cells by name, in a list because several waves may share a name. */
  readonly rows: readonly { readonly id: string; readonly cells: readonly string[] }[];
}

/** Every tabular of a text, from the words of LaTeX alone. */
function readTabulars(text: string): Tabular[] {
  const bodies = [...text.matchAll(/\\begin\{tabular\}\{(l+)\}\n([\s\S]*?)\\end\{tabular\}/g)];
  return bodies.map(([, columns, body]) => {
    const [, title, head, rows] = body!.split(/\\(?:toprule|midrule|bottomrule)\n/);
    const cells = (line: string) => line.replace(/ \\\\.*$/, "").split(" & ");
    return {
      title: title!.trim(),
      columns: columns!.length,
      head: cells(head!.trim()),
      rows: rows!
        .trim()
        .split("\n")
        .map((line) => ({ id: line.split(" \\\\ % ")[1]!, cells: cells(line) })),
    };
  });
}

/** `-\sqrt{9/20}\,x + \frac{1}{2}\,y` as exact coefficients by name, e.g. `-sqrt(9/20)`. */
function readSum(math: string): Map<string, string> {
  if (math === "$0$") return new Map();
  const terms = math.replace(/^\$|\$$/g, "").split(/ (?=[+-] )/);
  return new Map(
    terms.map((term) => {
      const [, sign, factor, name] = /^(?:([+-]) ?)?(?:(\\sqrt\{\S+?\}|\\frac\S+?|\d+)\\,)?(.+)$/.exec(term)!;
      const size = (factor ?? "1")
        .replace(/\\sqrt\{(.*)\}/, "sqrt($1)")
        .replace(/\\frac\{(\d+)\}\{(\d+)\}/, "$1/$2");
      return [name!, `${sign === "-" ? "-" : ""}${size}`];
    }),
  );
}

/** Names of couplings in math mode, as this test expects them. */
const SYMBOLS: Readonly<Record<string, string>> = {
  "octet.g(8_1)": "\\mathrm{octet}.g(8_{1})",
  "octet.g(8_2)": "\\mathrm{octet}.g(8_{2})",
  "singlet.g(8)": "\\mathrm{singlet}.g(8)",
  "g(8_2)": "g(8_{2})",
};

/** The text of a value by the rounding rule, written out by itself. */
function expectedValue({ value, plus, minus }: v1.Estimate.$Properties): string {
  const rounded = roundedValue(value!, plus!, minus!);
  if (rounded.plus === "") return `$${rounded.value}$`;
  expect(rounded.minus).toBe(rounded.plus);
  return `$${rounded.value} \\pm ${rounded.plus}$`;
}

/** Compares the cell of a pure vertex with its exact coefficients, one by one. */
function expectSum(cell: string, coefficients: readonly (readonly [string, v1.Exact.$Properties])[]): void {
  const read = readSum(cell);
  const expected = coefficients.filter(([, exact]) => exact.sign !== 0);
  expect([...read.keys()]).toEqual(expected.map(([name]) => SYMBOLS[name] ?? name));
  for (const [k, text] of [...read.values()].entries())
    expect(parseRoot(text)).toEqual(rootOfExact(expected[k]![1]));
}

const STUDIES = { MIXED_OCTET, VECTORS, TWENTY_SEVEN, DECUPLET };

describe.each(Object.entries(STUDIES))("coupling tables as LaTeX, %s", (_, study) => {
  const tables = tablesOf(study);
  const text = exportCouplingsLatex(tables);
  const tabulars = readTabulars(text);

  test("environments and braces balance, dollars pair, and no cell holds a bare special character", () => {
    expect(tabulars.length).toBe(text.split("\\begin{").length - 1);
    expect(tabulars.length).toBe(text.split("\\end{").length - 1);
    for (const line of text.split("\n").filter((each) => !each.startsWith("%"))) {
      const code = line.replace(/ % .*$/, "");
      expect(code.split("{").length, line).toBe(code.split("}").length);
      expect((code.split("$").length - 1) % 2, line).toBe(0);
      const outsideMath = code.replace(/\$[^$]*\$/g, "").replaceAll(" & ", " ");
      expect(outsideMath, line).not.toMatch(/(^|[^\\])[_^#&%~]/);
    }
  });

  test("every line has as many cells as its tabular has columns", () => {
    for (const { title, columns, head, rows } of tabulars) {
      expect(title).toMatch(new RegExp(`^\\\\multicolumn\\{${columns}\\}\\{l\\}\\{.*\\} \\\\\\\\$`));
      for (const cells of [head, ...rows.map((row) => row.cells)]) expect(cells.length).toBe(columns);
    }
  });

  test("every vertex is there once, with its exact coefficients and its rounded values", () => {
    for (const [by, couplings, form, title] of [
      ["by isospin", tables.isospin, "coefficient", "Coupling"],
      ["by charge state", tables.charged, "coefficient", "Phases of states"],
    ] as const) {
      const own = tabulars.filter((each) => each.title.includes(by));
      const rows = own.flatMap(({ head, rows: lines }) => lines.map((line) => ({ head, ...line })));
      expect(rows.map(({ id }) => id).sort()).toEqual(couplings.map(({ id }) => id!).sort());
      for (const coupling of couplings) {
        const { head, cells } = rows.find(({ id }) => id === coupling.id)!;
        const cell = (name: string) => cells[head.indexOf(name)] ?? "";
        const daughters = coupling.daughters!.map(({ name }) => latexHadron(name!)).join("\\,");
        expect(cell("Channel")).toBe(`$${latexHadron(coupling.parent!.name!)} \\to ${daughters}$`);
        expect(cell("Value")).toBe(expectedValue(coupling.value!));
        const { breaking } = coupling.value!;
        expect(cell("Breaking")).toBe(breaking ? `$${significant(breaking, 2)}$` : "");
        const [component, ...others] = coupling.components!;
        if (others.length > 0 || component!.weight !== 1) continue;
        expectSum(
          cell(title),
          component!.terms!.map((term) => [term.reduced!, term[form]!]),
        );
        const dAndF = by === "by isospin" ? component!.dAndF : component!.matrixDAndF;
        const inDAndF = by === "by isospin" ? cell("In $D$ and $F$") : cell("Phases of matrices");
        if (dAndF != null)
          expectSum(inDAndF, [
            ["D", dAndF.d!],
            ["F", dAndF.f!],
          ]);
        else if (by === "by charge state" && coupling.matrixValue != null)
          expectSum(
            inDAndF,
            component!.terms!.map((term) => [term.reduced!, term.matrixCoefficient!]),
          );
      }
    }
  });

  test("the matrix values, the reduced couplings and the constants of the Lagrangian are there", () => {
    const charged = tabulars.filter(({ title }) => title.includes("by charge state"));
    for (const { id, matrixValue } of tables.charged) {
      const { head, cells } = charged
        .flatMap(({ head: titles, rows }) => rows.map((row) => ({ head: titles, ...row })))
        .find((row) => row.id === id)!;
      const cell = cells[head.lastIndexOf("Value")];
      if (matrixValue != null) expect(cell).toBe(expectedValue(matrixValue));
      else expect(cell).toBe("not defined");
    }
    const reduced = tabulars[0]!.rows.map(({ id, cells }) => [id, cells[3]]);
    expect(reduced).toEqual(tables.reduced.map(({ name, value }) => [name, expectedValue(value!)]));
    const constants = tables.isospinLagrangians.flatMap((lagrangian) => lagrangian.constants!);
    const lagrangians = tabulars.filter(({ title }) => title.includes("Isospin Lagrangian"));
    expect(lagrangians.length).toBe(tables.isospinLagrangians.length);
    const lines = lagrangians.flatMap(({ rows }) => rows);
    expect(lines.map(({ id, cells }) => [id, cells[2]])).toEqual(
      constants.map(({ name, value }) => [`g(${name})`, expectedValue(value!)]),
    );
    for (const [k, { cells }] of lines.entries())
      expectSum(cells[1]!, [
        ["D", constants[k]!.dAndF!.d!],
        ["F", constants[k]!.dAndF!.f!],
      ]);
  });
});

describe("what the studies above differ in", () => {
  test("mixed hadrons show the weight of each part, and their families stand in one tabular", () => {
    const tabulars = readTabulars(exportCouplingsLatex(tablesOf(MIXED_OCTET)));
    const charged = tabulars.filter(({ title }) => title.includes("by charge state"));
    expect(charged).toHaveLength(1);
    expect(charged[0]!.title).toContain(
      "{r $\\to$ baryon-octet pseudoscalar-octet; r $\\to$ baryon-octet pseudoscalar-singlet, $L=2$, $S=1/2$, by charge state, model a}",
    );
    const { cells } = charged[0]!.rows.find(({ id }) => id === "N(1577)+ -> p eta")!;
    expect(cells[1]).toBe(
      "$0.9664\\,(-\\sqrt{1/20}\\,\\mathrm{octet}.g(8_{1}) + \\frac{1}{2}\\,\\mathrm{octet}.g(8_{2})) + 0.2571\\,(\\mathrm{singlet}.g(8))$",
    );
  });

  test("names of a study are escaped", () => {
    const text = exportCouplingsLatex(
      tablesOf(TWENTY_SEVEN.replace("  r:", "  my_27:").replace("from: r,", "from: my_27,")),
    );
    expect(text).toContain("{my\\_27 $\\to$ baryon-octet pseudoscalar-octet, ");
    expect(text).not.toMatch(/[^\\]_27/);
  });
});
