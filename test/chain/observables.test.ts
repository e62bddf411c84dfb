import { describe, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import type { StudyMinimum } from "../../src/model/fit-model.js";
import { decodeDecays } from "../../src/tables/decode-decays.js";
import { encodeDecays } from "../../src/tables/encode-decays.js";
import { BASE, openMeV, PLANTED, plantedStudy, rootWidth, totalMeV, widthMeV } from "./planted-octet.js";
import { fitOf, parameterValue, studyText, tablesOf, withMeasurements } from "./run.js";

const line = (what: string, value: string, more = "") =>
  `  - { ${what}, value: ${value}, source: invented${more} }`;
const fitted = ({ pulls }: StudyMinimum) => pulls.at(-1)!;

const S = (channel: string) => widthMeV("Sigma", channel);
const T = totalMeV("Sigma");
const amplitude = (rootWidth("Sigma", "N Kbar") * rootWidth("Sigma", "Lambda pi")) / T;

/** Kind in words, the line's key, the value worked out apart from the program, its unit, more keys of the line. */
const KINDS: readonly [string, string, number, string, string][] = [
  ["a partial width", "width: Sigma(1800) -> N Kbar", S("N Kbar"), "MeV", ""],
  ["one charge state's width", "width: Sigma(1800)0 -> p K-", S("N Kbar") / 2, "MeV", ""],
  ["a fraction", "fraction: Sigma(1800) -> N Kbar", S("N Kbar") / T, "", ""],
  ["a fraction of one wave", "fraction: Sigma(1800) -> N Kbar L=2", S("N Kbar") / T, "", ""],
  [
    "a ratio",
    "ratio: [Sigma(1800) -> Lambda pi, Sigma(1800) -> N Kbar]",
    S("Lambda pi") / S("N Kbar"),
    "",
    "",
  ],
  [
    "a product of fractions",
    "product: [Sigma(1800) -> N Kbar, Sigma(1800) -> Lambda pi]",
    (S("N Kbar") * S("Lambda pi")) / T ** 2,
    "",
    "",
  ],
  [
    "a signed amplitude",
    "amplitude: [Sigma(1800) -> N Kbar, Sigma(1800) -> Lambda pi]",
    amplitude,
    "",
    ', sign: "+"',
  ],
  [
    "a signed amplitude whose reaction has the other sign",
    "amplitude: [Sigma(1800) -> N Kbar, Sigma(1800) -> Lambda pi]",
    -amplitude,
    "",
    ', sign: "-"',
  ],
  [
    "an elastic amplitude",
    "amplitude: [Sigma(1800) -> N Kbar, Sigma(1800) -> N Kbar]",
    S("N Kbar") / T,
    "",
    "",
  ],
  [
    "a residue's modulus",
    "residue: [Sigma(1800) -> N Kbar, Sigma(1800) -> Lambda pi]",
    Math.abs(amplitude * T) / 2,
    "MeV",
    "",
  ],
  [
    "an elastic residue",
    "residue: [Sigma(1800) -> N Kbar, Sigma(1800) -> N Kbar]",
    S("N Kbar") / 2,
    "MeV",
    "",
  ],
  ["a total width", "total: Sigma(1800)", openMeV("Sigma"), "MeV", ""],
];

describe("every kind of measurement, in a study, is what it says", () => {
  test.each(KINDS)("%s", (_, key, value, unit, more) => {
    const at = (x: number) => {
      const text = line(key, `${x} +- ${Math.abs(value) / 50} ${unit}`, more);
      return fitOf(plantedStudy([...BASE, text])).minima[0]!;
    };
    const minimum = at(value);
    expect(minimum.chi2).toBeLessThan(1e-12);
    expect(parameterValue(minimum, "alpha_F")).toBeCloseTo(PLANTED.alpha, 8);
    expect(fitted(minimum).fitted / value).toBeCloseTo(1, 9);
    // Half as much again is 25 errors away.
    expect(at(1.5 * value).chi2).toBeGreaterThan(1);
  });

  test("a fraction of a total that is the sum of the rows", () => {
    const share = S("Lambda pi") / openMeV("Sigma");
    const text = line("fraction: Sigma(1800) -> Lambda pi", `${share} +- 0.01`);
    const [minimum] = fitOf(plantedStudy([...BASE, text], "", "sum")).minima;
    expect(minimum!.chi2).toBeLessThan(1e-12);
    expect(parameterValue(minimum!, "alpha_F")).toBeCloseTo(PLANTED.alpha, 8);
  });

  test("an upper limit is a half-Gaussian at 0 whose sigma is U/1.644854 at 90 %", () => {
    const limit = 2 * S("Sigma pi");
    const text = line("width: Sigma(1800) -> Sigma pi", `< ${limit} MeV at 90 %`);
    const [minimum] = fitOf(plantedStudy([...BASE, text])).minima;
    const { fitted: value, pull } = fitted(minimum!);
    expect(pull).toBeCloseTo((1.644854 * value) / limit, 5);
    expect(value).toBeLessThan(S("Sigma pi"));
    const rows = tablesOf(plantedStudy([...BASE, text], "fit: { mirrors: best }\n")).parents.flatMap(
      (parent) => parent.rows,
    );
    expect(rows.find(({ id }) => id === "Sigma(1800)+ -> Sigma+ pi0")!.origin).toBe("predicted");
  });

  test("a range is its centre with half its width", () => {
    const [low, high] = [0.8 * S("N Kbar"), 1.3 * S("N Kbar")];
    const text = line("width: Sigma(1800) -> N Kbar", `${low} to ${high} MeV`);
    const { observable } = fitted(fitOf(plantedStudy([...BASE, text])).minima[0]!);
    expect(observable.measured.value).toBeCloseTo((low + high) / 2, 10);
    expect(observable.measured.plus).toBeCloseTo((high - low) / 2, 10);
    expect(observable.measured.soft).toBe(true);
  });
});

describe("signs", () => {
  const key = "amplitude: [Sigma(1800) -> N Kbar, Sigma(1800) -> Lambda pi]";
  // Negative at alpha_F = 0.3: an octet's product is -(1 - 2a)(1 - a) times a positive number.
  const written = `${-amplitude} +- ${Math.abs(amplitude) / 10}`;

  test("the sign of a reaction is fitted where it is not given, and named by channels, waves and isospin", () => {
    expect(amplitude).toBeLessThan(0);
    const [minimum] = fitOf(plantedStudy([...BASE, line(key, written)])).minima;
    expect(minimum!.chi2).toBeLessThan(1e-12);
    expect(minimum!.reactionSigns).toEqual({ "N Kbar L=2 S=1/2 -> Lambda pi L=2 S=1/2, I=1": -1 });
  });

  test("two resonances of one reaction share its sign", () => {
    const second = (text: string) =>
      text.replaceAll("(1705)", "(1706)").replaceAll("(1800)", "(1801)").replaceAll("(1850)", "(1851)");
    const lines = [
      ...BASE,
      line("width: Sigma(1800) -> N Kbar", `${S("N Kbar")} +- 0.5 MeV`),
      line("width: Sigma(1800) -> Sigma pi", `${S("Sigma pi")} +- 0.5 MeV`),
    ];
    const study = (one: number, other: number) => {
      const amplitudes = [one, other].map((sign) =>
        line(key, `${sign * amplitude} +- ${Math.abs(amplitude) / 10}`),
      );
      const text = plantedStudy([...lines, amplitudes[0]!, ...lines.map(second), second(amplitudes[1]!)]);
      const [head, members] = text.split("multiplets:\n") as [string, string];
      const octet = members.slice(0, members.indexOf("decays:"));
      const decay = /- \{ from: octet.*\n/.exec(members)![0];
      const named = decay.replace("from: octet", "name: one, from: octet");
      const other2 = second(octet).replace("  octet:", "  other:");
      const rest = members
        .replace(octet, octet + other2)
        .replace(decay, `${named}  ${decay.replace("from: octet", "name: two, from: other")}`);
      return fitOf(`${head}multiplets:\n${rest}`).minima[0]!.chi2;
    };
    expect(study(1, 1)).toBeLessThan(1e-3);
    expect(study(-1, -1)).toBeLessThan(1e-3);
    expect(study(1, -1)).toBeGreaterThan(20);
  });

  test("a sign alone tells two solutions apart", () => {
    // Widths of N pi and Sigma -> N Kbar leave |1 - 2a| = 0.4: a = 0.3 or 0.7, and -(1 - 2a)(1 - a) changes its sign.
    const both = [BASE[0]!, line("width: Sigma(1800) -> N Kbar", `${S("N Kbar")} +- 0.5 MeV`)];
    for (const [sign, alpha] of [
      ['"-"', 0.3],
      ['"+"', 0.7],
    ] as const) {
      const [best, second] = fitOf(plantedStudy([...both, line(key, sign, ', sign: "+"')])).minima;
      expect(parameterValue(best!, "alpha_F")).toBeCloseTo(alpha, 8);
      expect(best!.chi2).toBeLessThan(1e-12);
      expect(second?.chi2 ?? Number.POSITIVE_INFINITY).toBeGreaterThan(4);
    }
  });

  test.each([
    [0, 1],
    [-40, 1],
    [140, -1],
    [-175, -1],
  ])("a residue of phase %i deg has the sign %i, and its modulus", (degrees, sign) => {
    const modulus = Math.abs(amplitude * T) / 2;
    const text = (reaction: string) =>
      line(
        "residue: [Sigma(1800) -> N Kbar, Sigma(1800) -> Lambda pi]",
        `${modulus} +- 0.3 MeV`,
        `, phase: ${degrees} deg, sign: "${reaction}"`,
      );
    const [right, wrong] = (sign === -1 ? ["+", "-"] : ["-", "+"]).map(
      (reaction) => fitOf(plantedStudy([...BASE, text(reaction)])).minima[0]!,
    );
    expect(right!.chi2).toBeLessThan(1e-12);
    expect(fitted(right!).fitted).toBeCloseTo(sign * modulus, 8);
    expect(wrong!.chi2).toBeGreaterThan(4);
  });

  test.each([0, -85, -120, 180])("an elastic residue of phase %i deg counts by its modulus", (degrees) => {
    const text = line(
      "residue: [Sigma(1800) -> N Kbar, Sigma(1800) -> N Kbar]",
      `${S("N Kbar") / 2} +- 0.3 MeV`,
      `, phase: ${degrees} +- 20 deg`,
    );
    expect(fitOf(plantedStudy([...BASE, text])).minima[0]!.chi2).toBeLessThan(1e-12);
  });

  test("a phase that does not tell the sign is refused", () => {
    const text = line(
      "residue: [Sigma(1800) -> N Kbar, Sigma(1800) -> Lambda pi]",
      "5 +- 1 MeV",
      ", phase: -85 +- 10 deg",
    );
    expect(() => fitOf(plantedStudy([text]))).toThrow(
      new InputError(
        "study.yaml:14:111: measurements/0/phase: expected a phase farther from 90 and -90 deg than its error, since it gives the residue's sign, got -85.0 deg. Leave the phase out: then the modulus alone counts.",
      ),
    );
  });
});

describe("errors", () => {
  const decuplet = withMeasurements(studyText("decuplet"), []);
  const delta = (value: string, more = ", use: fit") => line("width: Delta(1232) -> N pi", value, more);
  const widthOf = (lines: readonly string[], rest = "") => {
    const [minimum] = fitOf(`${decuplet.trimEnd()}\n${lines.join("\n")}\n${rest}`).minima;
    return { minimum: minimum!, width: minimum!.pulls[0]!.fitted };
  };

  test("asymmetric ones slide between their sides; 100 +20 -5 and 115 +- 10 meet at the least chi2", () => {
    const sigma = (x: number) => (x <= 95 ? 5 : x >= 120 ? 20 : 5 + (15 * (x - 95)) / 25);
    const chi2 = (x: number) => ((x - 100) / sigma(x)) ** 2 + ((x - 115) / 10) ** 2;
    const grid = Array.from({ length: 300_001 }, (_, k) => 90 + k * 1e-4);
    const least = grid.reduce((best, x) => (chi2(x) < chi2(best) ? x : best));
    const { minimum, width } = widthOf([delta("100 +20 -5 MeV"), delta("115 +- 10 MeV")]);
    expect(Math.abs(width - least)).toBeLessThan(2e-4);
    expect(minimum.chi2).toBeCloseTo(chi2(least), 8);
  });

  // G. D'Agostini, Nucl. Instrum. Meth. A 346 (1994) 306: 8.0 and 8.5, 2 % each, with a common 10 %; a covariance from the
  // measured values gives 7.87 +- 0.81, below both. Provenance: memory; the number follows from the formula.
  test("a common normalisation scales the prediction, so that the average lies between the measurements", () => {
    const common = (value: number) =>
      delta(`${value} +- ${0.02 * value} MeV`, ", use: fit, normalisation: beam");
    const { minimum, width } = widthOf([common(8), common(8.5)], "normalisations: { beam: 10 % }\n");
    const weights = [1 / 0.16 ** 2, 1 / 0.17 ** 2] as const;
    const mean = (8 * weights[0] + 8.5 * weights[1]) / (weights[0] + weights[1]);
    expect(width).toBeCloseTo(mean, 6);
    expect(parameterValue(minimum, "normalisation beam")).toBeCloseTo(0, 6);
    const g = minimum.parameters[0]!;
    // The width goes with the square of the coupling: 10 % of it, and the statistical error, in quadrature.
    const relative = Math.hypot(0.1, 1 / Math.sqrt(weights[0] + weights[1]) / mean);
    expect(g.error / g.value).toBeCloseTo(relative / 2, 4);
  });

  test("a prior fixes what the data leave open, with its own error", () => {
    const rest = "priors:\n  - { parameter: alpha_F, value: 0.3 +- 0.05, source: invented }\n";
    const [minimum] = fitOf(plantedStudy([BASE[0]!], rest)).minima;
    const alpha = minimum!.parameters.find(({ name }) => name === "alpha_F")!;
    expect(alpha.value).toBeCloseTo(0.3, 8);
    expect(alpha.error).toBeCloseTo(0.05, 6);
  });

  test("breaking in the fit adds 0.2 |g| z to an isospin amplitude, one z a channel, and is off unless asked for", () => {
    const wide = withMeasurements(studyText("decuplet"), ["Delta(1232)", "Xi(1530)"]);
    const off = fitOf(wide).minima[0]!;
    const on = fitOf(`${wide}fit: { theoryError: 0.2 }\n`).minima[0]!;
    const named = ({ parameters }: StudyMinimum) =>
      parameters.filter(({ kind }) => kind === "breaking").map(({ name }) => name);
    expect(named(off)).toEqual([]);
    expect(named(on)).toEqual(["breaking Delta(1232) -> N pi", "breaking Xi(1530) -> Xi pi"]);
    // Widths of the ladder of model a for g fixed by the Delta: 117 and 11.566 MeV (independent program; see decuplet.test.ts).
    const unit = parameterValue(fitOf(withMeasurements(wide, ["Delta(1232)"])).minima[0]!, "g(10)");
    const z = (name: string) => parameterValue(on, `breaking ${name}`);
    const scale = parameterValue(on, "g(10)") / unit;
    // |c| of Delta -> N pi is sqrt(1/2), of Xi* -> Xi pi 1/2 (J.J. de Swart, Rev. Mod. Phys. 35 (1963) 916): A = g (c + 0.2 z);
    // both are negative and positive in its phases: c = -sqrt(1/2) and 1/2.
    const broken = [
      117 * (scale * (1 - (0.2 * z("Delta(1232) -> N pi")) / Math.SQRT1_2)) ** 2,
      11.566 * (scale * (1 + (0.2 * z("Xi(1530) -> Xi pi")) / 0.5)) ** 2,
    ];
    for (const [k, width] of broken.entries()) expect(on.pulls[k]!.fitted / width).toBeCloseTo(1, 4);
    expect(on.chi2).toBeLessThan(off.chi2 / 4);
  });

  test("breaking is reported with every prediction, whether it enters the fit or not", () => {
    const text = withMeasurements(studyText("decuplet"), ["Delta(1232)"]);
    for (const study of [text, `${text}fit: { theoryError: 0.2 }\n`]) {
      const message = decodeDecays(encodeDecays(tablesOf(study)), "made.pb");
      expect(message.header.breaking).toBe(0.2);
      const predicted = message.parents.flatMap(({ rows }) => rows).filter(({ origin }) => origin === 2);
      expect(predicted.length).toBeGreaterThan(5);
      const open = predicted.filter(({ width }) => width!.value! > 0);
      expect(open.filter(({ width }) => !(width!.breaking! > 0))).toEqual([]);
    }
  });

  test("breaking is additive: where the amplitude vanishes, its error does not", () => {
    // Sigma -> Sigma pi is proportional to alpha_F: at 0 its amplitude vanishes, its error from breaking does not.
    const text = plantedStudy(
      [BASE[0]!],
      "priors:\n  - { parameter: alpha_F, value: 0 +- 0.001, source: invented }\n",
    );
    const row = tablesOf(text)
      .parents.flatMap(({ rows }) => rows)
      .find(({ id }) => id === "Sigma(1800)+ -> Sigma+ pi0")!;
    expect(row.widthMeV.value).toBeLessThan(1e-6);
    expect(row.widthMeV.breaking).toBeGreaterThan(0.5);
  });
});
