import fc from "fast-check";
import { expect, test } from "vitest";
import { floatNotAbove, floatNotBelow } from "../../src/widths/float-rounding.js";

test("a number lies between its two floats, which are neighbours, and a float is both of them", () => {
  const number = fc.double({ min: 1e-6, max: 1e6, noNaN: true });
  const property = fc.property(number, (value) => {
    const [below, above] = [floatNotAbove(value), floatNotBelow(value)];
    expect([Math.fround(below), Math.fround(above)]).toEqual([below, above]);
    expect(below <= value && value <= above).toBe(true);
    // Nothing but the two is nearest to what lies between them.
    const middle = Math.fround((below + above) / 2);
    expect(middle === below || middle === above).toBe(true);
    expect([floatNotAbove(below), floatNotBelow(below)]).toEqual([below, below]);
  });
  fc.assert(property, { seed: 3, numRuns: 5000 });
});
