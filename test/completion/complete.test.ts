import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { complete } from "../../src/completion/complete.js";
import type { ParentTable, Row, Tables } from "../../src/completion/tables.js";
import { InputError } from "../../src/errors.js";
import { fitOf } from "../chain/run.js";

const SEED = 20261203;

/** An invented decuplet with one coupling; its masses open all of its pion channels. */
interface Invented {
  readonly masses: readonly [delta: number, sigma: number, xi: number];
  /** Total widths in MeV, or undefined for the sum of rows. */
  readonly totals: readonly [number | undefined, number | undefined, number | undefined];
  readonly deltaWidth: number;
  readonly deltaError: number;
  /** Fraction of Sigma -> Lambda pi, and width of Xi -> Xi pi in MeV, that stand in the table; or none. */
  readonly lambdaPi?: number;
  readonly xiPi?: number;
}

function studyOf({ masses, totals, deltaWidth, deltaError, lambdaPi, xiPi }: Invented): string {
  const member = (name: string, place: string, k: 0 | 1 | 2) =>
    `      - { name: ${name}, place: ${place}, mass: ${masses[k]} MeV, width: ${totals[k] === undefined ? "sum" : `${totals[k]} +- ${totals[k] / 10} MeV`} }`;
  return `couplet: 1
title: an invented decuplet
multiplets:
  m:
    irrep: 10
    spinParity: 3/2+
    members:
${member("D(1)", "Delta", 0)}
${member("S(1)", "Sigma", 1)}
${member("X(1)", "Xi", 2)}
decays:
  - { from: m, to: [baryon-octet, pseudoscalar-octet], L: 1, model: a }
fit: { masses: fixed }
measurements:
  - { width: D(1) -> N pi, value: ${deltaWidth} +- ${deltaError} MeV, source: invented, use: fit }
${lambdaPi === undefined ? "" : `  - { fraction: S(1) -> Lambda pi, value: ${lambdaPi}, source: invented, use: table }\n`}${
  xiPi === undefined
    ? ""
    : `  - { width: X(1) -> Xi pi, value: ${xiPi} +- ${xiPi / 8} MeV, source: invented, use: table }\n`
}`;
}

/** Totals are wide enough for the predicted and measured rows to fit in. */
const invented: fc.Arbitrary<Invented> = fc
  .record({
    masses: fc.tuple(
      fc.integer({ min: 1250, max: 1450 }),
      fc.integer({ min: 1400, max: 1600 }),
      fc.integer({ min: 1520, max: 1750 }),
    ),
    summed: fc.tuple(fc.boolean(), fc.boolean(), fc.boolean()),
    deltaWidth: fc.integer({ min: 5, max: 150 }),
    relativeError: fc.integer({ min: 1, max: 30 }),
    lambdaPi: fc.option(fc.integer({ min: 0, max: 400 }), { nil: undefined }),
    xiPi: fc.option(fc.integer({ min: 1, max: 100 }), { nil: undefined }),
  })
  .map(({ summed, relativeError, lambdaPi, xiPi, ...rest }) => ({
    ...rest,
    totals: summed.map((sum) => (sum ? undefined : 1200)) as unknown as Invented["totals"],
    deltaError: (rest.deltaWidth * relativeError) / 100,
    ...(lambdaPi === undefined ? {} : { lambdaPi: lambdaPi / 1000 }),
    ...(xiPi === undefined ? {} : { xiPi }),
  }));

const tablesOf = (study: Invented): Tables => complete(fitOf(studyOf(study)), 0);

const cases = fc.sample(invented, { seed: SEED, numRuns: 15 }).map((study) => {
  const { lambdaPi: _, xiPi: __, ...unmeasured } = study;
  return { study, tables: tablesOf(study), predicted: tablesOf(unmeasured) };
});

/** Checks every invented case; a failure shows the study. */
function forAll(check: (study: Invented, tables: Tables, predicted: Tables) => void): void {
  for (const [k, { study, tables, predicted }] of cases.entries()) {
    try {
      check(study, tables, predicted);
    } catch (cause) {
      throw new Error(`seed ${SEED}, case ${k}: ${JSON.stringify(study)}: ${(cause as Error).message}`, {
        cause,
      });
    }
  }
}

const sum = (values: readonly number[]) => values.reduce((total, value) => total + value, 0);
const near = (value: number, wanted: number, relative = 1e-9) =>
  expect(Math.abs(value - wanted), `${value} against ${wanted}`).toBeLessThanOrEqual(
    relative * Math.max(Math.abs(wanted), 1e-12),
  );
const channelRows = ({ parent, rows }: ParentTable, ...daughters: string[]): Row[] =>
  rows.filter(({ id }) => daughters.some((pair) => id === `${parent.hadron.name} -> ${pair}`));

const LAMBDA_PI = ["Lambda pi+", "Lambda pi0", "Lambda pi-"];
const XI_PI = ["Xi0 pi0", "Xi- pi+", "Xi0 pi-", "Xi- pi0"];

