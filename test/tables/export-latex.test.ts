import { describe, expect, test } from "vitest";
import { DEMO_STUDY } from "../../src/cli/demo-study.js";
import { couplet } from "../../src/gen/couplet.js";
import { decaysMessage } from "../../src/tables/encode-decays.js";
import { exportDecaysLatex } from "../../src/tables/export-latex.js";
import { studyText, tablesOf } from "../chain/run.js";
import { HALF, madeDecays } from "./made-decays.js";

import v1 = couplet.v1;

/** Lines of a tabular as read: cells by row id. */
function readRows(text: string): Map<string, string[]> {
  const rows = [...text.matchAll(/^(.*) \\\\ % (.*)$/gm)];
  return new Map(rows.map(([, cells, id]) => [id!, cells!.split(" & ")]));
}

/** `$12.6 \pm 3.0$` or `$2.0^{+0.7}_{-0.5}$` as value, upper and lower error. */
function readValue(cell: string): number[] {
  const math = cell.replace(/^\$|\$$/g, "").replace(/ \\times 10\^\{(-?\d+)\}/, "e$1");
  const symmetric = /^(\S+) \\pm (\S+)$/.exec(math);
  if (symmetric !== null) return [symmetric[1], symmetric[2], symmetric[2]].map(Number);
  const sides = /^([^^]+)\^\{\+([^}]+)\}_\{-([^}]+)\}$/.exec(math);
  return sides === null ? [Number(math), 0, 0] : [sides[1], sides[2], sides[3]].map(Number);
}

describe("decay tables as LaTeX", () => {
  const tables = v1.DecayTables.create(decaysMessage(tablesOf(studyText("octet-5-2"))));
  const text = exportDecaysLatex(tables);

  test("every row is read back, value and errors within half of the error's last digit", () => {
    const read = readRows(text);
    const rows = tables.parents.flatMap((parent) => parent.rows!);
    expect(read.size).toBe(rows.length);
    for (const row of rows) {
      const [, fraction, breaking, width] = read.get(row.id!)!;
      if (row.kinematics === v1.Kinematics.KINEMATICS_CLOSED) {
        expect([fraction, breaking, width]).toEqual(["closed", "", ""]);
        continue;
      }
      for (const [cell, estimate, factor] of [
        [fraction, row.fraction, 100],
        [width, row.width, 1],
      ] as const) {
        const [value, plus, minus] = readValue(cell!) as [number, number, number];
        const error = factor * Math.min(estimate!.plus!, estimate!.minus!);
        // The rule keeps at least one digit of the error: half a unit of it is below a seventh of 3.55 units.
        expect(Math.abs(value - factor * estimate!.value!)).toBeLessThanOrEqual(error / 7);
        expect(Math.abs(plus / (factor * estimate!.plus!) - 1)).toBeLessThan(1 / 7);
        expect(Math.abs(minus / (factor * estimate!.minus!) - 1)).toBeLessThan(1 / 7);
      }
    }
  });

  test("each parent is one tabular with the rules of booktabs", () => {
    const count = (part: string) => text.split(part).length - 1;
    for (const part of ["\\begin{tabular}", "\\toprule", "\\bottomrule", "\\end{tabular}"])
      expect(count(part)).toBe(tables.parents.length);
    expect(text).toContain(
      "\\multicolumn{5}{l}{$\\Sigma(1775)^{0}$, mass $1775$~MeV, width $120.0$~MeV (measured)} \\\\",
    );
    expect(text).toContain("\n$n\\,\\overline{K^{0}}$ & ");
  });

  test("branch and model errors have columns where a row has them, with two digits", () => {
    expect(text).toContain("\\begin{tabular}{lrrrl}");
    const compared = v1.DecayTables.create(
      decaysMessage(tablesOf(DEMO_STUDY.replace("daughters: decayed", "widthModels: compared"))),
    );
    const typeset = exportDecaysLatex(compared);
    expect(typeset).toContain("\\begin{tabular}{lrrrrrl}");
    expect(typeset).toContain(
      "Channel & Fraction [\\%] & Breaking [\\%] & Branch [\\%] & Model [\\%] & Partial",
    );
    const read = readRows(typeset);
    let seen = 0;
    for (const { id, fraction, kinematics } of compared.parents.flatMap(({ rows }) => rows!)) {
      const [, , ...errors] = read.get(id!)!;
      for (const [k, part] of [fraction!.breaking!, fraction!.branch!, fraction!.model!].entries()) {
        if (kinematics === v1.Kinematics.KINEMATICS_CLOSED || part === 0) expect(errors[k]).toBe("");
        else {
          // Two digits: half a unit of the second is at most 5 % of the number.
          expect(Math.abs(readValue(errors[k]!)[0]! / (100 * part) - 1)).toBeLessThan(0.051);
          seen++;
        }
      }
    }
    expect(seen).toBeGreaterThan(30);
  });

  test("masses and total widths have two sides where they differ", () => {
    const sided = exportDecaysLatex(
      v1.DecayTables.create(
        decaysMessage(
          tablesOf(
            studyText("octet-5-2").replace(
              /mass: 1775 MeV, width: 120[^,}]*/,
              "mass: 1775 +6 -4 MeV, width: 120 +20 -12 MeV",
            ),
          ),
        ),
      ),
    );
    expect(sided).toContain("mass $1775^{+6}_{-4}$~MeV, width $120^{+20}_{-12}$~MeV (measured)");
  });

  test("a title of two lines stays a comment, and a remainder has its name", () => {
    const made = exportDecaysLatex(madeDecays([HALF]));
    expect(made.split("\n")[0]).toBe("% made up (couplet 9.9.9)");
    expect(made).toContain("\nremainder & ");
  });
});
