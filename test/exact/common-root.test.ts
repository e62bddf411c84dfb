import { describe, expect, test } from "vitest";
import { commonRoot } from "../../src/exact/common-root.js";
import { formatRoot, parseRoot } from "../../src/exact/signed-root.js";

const common = (...texts: string[]) => {
  const found = commonRoot(texts.map(parseRoot));
  return found === undefined ? undefined : [formatRoot(found.root), ...found.multiples.map(String)];
};

describe("common root", () => {
  test("roots of rational ratio are integers without a common divisor times it", () => {
    expect(common("sqrt(2/3)", "-sqrt(1/6)")).toEqual(["sqrt(1/6)", "2", "-1"]);
    expect(common("1/2", "-1/3", "0")).toEqual(["1/6", "3", "-2", "0"]);
    expect(common("-sqrt(8)")).toEqual(["sqrt(8)", "-1"]);
  });

  test("there is none for roots of irrational ratio, for zeros, or for nothing", () => {
    expect(common("1", "sqrt(2)")).toBeUndefined();
    expect(common("0", "0")).toBeUndefined();
    expect(common()).toBeUndefined();
  });
});
