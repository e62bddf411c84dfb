import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { parseQuantity } from "../../src/study/quantity.js";

const SEED = 20261201;

/** Value, upper and lower error of a text in MeV, or the problem. */
function inMeV(text: string): unknown {
  const read = parseQuantity(text, "MeV");
  return "problem" in read ? read.problem : [read.value, read.plus, read.minus];
}

function pure(text: string): unknown {
  const read = parseQuantity(text, "1");
  return "problem" in read ? read.problem : [read.value, read.plus, read.minus];
}

describe("a quantity with a unit", () => {
  test.each([
    ["58 MeV", [58, 0, 0]],
    ["58 +- 3 MeV", [58, 3, 3]],
    ["58+-3MeV", [58, 3, 3]],
    ["58 +/- 3 MeV", [58, 3, 3]],
    ["58 ± 3 MeV", [58, 3, 3]],
    ["58 +4 -3 MeV", [58, 4, 3]],
    ["58 + 4 - 3 MeV", [58, 4, 3]],
    ["-58 +4 -3 MeV", [-58, 4, 3]],
    ["5.8e1 +- .3e1 MeV", [58, 3, 3]],
    ["58. +- 3. MeV", [58, 3, 3]],
    ["  58 +- 3 MeV ", [58, 3, 3]],
  ])("reads %s", (text, expected) => {
    expect(inMeV(text)).toEqual(expected);
  });

  test.each([
    ["0.12 GeV", [120, 0, 0]],
    ["1.672 +- 0.001 GeV", [1672, 1, 1]],
    ["8.02e-3 +0.1e-3 -0.2e-3 eV", [8.02e-9, 1e-10, 2e-10]],
    ["1.31 keV", [0.00131, 0, 0]],
    ["0.001 TeV", [1000, 0, 0]],
  ])("converts %s to MeV without the noise of a binary product", (text, expected) => {
    expect(inMeV(text)).toEqual(expected);
  });

  test.each([
    ["58 +- 3", 'expected a unit such as MeV or GeV, got none in "58 +- 3"'],
    ["58", 'expected a unit such as MeV or GeV, got none in "58"'],
    ["58 +- 3 parsec", 'expected an energy unit such as MeV or GeV, got "parsec" in "58 +- 3 parsec"'],
    ["58 %", 'expected an energy unit such as MeV or GeV, got "%" in "58 %"'],
    ["58 MEV", 'expected an energy unit such as MeV or GeV, got "MEV" in "58 MEV"'],
    ["58 MeV +- 3 MeV", 'expected a number with its unit such as `58 +- 3 MeV`, got "58 MeV +- 3 MeV"'],
    ["58 +- -3 MeV", 'expected a number with its unit such as `58 +- 3 MeV`, got "58 +- -3 MeV"'],
    ["58 -3 +4 MeV", 'expected a number with its unit such as `58 +- 3 MeV`, got "58 -3 +4 MeV"'],
    ["58 +4 MeV", 'expected a number with its unit such as `58 +- 3 MeV`, got "58 +4 MeV"'],
    ["58,5 MeV", 'expected a number with its unit such as `58 +- 3 MeV`, got "58,5 MeV"'],
    ["about 58 MeV", 'expected a number with its unit such as `58 +- 3 MeV`, got "about 58 MeV"'],
    ["", 'expected a number with its unit such as `58 +- 3 MeV`, got ""'],
    ["58 +- 0 MeV", 'expected errors > 0, got "58 +- 0 MeV"; leave the error out if there is none'],
    ["58 +3 -0 MeV", 'expected errors > 0, got "58 +3 -0 MeV"; leave the error out if there is none'],
    ["1e999 MeV", 'expected a number that fits a double, got "1e999 MeV"'],
    ["1e999", 'expected a number that fits a double, got "1e999"'],
    ["1e308 GeV", 'expected a number that fits a double, got "1e308 GeV"'],
    ["58 +- 1e999 MeV", 'expected a number that fits a double, got "58 +- 1e999 MeV"'],
    [
      "70 to 60 MeV",
      'expected a range with the smaller value first, got "70 to 60 MeV". Write `60 to 70 MeV`',
    ],
    ["60 to 60 MeV", 'expected errors > 0, got "60 to 60 MeV"; leave the error out if there is none'],
    [
      "< 5 MeV",
      'expected an upper limit with its confidence, got "< 5 MeV". Write `< 5 MeV at 90 %` if that is its confidence',
    ],
    ["< 5 parsec", 'expected an energy unit such as MeV or GeV, got "parsec" in "< 5 parsec"'],
    ["Infinity MeV", 'expected a number with its unit such as `58 +- 3 MeV`, got "Infinity MeV"'],
    ["NaN MeV", 'expected a number with its unit such as `58 +- 3 MeV`, got "NaN MeV"'],
  ])("refuses %s", (text, problem) => {
    expect(inMeV(text)).toBe(problem);
  });
});

