import { expect, test } from "vitest";
import { fitOf, parameterValue, rowWidthMeV, studyText, tablesOf, withMeasurements } from "./run.js";

// Model outputs for one coupling fixed by Delta -> N pi = 117 MeV, computed by an independent program from masses of the
// Particle Data Group quoted from memory; g^2 refers to widths in MeV and momenta in GeV.
const LADDERS = [
  { model: "a", lambdaPi: 35.508, sigmaPi: 4.928, xiPi: 11.566, g2: 30234.056 },
  { model: "{ id: a, n: 1 }", lambdaPi: 39.906, sigmaPi: 5.538, xiPi: 14.395, g2: 24540.63 },
  { model: "{ id: b, rangeMeV: 350 }", lambdaPi: 41.925, sigmaPi: 7.005, xiPi: 17.176, g2: 4552.473 },
];

test.each(LADDERS)(
  "one coupling from Delta -> N pi predicts the decuplet in model $model",
  ({ model, lambdaPi, sigmaPi, xiPi, g2 }) => {
    const text = withMeasurements(studyText("decuplet"), ["Delta(1232)"]).replace(
      "model: a",
      `model: ${model}`,
    );
    const [minimum, ...others] = fitOf(text).minima;
    const tables = tablesOf(text);
    const relative = (value: number, wanted: number) => Math.abs(value / wanted - 1);
    expect(others).toEqual([]);
    expect(relative(1000 * parameterValue(minimum!, "g(10)") ** 2, g2)).toBeLessThan(1e-3);
    expect(relative(rowWidthMeV(tables, "Sigma(1385)+", ["Lambda pi+"]), lambdaPi)).toBeLessThan(1e-3);
    expect(relative(rowWidthMeV(tables, "Sigma(1385)+", ["Sigma+ pi0", "Sigma0 pi+"]), sigmaPi)).toBeLessThan(
      1e-3,
    );
    expect(relative(rowWidthMeV(tables, "Xi(1530)0", ["Xi0 pi0", "Xi- pi+"]), xiPi)).toBeLessThan(1e-3);
  },
);

test("four widths and one coupling: chi2 is that of scaling the ladder of model a by hand", () => {
  const rows = [
    { ladder: 117, measured: 117, error: 3 },
    { ladder: 35.508, measured: 32.4, error: 1.2 },
    { ladder: 4.928, measured: 4.35, error: 0.6 },
    { ladder: 11.566, measured: 9.5, error: 0.6 },
  ];
  const sum = (of: (row: (typeof rows)[number]) => number) => rows.reduce((total, row) => total + of(row), 0);
  const scale = sum((r) => (r.ladder * r.measured) / r.error ** 2) / sum((r) => (r.ladder / r.error) ** 2);
  const chi2 = sum((r) => ((scale * r.ladder - r.measured) / r.error) ** 2);
  const [minimum] = fitOf(studyText("decuplet")).minima;
  expect(minimum!.ndf).toBe(3);
  expect(Math.abs(minimum!.chi2 - chi2)).toBeLessThan(0.02);
  // Breaking of the symmetry is far larger than the errors of the data: the chance of such a chi2 is 1 in 100.
  expect(minimum!.probability).toBeLessThan(0.011);
});

test("every charge state of the decuplet has rows that add up to 10^9 parts and keep what is measured", () => {
  const tables = tablesOf(studyText("decuplet"));
  expect(tables.parents.map(({ parent }) => parent.hadron.name)).toEqual([
    "Delta(1232)++",
    "Delta(1232)+",
    "Delta(1232)0",
    "Delta(1232)-",
    "Sigma(1385)+",
    "Sigma(1385)0",
    "Sigma(1385)-",
    "Xi(1530)0",
    "Xi(1530)-",
  ]);
  for (const { rows } of tables.parents) {
    expect(rows.reduce((sum, { partsPerBillion }) => sum + partsPerBillion, 0)).toBe(1_000_000_000);
  }
  expect(rowWidthMeV(tables, "Sigma(1385)-", ["Lambda pi-"])).toBeCloseTo(32.4, 10);
  expect(rowWidthMeV(tables, "Delta(1232)+", ["p pi0", "n pi+"])).toBeCloseTo(117, 10);
});

// C. Becchi, E. Eberle and G. Morpurgo, Phys. Rev. 136 (1964) B808: to first order in the breaking by the strange quark's
// mass, 2 (r_Delta + r_Xi) = 3 r_Lambda + r_Sigma, r an amplitude in units of its symmetric value. Widths of the Particle Data
// Group, from memory: 117; 87.0 and 11.7 % of 37.2; 9.5 MeV. Model a, n = 2. Numbers from an independent program.
test("the sum rule of the open decuplet decays holds for the measured widths: 0.009 +- 0.1 of 4", () => {
  const text = withMeasurements(studyText("decuplet"), []);
  const coupling = (channel: string, widthMeV: number, errorMeV: number) => {
    const line = `  - { width: ${channel}, value: ${widthMeV} +- ${errorMeV} MeV, source: "PDG, from memory" }\n`;
    const [g] = fitOf(`${text.trimEnd()}\n${line}`).minima[0]!.parameters;
    return [g!.value, g!.error] as const;
  };
  const couplings = [
    coupling("Delta(1232) -> N pi", 117, 3),
    coupling("Sigma(1385) -> Lambda pi", 0.87 * 37.2, 1.2),
    coupling("Sigma(1385) -> Sigma pi", 0.117 * 37.2, 0.6),
    coupling("Xi(1530) -> Xi pi", 9.5, 0.6),
  ];
  const r = couplings.map(([g]) => g / couplings[0]![0]);
  for (const [k, expected] of [1, 0.9547, 0.9398, 0.9063].entries())
    expect(Math.abs(r[k]! - expected)).toBeLessThan(5e-4);
  const weights = [2, -3, -1, 2];
  const difference = weights.reduce((sum, weight, k) => sum + weight * r[k]!, 0);
  expect(Math.abs(difference - 0.0087)).toBeLessThan(2e-3);
  // Of the data alone: r_Delta is 1, and its error is in all others.
  const error = Math.hypot(...weights.map((weight, k) => (weight * couplings[k]![1]) / couplings[0]![0]));
  expect(error).toBeGreaterThan(0.08);
  expect(Math.abs(difference)).toBeLessThan(error);
});
