import { describe, expect, test } from "vitest";
import { asGiven, significant, withError } from "../../src/tables/rounding.js";

describe("a value with its error, for people", () => {
  // The examples of the Review of Particle Physics, introduction, section "Rounding" (Particle Data Group, Phys. Rev. D
  // 110, 030001 (2024)); provenance: memory.
  test.each([
    [0.827, 0.119, "0.83 +- 0.12"],
    [0.827, 0.367, "0.8 +- 0.4"],
  ])("%d +- %d is rounded as the Particle Data Group does", (value, error, text) => {
    expect(withError(value, error)).toBe(text);
  });

  test.each([
    [0.827, 0.354, "0.83 +- 0.35"],
    [0.827, 0.355, "0.8 +- 0.4"],
    [0.827, 0.949, "0.8 +- 0.9"],
    [0.827, 0.95, "0.8 +- 0.9"],
    [117.04, 2.96, "117.0 +- 3.0"],
    [1234.5, 120, "1230 +- 120"],
    [12345, 3600, "12000 +- 4000"],
    [-0.24, 0.033, "-0.240 +- 0.033"],
  ])("%d +- %d becomes %s", (value, error, text) => {
    expect(withError(value, error)).toBe(text);
  });

  test("has four digits where there is no error", () => {
    expect(withError(0.123456, 0)).toBe("0.1235");
    expect(withError(0.123456, Number.NaN)).toBe("0.1235");
  });

  test("keeps every digit of what was given", () => {
    expect(asGiven(20.4, 3.6, 3.6)).toBe("20.4 +- 3.6");
    expect(asGiven(58, 4, 3)).toBe("58 +4 -3");
    expect(asGiven(1, 0, 0)).toBe("1");
  });

  test("has an exponent only where it is very small or very large", () => {
    expect([0, 1e-4, 9.9e-5, 1e6, 1e7].map((value) => significant(value, 2))).toEqual([
      "0",
      "0.00010",
      "9.9e-5",
      "1000000",
      "1.0e+7",
    ]);
  });
});
