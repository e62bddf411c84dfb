import { describe, expect, test } from "vitest";
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
