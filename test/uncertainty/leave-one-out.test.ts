import { expect, test } from "vitest";
import { leaveOneOut } from "../../src/uncertainty/leave-one-out.js";
import { studyText } from "../chain/run.js";
import { fitOf } from "./planted.js";

test("every fit without one measurement equals the fit of a study without that line", () => {
  const text = studyText("octet-5-2");
  const fit = fitOf(text);
  const lines = text.split("\n").filter((line) => line.includes("source"));
  const left = leaveOneOut(fit);
  expect(left).toHaveLength(lines.length);
  for (const [k, { observable, chi2, ndf, parameters }] of left.entries()) {
    const [direct] = fitOf(text.replace(`${lines[k]}\n`, "")).minima;
    expect(lines[k]).toContain(observable.label.replace("width ", "width: "));
    expect(chi2).toBeCloseTo(direct!.chi2, 7);
    expect(ndf).toBe(direct!.ndf);
    for (const { name, value, error, shift } of parameters) {
      const fitted = direct!.parameters.find((parameter) => parameter.name === name)!;
      const full = fit.minima[0]!.parameters.find((parameter) => parameter.name === name)!;
      expect(value).toBeCloseTo(fitted.value, 6);
      expect(error).toBeCloseTo(fitted.error, 6);
      expect(shift).toBeCloseTo(fitted.value - full.value, 6);
    }
  }
});

test("a planted wrong width is the one whose absence mends the fit, and the others predict its true value", () => {
  const right = leaveOneOut(fitOf(studyText("octet-5-2")))[1]!.predicted;
  const spoilt = studyText("octet-5-2").replace("48 +- 4", "90 +- 4");
  const left = leaveOneOut(fitOf(spoilt));
  const best = left.reduce((a, b) => (b.chi2 < a.chi2 ? b : a));
  expect(best.observable.label).toBe("width Sigma(1775) -> N Kbar");
  expect(best.predicted).toBeCloseTo(right, 5);
  expect(best.pull).toBeCloseTo((right - 90) / 4, 5);
});

test("without the only measurement of a coupling its direction is named as undetermined", () => {
  const text = studyText("octet-5-2")
    .split("\n")
    .filter((line) => !line.includes("source") || /N\(1675\)|Lambda pi/.test(line))
    .join("\n");
  for (const { verdicts } of leaveOneOut(fitOf(text))) expect(verdicts.degenerateDirections).toHaveLength(1);
});
