import { expect, test } from "vitest";
import { seededIntegers } from "./seeded-integers.js";

test("the same seed gives the same integers and another seed others", () => {
  const draw = (seed: number) => {
    const random = seededIntegers(seed);
    return Array.from({ length: 20 }, () => random.bigint(70));
  };
  expect(draw(5)).toEqual(draw(5));
  expect(draw(5)).not.toEqual(draw(6));
});

test("integers stay within their bounds and reach most of them", () => {
  const random = seededIntegers(1);
  const drawn = Array.from({ length: 1000 }, () => random.below(10));
  expect(new Set(drawn).size).toBe(10);
  expect(Math.max(...drawn)).toBe(9);
  for (let i = 0; i < 100; i++) expect(random.bigint(5) < 32n).toBe(true);
});
