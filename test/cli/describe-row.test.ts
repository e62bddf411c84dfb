import { describe, expect, test } from "vitest";
import { DEMO_STUDY } from "../../src/cli/demo-study.js";
import { describeRow, rowNamed } from "../../src/cli/describe-row.js";
import { WHOLE } from "../../src/completion/parts-per-billion.js";
import { InputError } from "../../src/errors.js";
import { couplet } from "../../src/gen/couplet.js";
import { decaysMessage } from "../../src/tables/encode-decays.js";
import { studyText, tablesOf } from "../chain/run.js";

import v1 = couplet.v1;

const tablesOfStudy = (study: string) =>
  v1.DecayTables.decode(v1.DecayTables.encode(decaysMessage(tablesOf(study))).finish());
const tables = tablesOfStudy(DEMO_STUDY);
const ledger = (id: string) => describeRow(rowNamed(tables, id, "a.pb"));
/** Line of the study, from 1, that holds a text. */
const lineOf = (part: string) => DEMO_STUDY.split("\n").findIndex((line) => line.includes(part)) + 1;
const rows = tables.parents.flatMap((parent) => parent.rows.map((row) => ({ parent, row })));

describe("what a ledger needs is in the file, and adds up", () => {
  test("the width of a predicted row is s A^2 K over its waves", () => {
    const predicted = rows.filter(({ row }) => row.origin === v1.Origin.ORIGIN_PREDICTED);
    expect(predicted.length).toBeGreaterThan(10);
    for (const { row } of predicted) {
      const width = row.waves!.reduce(
        (sum, { flavourAmplitude, kinematicFactor }) =>
          sum + row.identicalFactor! * flavourAmplitude! ** 2 * kinematicFactor!,
        0,
      );
      expect(Math.abs(width - row.width!.value!)).toBeLessThanOrEqual(1e-12 * row.width!.value!);
    }
  });

  test("the number of a measured row is its share of the measured value", () => {
    const measured = rows.filter(({ row }) => row.measurement !== null && row.measurement !== undefined);
    expect(measured.length).toBeGreaterThan(10);
    for (const { row } of measured) {
      const { share, value, unit } = row.measurement!;
      const own = unit === "1" ? row.fraction!.value! : row.width!.value!;
      expect(share! * value!).toBeCloseTo(own, 12);
    }
  });

  test("the shares of one measurement add up to 1 for each parent, and split as isospin times K", () => {
    // Where the fit moves masses, K moves with them and the split does not.
    const fixed = tablesOfStudy(`${DEMO_STUDY}fit: { masses: fixed }\n`);
    for (const parent of fixed.parents) {
      // A row outside the symmetry has no waves, and here no charge states beside it.
      const measured = parent.rows.filter((row) => row.measurement?.share != null && row.isospinChannel);
      for (const quantity of new Set(measured.map((row) => row.measurement!.quantity))) {
        const group = measured.filter((row) => row.measurement!.quantity === quantity);
        expect(group.reduce((sum, row) => sum + row.measurement!.share!, 0)).toBeCloseTo(1, 12);
        const weight = (row: v1.Row.$Properties) =>
          row.identicalFactor! * row.isospinCoefficient! ** 2 * row.waves![0]!.kinematicFactor!;
        const all = group.reduce((sum, row) => sum + weight(row), 0);
        for (const row of group) expect(weight(row) / all).toBeCloseTo(row.measurement!.share!, 9);
      }
    }
  });

  test("the rows of one isospin channel have SU(2) coefficients whose squares add up to 1", () => {
    for (const parent of tables.parents) {
      for (const channel of new Set(parent.rows.map((row) => row.isospinChannel).filter((name) => name))) {
        const squares = parent.rows
          .filter((row) => row.isospinChannel === channel)
          .map((row) => row.isospinCoefficient! ** 2);
        expect(squares.reduce((sum, x) => sum + x, 0)).toBeCloseTo(1, 12);
      }
    }
  });
});

