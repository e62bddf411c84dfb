import { describe, expect, test } from "vitest";
import { productBlocks } from "../../../src/su3/engine/blocks.js";
import { type Link, productLinks } from "../../../src/su3/engine/links.js";
import { largestOf, stepBig, stepNumbers } from "../../../src/su3/engine/steps.js";
import { seededIntegers } from "../../support/seeded-integers.js";

const seed = 91_001;

function someLinks(): Link[] {
  const product = productBlocks({ p: 4, q: 2 }, { p: 3, q: 3 });
  const links = productLinks(product);
  return product.blocks
    .flatMap((block) => [links.from(block, "T"), links.from(block, "W")])
    .filter((link) => link !== undefined);
}

describe("a step of the recursion", () => {
  test(`gives the same in numbers and in BigInt on random vectors (seed ${seed})`, () => {
    const random = seededIntegers(seed);
    for (const link of someLinks()) {
      const size = Math.max(...link.sources);
      const source = Float64Array.from({ length: size + 1 }, (_, i) =>
        i === size ? 0 : random.below(2001) - 1000,
      );
      const target = new Float64Array(link.divisors.length);
      const numbers = stepNumbers(link, source, largestOf(source), target, new Int32Array(target.length))!;
      const { big, multiplier, divisor } = stepBig(link, Array.from(source, BigInt));
      expect(big).toEqual([...Array.from(target, BigInt), 0n]);
      expect([BigInt(numbers.multiplier), BigInt(numbers.divisor)]).toEqual([multiplier, divisor]);
    }
  });

  test("is refused in numbers where it might pass 2^53", () => {
    const [link] = someLinks() as [Link];
    const source = new Float64Array(Math.max(...link.sources) + 1);
    source[0] = Number.MAX_SAFE_INTEGER;
    const target = new Float64Array(link.divisors.length);
    expect(
      stepNumbers(link, source, largestOf(source), target, new Int32Array(target.length)),
    ).toBeUndefined();
  });

  test("of a vector of zeros is zero", () => {
    for (const link of someLinks()) {
      const target = new Float64Array(link.divisors.length).fill(7);
      const source = new Float64Array(Math.max(...link.sources) + 1);
      expect(stepNumbers(link, source, 0, target, new Int32Array(target.length))).toEqual({
        multiplier: 1,
        divisor: 1,
      });
      expect(largestOf(target)).toBe(0);
    }
  });
});