describe("completed tables", () => {
  test("have a table for every charge state, whose parts add up to 10^9 and fractions to 1", () => {
    forAll((_, { parents }) => {
      expect(parents.map(({ parent }) => parent.hadron.name)).toEqual([
        "D(1)++",
        "D(1)+",
        "D(1)0",
        "D(1)-",
        "S(1)+",
        "S(1)0",
        "S(1)-",
        "X(1)0",
        "X(1)-",
      ]);
      for (const { rows, totalWidthMeV } of parents) {
        expect(sum(rows.map(({ partsPerBillion }) => partsPerBillion))).toBe(1_000_000_000);
        near(sum(rows.map(({ fraction }) => fraction.value)), 1);
        for (const { fraction, widthMeV, partsPerBillion } of rows) {
          expect(fraction.value).toBeGreaterThanOrEqual(0);
          near(widthMeV.value, fraction.value * totalWidthMeV);
          expect(Math.abs(partsPerBillion - fraction.value * 1e9)).toBeLessThanOrEqual(rows.length);
        }
      }
    });
  });

  test("take the sum of the rows for the total where the study says so, and leave a remainder else", () => {
    forAll(({ totals }, { parents }) => {
      for (const { parent, rows, totalWidthMeV } of parents) {
        const total = totals[["D", "S", "X"].indexOf(parent.hadron.name[0]!)];
        const remainder = rows.filter(({ origin }) => origin === "remainder");
        near(totalWidthMeV, total ?? sum(rows.map(({ widthMeV }) => widthMeV.value)));
        expect(remainder.length).toBe(total === undefined ? 0 : 1);
        for (const { daughters, flags } of remainder) {
          expect([daughters, flags]).toEqual([[], ["undecayable"]]);
        }
      }
    });
  });

  test("keep what is measured, split among charge states as isospin and phase space split the prediction", () => {
    forAll((study, { parents }, predicted) => {
      for (const [k, table] of parents.entries()) {
        const lambda = channelRows(table, ...LAMBDA_PI);
        if (study.lambdaPi !== undefined && lambda.length > 0) {
          near(sum(lambda.map(({ fraction }) => fraction.value)), study.lambdaPi);
          for (const { origin, flags, sources } of lambda) {
            expect([origin, flags.includes("isospin-split"), sources]).toEqual([
              "measured",
              false,
              ["invented"],
            ]);
          }
        }
        const xi = channelRows(table, ...XI_PI);
        if (study.xiPi !== undefined && xi.length > 0) {
          near(sum(xi.map(({ widthMeV }) => widthMeV.value)), study.xiPi);
          const free = channelRows(predicted.parents[k]!, ...XI_PI);
          near(
            xi[0]!.widthMeV.value / xi[1]!.widthMeV.value,
            free[0]!.widthMeV.value / free[1]!.widthMeV.value,
          );
          for (const { origin, flags } of xi) {
            expect([origin, flags.includes("isospin-split")]).toEqual(["measured", true]);
          }
        }
      }
    });
  });

  test("have linear errors: of the coupling in a width, of coupling and total in a fraction", () => {
    forAll(({ totals, deltaWidth, deltaError }, { parents }) => {
      // A width goes with the square of the one coupling, as the fitted width does.
      const relative = deltaError / deltaWidth;
      for (const { parent, rows } of parents) {
        const total = totals[["D", "S", "X"].indexOf(parent.hadron.name[0]!)];
        if (total === undefined || rows.some(({ origin }) => origin === "measured")) continue;
        for (const { origin, widthMeV, fraction } of rows) {
          if (origin !== "predicted" || widthMeV.value === 0) continue;
          near(widthMeV.plus / widthMeV.value, relative, 1e-6);
          near(fraction.plus / fraction.value, Math.hypot(relative, 0.1), 1e-6);
        }
      }
    });
  });

  test("have no error from the coupling in the fractions of a total that is the sum of predicted rows", () => {
    forAll(({ totals }, { parents }) => {
      for (const { parent, rows } of parents) {
        if (totals[["D", "S", "X"].indexOf(parent.hadron.name[0]!)] !== undefined) continue;
        if (rows.some(({ origin }) => origin !== "predicted")) continue;
        for (const { fraction } of rows) expect(fraction.plus).toBeLessThan(1e-9);
      }
    });
  });
});

describe("a conflict is refused and names the entries with their lines", () => {
  const study = (total: string, fraction: string) => `couplet: 1
title: conflict
multiplets:
  m:
    irrep: 10
    spinParity: 3/2+
    members: [{ name: X(1), place: Xi, mass: 1650 MeV, width: ${total} }]
decays:
  - { from: m, to: [baryon-octet, pseudoscalar-octet], L: 1, model: a }
measurements:
  - { width: X(1) -> Xi pi, value: 9 +- 1 MeV, source: invented }
  - { fraction: X(1) -> Lambda Kbar, value: ${fraction}, source: invented }
`;

  test("where measured and predicted fractions pass 1", () => {
    const message = (() => {
      try {
        complete(fitOf(study("10 +- 1 MeV", "0.2 +- 0.1")), 0);
      } catch (error) {
        if (error instanceof InputError) return error.message.split("\n");
      }
      return [];
    })();
    expect(message[0]).toBe(
      "study.yaml: X(1)0: expected fractions that add up to at most 1, got 1.1000 of the total width 10 MeV:",
    );
    expect(message).toContain("  0.2000  X(1)0 -> Lambda K0bar  (fraction X(1) -> Lambda Kbar, line 12)");
    expect(message.filter((line) => line.includes("(width X(1) -> Xi pi, line 11)")).length).toBe(4);
  });

  test("not where they just fit", () => {
    const { parents } = complete(fitOf(study("10 +- 1 MeV", "0.1 +- 0.05")), 0);
    for (const { rows } of parents) expect(rows.some(({ origin }) => origin === "remainder")).toBe(false);
  });

  test("where two measurements settle the same channel", () => {
    const text = study("100 MeV", "0.1 +- 0.05").replace(
      "  - { fraction",
      "  - { width: X(1)0 -> Xi0 pi0, value: 3 +- 1 MeV, source: invented }\n  - { fraction",
    );
    expect(() => complete(fitOf(text), 0)).toThrow(
      new InputError(
        'study.yaml:12:5: width X(1)0 -> Xi0 pi0: X(1)0 -> Xi0 pi0 is settled already by "width X(1) -> Xi pi" (line 11). Give one of the two `use: fit`, so that one stands in the table.',
      ),
    );
  });
});