describe("a ledger in words", () => {
  test("a measured row: the measurement with its line, the fit's value, the share, the model, the flags", () => {
    const text = ledger("Sigma(1731)0 -> p K-");
    const { row } = rowNamed(tables, "Sigma(1731)0 -> p K-", "a.pb");
    const line =
      DEMO_STUDY.split("\n").findIndex((each) => each.includes("width: Sigma(1731) -> N Kbar")) + 1;
    expect(text).toContain("Sigma(1731)0 -> p K-: measured, open at the nominal mass\n");
    expect(text).toContain("\n  width Sigma(1731) -> N Kbar = 2 +0.7 -0.5 MeV\n");
    expect(text).toContain("\n  source: invented: Larkfield, formation\n");
    expect(text).toContain(
      `\n  line ${line} of the study: - { width: Sigma(1731) -> N Kbar, value: 2.0 +0.7 -0.5 MeV, source: "invented: Larkfield, formation" }\n`,
    );
    expect(text).toContain(
      `a pull of ${row.measurement!.pull!.toFixed(2)}; the row keeps the measured value\n`,
    );
    expect(text).toContain(
      `\n  this row's share of it: ${row.measurement!.share!.toPrecision(6)}, which is `,
    );
    expect(text).toContain("\n  isospin channel Sigma(1731) -> N Kbar, SU(2) coefficient 0.70711\n");
    expect(text).toContain(
      "\n    with n = 2, referenceMomentumMeV = 1000 MeV, referenceMassMeV = 1000 MeV\n",
    );
    expect(text).toContain(
      "\n  datum on this channel: ratio Sigma(1731) -> N Kbar / Sigma(1731) -> Lambda pi = 0.3",
    );
    expect(text).toContain("\n  isospin split: the measurement is of several charge states together");
  });

  test("the total width stands with its line, or as the sum of rows", () => {
    expect(ledger("Sigma(1731)0 -> p K-")).toContain(
      `\nTotal width\n  34 +- 5 MeV, given in the study, line ${lineOf("name: Sigma(1731)")}:\n    - { name: Sigma(1731), place: Sigma, mass: 1731 +- 5 MeV, width: 34 +- 5 MeV }\n`,
    );
    expect(ledger("Xi(1874)0 -> Xi0 pi0")).toMatch(
      /\nTotal width\n {2}\S+ \+- \S+ MeV, the sum of the rows of Xi\(1874\)0\n/,
    );
  });

  test("the residue of rounding is told where it was put, and nowhere else", () => {
    const put = rows.filter(({ row }) => row.partsPerBillion !== Math.round(row.fraction!.value! * WHOLE));
    expect(put.length).toBeGreaterThan(0);
    for (const { row } of put) {
      const residue = row.partsPerBillion! - Math.round(row.fraction!.value! * WHOLE);
      const sign = residue < 0 ? "-" : "+";
      expect(ledger(row.id!)).toContain(
        `(the fraction rounded) ${sign} ${Math.abs(residue)} (what rounding left over in all rows, put here)\n`,
      );
    }
    expect(ledger("Sigma(1731)0 -> p K-")).not.toContain("left over");
  });

  test("a remainder has no model, no measurement and no fit", () => {
    const text = ledger("Sigma(1731)0 -> (remainder)");
    for (const title of ["Measurement", "Width model", "Fit", "Split"])
      expect(text).not.toContain(`\n${title}`);
    expect(text).toContain("from all other rows and the total width\n");
    expect(text).toContain("\n  undecayable: no daughters are named, a generator cannot decay this row\n");
  });

  test("a study this version cannot read costs the lines only", () => {
    const { parent, row } = rowNamed(tables, "Sigma(1731)0 -> p K-", "a.pb");
    const header = { ...tables.header, studyText: "{" };
    const text = describeRow({ tables: v1.DecayTables.create({ ...tables, header }), parent, row });
    expect(text).toContain("\n  width Sigma(1731) -> N Kbar = 2 +0.7 -0.5 MeV\n");
    expect(text).not.toContain("of the study:");
  });

  test("a sign alone is told as a sign, and a number of size 1 as a number", () => {
    const whole = tablesOfStudy(studyText("octet-5-2-whole"));
    const text = (id: string) => describeRow(rowNamed(whole, id, "a.pb"));
    const quantity = (exit: string) => `amplitude Sigma(1775) -> N Kbar, Sigma(1775) -> ${exit}`;
    expect(text("Sigma(1775)0 -> Lambda pi0")).toContain(
      `\n  datum on this channel: ${quantity("Lambda pi")} = -, fitted -0.`,
    );
    expect(text("Sigma(1775)+ -> Sigma0 pi+")).toContain(
      `\n  datum on this channel: ${quantity("Sigma pi")} = +, fitted 0.`,
    );
    expect(text("Sigma(1775)0 -> Lambda pi0")).toMatch(
      /datum on this channel: fraction Sigma\(1775\) -> Lambda pi = 0\.17 \+- 0\.03, /,
    );
  });

  test("an unknown row is refused with the nearest", () => {
    expect(() => ledger("Sigma(1731)0 -> p K")).toThrow(
      new InputError(
        'a.pb: expected the id of a row, got "Sigma(1731)0 -> p K". Nearest: Sigma(1731)0 -> p K-, Sigma(1731)- -> n K-, Sigma(1731)0 -> Xi0 K0. `couplet show a.pb` lists them.',
      ),
    );
  });
});
