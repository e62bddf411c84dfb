import { describe, expect, test } from "vitest";
import { couplet } from "../../src/gen/couplet.js";
import { factorOf } from "../../src/tables/evaluate-rows.js";
import { optionMessages } from "../../src/tables/wave-options.js";
import { widthModel } from "../../src/widths/width-model.js";

const SPINS = [1, 1, 0].map((twoJ) => couplet.v1.Hadron.create({ twoJ, parity: 1 }));
const KINEMATICS = { parentMeV: 1535, firstMeV: 938.9, secondMeV: 138, momentumMeV: 464.4 };
const SCALE = { name: "scaleMeV", value: 139.57, unit: "MeV" };
const form = (value: number | null, unit = "1") => ({ name: "derivativeForm", value, unit });

function K(options: couplet.v1.Option.$Properties[], model = "d"): number {
  return factorOf({ id: "row" }, { twoL: 0, twoS: 1, model, options }, SPINS)(KINEMATICS);
}

describe("an option that joined its model later", () => {
  test("is left out of tables at what it means when absent, so that they are as before", () => {
    expect(optionMessages(widthModel("d"))).toEqual([SCALE]);
    expect(optionMessages(widthModel("d", { derivativeForm: 1 }))).toEqual([SCALE, form(1)]);
    expect(optionMessages(widthModel("c")).map(({ name }) => name)).toEqual(["radiusFm", "referenceMassMeV"]);
  });

  test("has that value where a table lacks it; written out, in any order, it has its own", () => {
    // K = q (E + m)/(4 pi M), written out.
    const { parentMeV, firstMeV, momentumMeV: q } = KINEMATICS;
    const plain = (q * (Math.hypot(firstMeV, q) + firstMeV)) / (4 * Math.PI * parentMeV);
    expect(K([SCALE]) / plain).toBeCloseTo(1, 14);
    expect(K([SCALE, form(0)])).toBe(K([SCALE]));
    const derivative = plain * ((parentMeV - firstMeV) / 139.57) ** 2;
    expect(K([SCALE, form(1)]) / derivative).toBeCloseTo(1, 14);
    expect(K([form(1), SCALE])).toBe(K([SCALE, form(1)]));
  });

  const wanted = "expected width model d with the options [scaleMeV in MeV, derivativeForm in 1 or none]";
  const newer = "Read the table with a newer version of Couplet.";
  const range =
    "It is 1 for a derivative in the coupling of a parent of spin 1/2, 0 for none; without effect for higher spins, " +
    "whose couplings have derivatives in any case; the default is 0.";
  test.each([
    [
      "an option the model does not have",
      [SCALE, { name: "mixing", value: 1, unit: "1" }],
      `${wanted}, got [scaleMeV in MeV, mixing in 1]. ${newer}`,
    ],
    [
      "it in another unit",
      [SCALE, form(1, "MeV")],
      `${wanted}, got [scaleMeV in MeV, derivativeForm in MeV]. ${newer}`,
    ],
    [
      "it twice",
      [SCALE, form(1), form(1)],
      `${wanted}, got [scaleMeV in MeV, derivativeForm in 1, derivativeForm in 1]. ${newer}`,
    ],
    ["it alone", [form(1)], `${wanted}, got [derivativeForm in 1]. ${newer}`],
    ["no option at all", [], `${wanted}, got []. ${newer}`],
    [
      "a value between",
      [SCALE, form(0.5)],
      `width model d: derivativeForm: expected an integer from 0 to 1, got 0.5. ${range}`,
    ],
    [
      "it without a value",
      [SCALE, form(null)],
      `width model d: derivativeForm: expected an integer from 0 to 1, got NaN. ${range}`,
    ],
  ])("%s is refused", (_, options, message) => {
    expect(() => K(options)).toThrow(
      expect.objectContaining({ name: "TableError", message: `row: ${message}` }),
    );
  });

  test("belongs to its model alone", () => {
    const options = [...optionMessages(widthModel("b")), form(0)];
    expect(() => K(options, "b")).toThrow(
      expect.objectContaining({
        name: "TableError",
        message: `row: expected width model b with the options [rangeMeV in MeV, nucleonMassMeV in MeV], got [rangeMeV in MeV, nucleonMassMeV in MeV, derivativeForm in 1]. ${newer}`,
      }),
    );
  });
});
