import { expect, test } from "vitest";
import { formatRoot, parseRoot } from "../../src/exact/signed-root.js";
import { scalarProductOfRoots, sumOfRoots } from "./sum-of-roots.js";

const sumOfTexts = (...texts: string[]) => formatRoot(sumOfRoots(texts.map(parseRoot)));

test("sums of commensurable roots are exact", () => {
  expect(sumOfTexts("sqrt(2)", "sqrt(8)")).toBe("sqrt(18)");
  expect(sumOfTexts("sqrt(1/2)", "-sqrt(1/8)", "-sqrt(1/8)")).toBe("0");
  expect(sumOfTexts("1/3", "0", "-1/2")).toBe("-1/6");
  expect(sumOfTexts()).toBe("0");
});

test("sums of other roots are refused, not approximated", () => {
  expect(() => sumOfTexts("sqrt(2)", "sqrt(3)")).toThrow(
    "the roots are not rational multiples of each other",
  );
});

test("a scalar product sees a wrong sign and a wrong value", () => {
  const row = ["sqrt(1/3)", "-sqrt(2/3)"].map(parseRoot);
  expect(formatRoot(scalarProductOfRoots(row, row))).toBe("1");
  expect(formatRoot(scalarProductOfRoots(row, ["sqrt(2/3)", "sqrt(1/3)"].map(parseRoot)))).toBe("0");
  expect(formatRoot(scalarProductOfRoots(row, ["sqrt(2/3)", "-sqrt(1/3)"].map(parseRoot)))).toBe("sqrt(8/9)");
});
