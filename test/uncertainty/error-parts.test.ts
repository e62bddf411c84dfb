import { describe, expect, test } from "vitest";
import { predict } from "../../src/completion/predictions.js";
import { errorParts } from "../../src/uncertainty/error-parts.js";
import { modelErrorsMeV, modelSpread } from "../../src/uncertainty/model-spread.js";
import { linearError } from "../../src/uncertainty/quantities.js";
import { studyText } from "../chain/run.js";
import { fitOf } from "./planted.js";

const text = studyText("octet-5-2");
const fit = fitOf(text);
const spread = modelSpread(fit);

describe("the 5/2- octet with other width models", () => {
  test("is fitted with every model but its own, and told why one does not apply", () => {
    expect(spread.fits.map(({ model }) => [model.id, ...Object.values(model.options)])).toEqual([
      ["a", 1],
      ["b"],
      ["c", 0.1973269804],
      ["c", 5 * 0.1973269804],
      ["d"],
    ]);
    expect(spread.skipped).toEqual([
      {
        model: { id: "e", options: {} },
        reason: "it has no formula for octet -> baryon-octet pseudoscalar-octet with L = 2",
      },
    ]);
  });

  // Scans over alpha_F by an independent program; inputs rounded from the PDG, from memory.
  test("moves alpha_F to -0.146 with model b and to -0.216 with model c at R = 1/GeV: more than its error", () => {
    const alpha = (id: string) =>
      spread.fits.find(({ model }) => model.id === id)!.parameters.find(({ name }) => name === "alpha_F")!;
    expect(Math.abs(alpha("b").value + 0.146)).toBeLessThan(0.002);
    expect(Math.abs(alpha("c").value + 0.216)).toBeLessThan(0.002);
    const own = spread.own.parameters.find(({ name }) => name === "alpha_F")!;
    expect(Math.abs(alpha("b").value - own.value)).toBeGreaterThan(own.error);
  });

  test("each is the fit of the study with that model written in it", () => {
    const [direct] = fitOf(text.replace("model: a", "model: b")).minima;
    const b = spread.fits.find(({ model }) => model.id === "b")!;
    expect(b.chi2).toBeCloseTo(direct!.chi2, 8);
    expect(b.aboveBest).toBe(0);
  });

  test("the model's error of a width is half the range over the models", () => {
    const channel = fit.model.channels.findIndex(({ id }) => id === "Lambda(1830) -> p K-");
    const widths = [spread.own, ...spread.fits].map(({ widthsMeV }) => widthsMeV[channel]!);
    expect(modelErrorsMeV(spread)[channel]).toBeCloseTo((Math.max(...widths) - Math.min(...widths)) / 2, 12);
    expect(modelErrorsMeV(spread)[channel]).toBeGreaterThan(0.1);
  });

  test("a prior on a coupling belongs to the study's own model, so that none is compared", () => {
    const prior = `${text}priors:\n  - { parameter: D, value: 1.2 +- 0.1, source: invented }\n`;
    const { fits, skipped } = modelSpread(fitOf(prior));
    expect(fits).toEqual([]);
    expect(skipped[0]!.reason).toBe(
      '"prior D" fixes the size of couplings, which belongs to the study\'s own model',
    );
  });
});

describe("the parts of an error", () => {
  const parts = errorParts(fit, 0, { models: spread });

  test("are the linear error, no branch, the models' and that of breaking, channel by channel", () => {
    const predictions = predict(fit, 0);
    for (const [channel, { statistical, branch, model, breaking }] of parts.entries()) {
      const { widthMeV, gradient, breakingMeV } = predictions.channels[channel]!;
      const linear = linearError({ value: widthMeV, gradient }, fit.minima[0]!.covariance);
      expect(statistical).toBeCloseTo(linear, 12);
      expect(branch).toBe(0);
      expect(model).toBe(modelErrorsMeV(spread)[channel]);
      expect(breaking).toBe(breakingMeV);
    }
  });

  test("have a branch part where another minimum is not excluded: the distance to its prediction", () => {
    const two = fitOf(
      text
        .split("\n")
        .filter((line) => !line.includes("source") || /N\(1675\)|Lambda pi/.test(line))
        .join("\n"),
    );
    expect(two.minima).toHaveLength(2);
    const widths = [0, 1].map((k) => predict(two, k).channels.map(({ widthMeV }) => widthMeV));
    for (const [channel, { branch, model }] of errorParts(two).entries()) {
      expect(branch).toBeCloseTo(Math.abs(widths[0]![channel]! - widths[1]![channel]!), 10);
      expect(model).toBeUndefined();
    }
  });
});
