import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { addRoots } from "../../src/exact/root-sum.js";
import { formatRoot, parseRoot, rootToNumber } from "../../src/exact/signed-root.js";

const SEED = 5;
const sum = (...texts: string[]) => addRoots(texts.map(parseRoot)).map(formatRoot);

describe("sum of signed roots", () => {
  test("like roots add, others stay apart, zeros drop out", () => {
    expect(sum("sqrt(2)", "sqrt(8)", "sqrt(3)", "0")).toEqual(["sqrt(18)", "sqrt(3)"]);
    expect(sum("1/2", "-1/3", "sqrt(1/2)")).toEqual(["1/6", "sqrt(1/2)"]);
    expect(sum()).toEqual([]);
  });

  test("what cancels leaves nothing", () => {
    expect(sum("sqrt(3/20)", "sqrt(5)", "-sqrt(12/20)", "sqrt(3/20)", "-sqrt(5)")).toEqual([]);
  });

  test("has the value of its terms, and no two terms with a rational ratio", () => {
    const root = fc
      .tuple(fc.constantFrom("", "-"), fc.integer({ min: 1, max: 30 }), fc.integer({ min: 1, max: 30 }))
      .map(([sign, num, den]) => parseRoot(`${sign}sqrt(${num}/${den})`));
    const property = fc.property(fc.array(root, { maxLength: 8 }), (roots) => {
      const added = addRoots(roots);
      const value = (terms: typeof roots) => terms.reduce((total, term) => total + rootToNumber(term), 0);
      expect(value(added)).toBeCloseTo(value(roots), 10);
      added.forEach((a, i) => {
        for (const b of added.slice(i + 1)) expect(addRoots([a, b])).toHaveLength(2);
      });
    });
    fc.assert(property, { seed: SEED });
  });
});
