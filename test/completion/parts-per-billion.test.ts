import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { partsPerBillion, WHOLE } from "../../src/completion/parts-per-billion.js";
import { InternalError } from "../../src/errors.js";

const SEED = 20261202;

/** Fractions that add up to 1, from any weights. */
const fractions = fc
  .array(fc.oneof(fc.constant(0), fc.double({ min: 1e-12, max: 1, noNaN: true })), {
    minLength: 1,
    maxLength: 40,
  })
  .filter((weights) => weights.some((weight) => weight > 0))
  .map((weights) => {
    const sum = weights.reduce((total, weight) => total + weight, 0);
    return weights.map((weight) => weight / sum);
  });

const largest = (values: readonly number[]) => values.indexOf(Math.max(...values));

describe("fractions in parts per 10^9", () => {
  test("add up to 10^9 exactly, as integers >= 0", () => {
    fc.assert(
      fc.property(fractions, (values) => {
        const parts = partsPerBillion(values, largest(values));
        expect(parts.reduce((sum, part) => sum + part, 0)).toBe(WHOLE);
        for (const part of parts) expect(Number.isSafeInteger(part) && part >= 0).toBe(true);
      }),
      { seed: SEED, numRuns: 500 },
    );
  });

  test("are each the nearest integer, but for the row that takes what rounding leaves", () => {
    fc.assert(
      fc.property(fractions, (values) => {
        const at = largest(values);
        const parts = partsPerBillion(values, at);
        for (const [k, part] of parts.entries()) {
          const distance = Math.abs(part - values[k]! * WHOLE);
          expect(distance).toBeLessThanOrEqual(k === at ? values.length / 2 + 0.51 : 0.51);
        }
      }),
      { seed: SEED, numRuns: 500 },
    );
  });

  test("of three thirds are 333333333 and the one that takes the rest", () => {
    expect(partsPerBillion([1 / 3, 1 / 3, 1 / 3], 1)).toEqual([333_333_333, 333_333_334, 333_333_333]);
  });

  test("that do not add up to 1 are a bug of ours", () => {
    expect(() => partsPerBillion([0.5, 0.4], 0)).toThrow(
      new InternalError(
        "partsPerBillion: fractions are 100000000 parts short. This is a bug in Couplet; please report it with the command you ran.",
      ),
    );
  });
});
