import { describe, expect, test } from "vitest";
import { describeFit } from "../../src/cli/fit.js";
import { describeParent, ERROR_WORDS } from "../../src/cli/show.js";
import { complete } from "../../src/completion/complete.js";
import { decodeDecays } from "../../src/tables/decode-decays.js";
import { encodeDecays } from "../../src/tables/encode-decays.js";
import { fitOf, studyText } from "../chain/run.js";

const squeezed = (text: string) => text.replaceAll(/ {2,}/g, "  ");

describe("errors and limits are printed as they were given", () => {
  const fit = fitOf(
    studyText("octet-5-2")
      .replace("value: 4.2 +- 1.8 MeV", "value: 4.2 +2.8 -1.2 MeV")
      .replace(
        "measurements:",
        'measurements:\n  - { fraction: N(1675) -> N eta, value: "< 4 % at 95 %", source: invented }',
      ),
  );

  test("an upper limit in the fit", () => {
    const { pull, fitted } = fit.minima[0]!.pulls[0]!;
    // 95 % of a half-Gaussian at 0 lie below 1.95996 standard deviations.
    expect(pull).toBeCloseTo(fitted / (0.04 / 1.959964), 6);
    expect(squeezed(describeFit(fit))).toContain(
      `fraction N(1675) -> N eta  < 0.04 at 95 %  ${fitted.toPrecision(4)}  ${pull.toFixed(2)}`,
    );
  });

  test("two-sided errors of a row, rounded by the smaller one", () => {
    const tables = decodeDecays(encodeDecays(complete(fit, 0)), "t.pb");
    const text = squeezed(
      describeParent(tables.parents.find(({ hadron }) => hadron?.name === "Sigma(1775)0")!),
    );
    // Half of 4.2 +2.8 -1.2 MeV of 120 MeV is 1.75 +1.17 -0.5 percent.
    expect(text).toContain("Sigma(1775)0 -> Sigma+ pi-  1.8 +1.2 -0.5  ");
    expect(text).toContain("Sigma(1775)0 -> p K-  20.0 +- 1.7  ");
  });

  test("short words for parts of an error have an explanation", () => {
    for (const word of ["br.", "min.", "mod."]) expect(ERROR_WORDS).toContain(`${word} `);
  });
});
