import { describe, expect, test } from "vitest";
import { latexWithErrors } from "../../src/tables/export-latex-numbers.js";
import { asGiven, roundedValue, significant, withError } from "../../src/tables/rounding.js";

describe("values rounded by the trade's rule", () => {
  // Cases of the Review's introduction, "Rounding": three leading digits of the error 100-354, 355-949, 950-999.
  test.each([
    [0.827, 0.119, ["0.83", "0.12"]],
    [0.827, 0.367, ["0.8", "0.4"]],
    [0.827, 0.951, ["0.8", "1.0"]],
    [1234.5, 354, ["1230", "350"]],
    [1234.5, 41, ["1230", "40"]],
  ])("%s with error %s", (value, error, [rounded, roundedError]) => {
    expect(roundedValue(value, error, error)).toEqual({
      value: rounded,
      plus: roundedError,
      minus: roundedError,
    });
  });

  test("a negative value far below its error is 0 without a sign", () => {
    expect(withError(-0.0005, 0.6)).toBe("0.0 +- 0.6");
    expect(withError(-3, 41)).toBe("0 +- 40");
    expect(withError(-0.06, 0.6)).toBe("-0.1 +- 0.6");
    expect(roundedValue(-0.0004, 0.12, 0.12).value).toBe("0.00");
  });

  test("of two errors the smaller decides, and without errors four digits stay", () => {
    expect(roundedValue(2.04, 0.7, 0.12)).toEqual({ value: "2.04", plus: "0.70", minus: "0.12" });
    expect(roundedValue(12.3456, 0, 0)).toEqual({ value: "12.35", plus: "", minus: "" });
  });
});

test("numbers below 1e-4 and from 1e7 on have an exponent, one for value and errors", () => {
  // The neutron's width in MeV, hbar/(878.4 +- 0.5 s).
  expect(withError(7.4933e-25, 4.3e-28)).toBe("7.493e-25 +- 0.004e-25");
  expect(withError(2e-6, 3e-5)).toBe("0.2e-5 +- 3.0e-5");
  expect(withError(0, 3e-5)).toBe("0.0e-5 +- 3.0e-5");
  expect(withError(2.5e7, 1.1e6)).toBe("2.50e7 +- 0.11e7");
  expect(withError(2e-6, 0.03)).toBe("0.000 +- 0.030");
  expect(roundedValue(-4.2e-7, 1.2e-8, 3e-8)).toEqual({
    value: "-4.20e-7",
    plus: "0.12e-7",
    minus: "0.30e-7",
  });
  expect(latexWithErrors(7.4933e-25, 4.3e-28, 4.3e-28)).toBe("(7.493 \\pm 0.004) \\times 10^{-25}");
  expect(latexWithErrors(-4.2e-7, 1.2e-8, 3e-8)).toBe("(-4.20^{+0.12}_{-0.30}) \\times 10^{-7}");
});

test("text keeps what its reader needs: rounded with its error, as given, or to a count of digits", () => {
  expect(withError(-0.24012, 0.0331)).toBe("-0.240 +- 0.033");
  expect(withError(12.3456, 1e-14)).toBe("12.35");
  expect(asGiven(0.1 + 0.2, 0.1, 0.1)).toBe("0.3 +- 0.1");
  expect(asGiven(58, 4, 3)).toBe("58 +4 -3");
  expect([significant(0, 4), significant(0.00123456, 3), significant(1.5e-9, 3)]).toEqual([
    "0",
    "0.00123",
    "1.50e-9",
  ]);
});
