import { describe, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { partialWidthMeV } from "../../src/widths/partial-width.js";
import { widthModel } from "../../src/widths/width-model.js";

const model = widthModel("a");
const decay = { parentMeV: 1275.4, firstMeV: 134.9768, secondMeV: 134.9768, identicalDaughters: false };

describe("partial width", () => {
  test("is |A|^2 K, and half of it for identical daughters", () => {
    const whole = partialWidthMeV(model, 2.5, decay, { L: 2 });
    expect(whole).toBe(2.5 * model.kinematicFactorMeV(1275.4, 134.9768, 134.9768, { L: 2 }));
    expect(partialWidthMeV(model, 2.5, { ...decay, identicalDaughters: true }, { L: 2 })).toBe(whole / 2);
  });

  test("is 0 below threshold", () => {
    expect(partialWidthMeV(model, 2.5, { ...decay, parentMeV: 200 }, { L: 0 })).toBe(0);
  });

  test("refuses a square that is negative", () => {
    expect(() => partialWidthMeV(model, -1, decay, { L: 2 })).toThrow(
      new InputError("partialWidthMeV: amplitudeSquared: expected a finite number >= 0, got -1. Give |A|^2."),
    );
  });
});
