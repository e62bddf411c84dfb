import { describe, expect, test } from "vitest";
import { mutantsOf } from "./mutants.js";

function changes(text: string): string[] {
  return mutantsOf("a.ts", text).map(
    ({ start, end, replacement }) => text.slice(0, start) + replacement + text.slice(end),
  );
}

describe("mutants", () => {
  test("change one operator, number, sign, condition or truth value each", () => {
    expect(changes("f(a + b)")).toEqual(["f(a - b)"]);
    expect(changes("if (a < 2n) f(-a)")).toEqual([
      "if (!(a < 2n)) f(-a)",
      "if (a <= 2n) f(-a)",
      "if (a < 3n) f(-a)",
      "if (a < 2n) f(a)",
    ]);
    expect(changes("x = a ? true : !b")).toEqual([
      "x = !(a) ? true : !b",
      "x = a ? false : !b",
      "x = a ? true : b",
    ]);
  });

  test("leave imports, types, messages and named limits alone", () => {
    expect(changes('import { a } from "1";')).toEqual([]);
    expect(changes("type T = 1 | -1; interface I { a: 2 }")).toEqual([]);
    expect(changes("throw new LimitError('at most ' + (1 - n))")).toEqual([]);
    expect(changes("const LARGEST_TABLE = 20_000;")).toEqual([]);
  });
});
