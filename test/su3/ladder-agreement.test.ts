import { describe, expect, test } from "vitest";
import { formatRoot } from "../../src/exact/signed-root.js";
import { type Irrep, irrepName } from "../../src/su3/irrep.js";
import { isoscalarTable } from "../../src/su3/isoscalar-factors.js";
import { irrepsUpTo } from "../support/irreps-up-to.js";
import { ladderCopies, ladderProduct } from "../support/ladder-table.js";

/** Every factor of every copy, as text by labels. */
function engineCopies(left: Irrep, right: Irrep): Map<string, Map<string, string>> {
  const copies = new Map<string, Map<string, string>>();
  for (const factor of isoscalarTable(left, right).factors()) {
    const name = `${irrepName(factor.irrep)} copy ${factor.copy}`;
    const { threeY, twoI, threeY1, twoI1, threeY2, twoI2, value } = factor;
    const copy = copies.get(name) ?? new Map<string, string>();
    copies.set(
      name,
      copy.set(`${threeY},${twoI}|${threeY1},${twoI1},${threeY2},${twoI2}`, formatRoot(value)),
    );
  }
  return copies;
}

describe("the engine and ladder operators on full product states", () => {
  const irreps = irrepsUpTo(4);
  for (const left of irreps) {
    test(`give the same factors for ${irrepName(left)} times every irrep with p + q <= 4, copy by copy`, () => {
      for (const right of irreps) {
        const product = ladderProduct(left, right);
        const expected = new Map<string, ReadonlyMap<string, string>>();
        for (const { irrep } of isoscalarTable(left, right).series) {
          for (const [i, copy] of ladderCopies(product, irrep).entries()) {
            expected.set(`${irrepName(irrep)} copy ${i + 1}`, copy);
          }
        }
        expect(engineCopies(left, right), `${irrepName(left)} x ${irrepName(right)}`).toEqual(expected);
      }
    });
  }
});
