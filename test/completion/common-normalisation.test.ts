import { describe, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { octetStudy, rowOf, tablesOf } from "./whole-study.js";

/** Two measured rows of one parent with a normalisation of 20 % in common, or with one each. */
const study = (second: string, more = "", use = "both") =>
  octetStudy(`normalisations: { one: 20 %, other: 20 % }\n${more}`)
    .replace(
      "width: Sigma(1775) -> N Kbar, value: 48 +- 4 MeV",
      `fraction: Sigma(1775) -> N Kbar, value: 0.40 +- 0.03, normalisation: one, use: ${use}`,
    )
    .replace(
      "width: Sigma(1775) -> Lambda pi, value: 20 +- 4 MeV",
      `fraction: Sigma(1775) -> Lambda pi, value: 0.15 +- 0.02, normalisation: ${second}`,
    );

const spread = (values: readonly number[]) =>
  Math.sqrt(values.reduce((sum, value) => sum + (value - 1) ** 2, 0) / values.length);

describe("a normalisation that measurements share", () => {
  const shared = tablesOf(study("one", "tables: { replicas: 2000, seed: 4 }\n"));
  const separate = tablesOf(study("other"));
  const row = (id: string, tables = shared) => rowOf(tables, `Sigma(1775)+ -> ${id}`);

  test("is in the error of every row with it: sqrt(0.02^2 + (0.2 0.15)^2)", () => {
    const { fraction, measurement } = row("Lambda pi+");
    expect(fraction.plus).toBeCloseTo(Math.hypot(0.02, 0.03), 12);
    expect(fraction.minus).toBeCloseTo(Math.hypot(0.02, 0.03), 12);
    expect([measurement!.plus, measurement!.minus]).toEqual([0.02, 0.02]);
    const kaons = row("p K0bar").fraction;
    expect(kaons.value).toBeCloseTo(0.4, 12);
    expect(kaons.plus).toBeCloseTo(Math.hypot(0.03, 0.08), 12);
  });

  test("is in the table of a value that is not fitted", () => {
    const tables = tablesOf(study("one", "", "table"));
    expect(row("p K0bar", tables).fraction.plus).toBeCloseTo(Math.hypot(0.03, 0.08), 12);
    const unknown = study("one", "", "table").replace("normalisation: one, use", "normalisation: onne, use");
    expect(() => tablesOf(unknown)).toThrow(InputError);
    expect(() => tablesOf(unknown)).toThrow(
      'fraction Sigma(1775) -> N Kbar: expected a name among `normalisations` (one, other), got "onne".',
    );
  });

  test("moves its rows together, and what is left by the sum of both", () => {
    const left = (tables: typeof shared) => row("(remainder)", tables).fraction.plus;
    const rest = (both: number) => left(shared) ** 2 - both ** 2;
    // Apart from the normalisations all is the same.
    expect(left(separate) ** 2 - (0.08 ** 2 + 0.03 ** 2)).toBeCloseTo(rest(0.08 + 0.03), 4);
    expect(left(shared)).toBeGreaterThan(left(separate));
  });

  test("moves them together in replicas, by 20 % beside their own errors", () => {
    const data = shared.replicas.flatMap(({ part }, k) => (part === "data" ? [k] : []));
    const ratios = (id: string) => data.map((k) => row(id).replicaRatios![k]!);
    const [a, b] = [ratios("p K0bar"), ratios("Lambda pi+")];
    const TOLERANCE = 4.5 / Math.sqrt(2 * data.length);
    expect(Math.abs(spread(a) / Math.hypot(0.03 / 0.4, 0.2) - 1)).toBeLessThan(TOLERANCE + 0.01);
    expect(Math.abs(spread(b) / Math.hypot(0.02 / 0.15, 0.2) - 1)).toBeLessThan(TOLERANCE + 0.02);
    const correlation =
      a.reduce((sum, x, k) => sum + (x - 1) * (b[k]! - 1), 0) / data.length / spread(a) / spread(b);
    const expected = 0.2 ** 2 / Math.hypot(0.03 / 0.4, 0.2) / Math.hypot(0.02 / 0.15, 0.2);
    expect(Math.abs(correlation - expected)).toBeLessThan(4.5 / Math.sqrt(data.length));
  });
});