describe("a pure number", () => {
  test.each([
    ["0.40 +- 0.05", [0.4, 0.05, 0.05]],
    ["0.40 +0.05 -0.04", [0.4, 0.05, 0.04]],
    ["40 +- 5 %", [0.4, 0.05, 0.05]],
    ["87.0 +- 1.5 %", [0.87, 0.015, 0.015]],
    ["1.17e-3 +- 0.05e-3", [0.00117, 0.00005, 0.00005]],
  ])("reads %s", (text, expected) => {
    expect(pure(text)).toEqual(expected);
  });

  test("with a unit of energy is refused", () => {
    expect(pure("0.2 +- 0.1 MeV")).toBe(
      'expected a pure number or %, got the unit "MeV" in "0.2 +- 0.1 MeV"',
    );
    expect(pure("0.7 to 0.6")).toBe(
      'expected a range with the smaller value first, got "0.7 to 0.6". Write `0.6 to 0.7`',
    );
    expect(pure("< 5 %")).toBe(
      'expected an upper limit with its confidence, got "< 5 %". Write `< 5 % at 90 %` if that is its confidence',
    );
    expect(pure("half")).toBe('expected a number such as `0.40 +- 0.05` or `40 +- 5 %`, got "half"');
  });
});

describe("any quantity", () => {
  const decimal = fc
    .tuple(fc.integer({ min: 1, max: 10 ** 9 }), fc.integer({ min: -6, max: 6 }))
    .map(([digits, exponent]) => `${digits}e${exponent}`);

  test("written with GeV is the one written with MeV and the point moved", () => {
    fc.assert(
      fc.property(decimal, decimal, decimal, (value, plus, minus) => {
        const gev = parseQuantity(`${value} +${plus} -${minus} GeV`, "MeV");
        const mev = parseQuantity(`${value}  + ${plus}  - ${minus} MeV`, "MeV");
        if ("problem" in gev || "problem" in mev) throw new Error("both must be read");
        const moved = (digits: string) => Number(digits.replace(/e(.*)$/, (_, e) => `e${Number(e) + 3}`));
        expect([gev.value, gev.plus, gev.minus]).toEqual([value, plus, minus].map(moved));
        expect([mev.value, mev.plus, mev.minus]).toEqual([value, plus, minus].map(Number));
      }),
      { seed: SEED, numRuns: 300 },
    );
  });

  test("is either finite with errors >= 0, or refused in words, whatever the text", () => {
    const parts = fc.constantFrom(
      "5",
      ".",
      "e",
      "+",
      "-",
      " ",
      "MeV",
      "%",
      "+-",
      "to",
      "<",
      "at",
      "1e999",
      "\n",
      "\0",
    );
    fc.assert(
      fc.property(fc.array(parts, { maxLength: 12 }), fc.constantFrom("MeV", "1", "rad"), (words, unit) => {
        const read = parseQuantity(words.join(""), unit as "MeV");
        if ("problem" in read) return read.problem.startsWith("expected ");
        return Number.isFinite(read.value) && read.plus >= 0 && read.minus >= 0 && read.plus < Infinity;
      }),
      { seed: SEED, numRuns: 3000 },
    );
  });
});
