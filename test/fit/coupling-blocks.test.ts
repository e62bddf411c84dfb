import { expect, test } from "vitest";
import { couplingBlocks, flipBlock, standsInReportedSign } from "../../src/fit/coupling-blocks.js";

test("couplings that meet in a form, directly or through others, make one block; one in no form is alone", () => {
  const forms = [
    [1, 0, 2, 0, 0],
    [0, 0, 1, 0, -1],
    [0, 3, 0, 0, 0],
  ];
  expect(couplingBlocks(forms, 5)).toEqual([
    { couplings: [0, 2, 4], forms: [0, 1] },
    { couplings: [1], forms: [2] },
    { couplings: [3], forms: [] },
  ]);
});

test("the blocks do not depend on the order of the forms", () => {
  const chain = [
    [0, 0, 1, 1],
    [1, 1, 0, 0],
    [0, 1, 1, 0],
  ];
  for (const order of [
    [0, 1, 2],
    [2, 1, 0],
    [1, 0, 2],
  ]) {
    const blocks = couplingBlocks(
      order.map((k) => chain[k]!),
      4,
    );
    expect(blocks.map(({ couplings }) => couplings)).toEqual([[0, 1, 2, 3]]);
  }
});

test("the reported sign makes the first coupling positive that is not negligible beside the others", () => {
  const block = { couplings: [1, 2], forms: [] };
  expect(standsInReportedSign([-1, 2, -3], block)).toBe(true);
  expect(standsInReportedSign([1, -2, 3], block)).toBe(false);
  expect(standsInReportedSign([1, -1e-9, 3], block)).toBe(true);
  expect(standsInReportedSign([-1, 0, 0], block)).toBe(true);
  expect(flipBlock([-1, 2, -3], block)).toEqual([-1, -2, 3]);
});
