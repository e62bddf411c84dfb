import { describe, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { resolveStudy } from "../../src/model/resolve-study.js";
import { readStudy } from "../../src/study/read-study.js";

const study = (first: string, second: string, rest = "") => `couplet: 1
title: twice
decays:
  - { from: baryon-decuplet, to: [baryon-octet, pseudoscalar-octet], L: 1, model: a }
measurements:
  - { ${first} }
  - { ${second} }
${rest}`;

/** What is said of a study, or undefined. */
function said(text: string): string | undefined {
  try {
    resolveStudy(readStudy(Buffer.from(text), "s.yaml"));
  } catch (error) {
    if (error instanceof InputError) return error.message;
    throw error;
  }
  return undefined;
}

const DELTA = "width: Delta(1232) -> N pi, value: 117 +- 3 MeV, source: A. Nobody 1999";
const XI = "width: Xi(1530) -> Xi pi, value: 9 +- 1 MeV, source: B. Nobody 1999";

describe("a measurement counts once", () => {
  test.each([
    ["word for word", DELTA, DELTA],
    [
      "in other units and blanks",
      DELTA,
      "width: Delta(1232)  ->  N pi, value: 0.117 +- 0.003 GeV, source: A.  Nobody 1999",
    ],
    ["for the fit alone", DELTA, `${DELTA}, use: fit`],
    [
      "as a ratio",
      "ratio: [Sigma(1385) -> Sigma pi, Sigma(1385) -> Lambda pi], value: 0.13 +- 0.01, source: x",
      "ratio: [Sigma(1385) -> Sigma pi, Sigma(1385) -> Lambda pi], value: 0.13 +- 0.01, source: x",
    ],
  ])("%s again is refused, with the lines of both", (_, first, second) => {
    const message = said(study(first, second));
    expect(message).toMatch(/^s\.yaml:7:5: measurements\/1: expected each measurement once, got /);
    expect(message).toContain(" with the value and source of line 6 again. ");
  });

  test("the message in full", () => {
    expect(said(study(DELTA, DELTA))).toBe(
      "s.yaml:7:5: measurements/1: expected each measurement once, got width Delta(1232) -> N pi with the value and source of line 6 again. Take one of them out; if both were measured, say in `source` what tells them apart.",
    );
  });

  test.each([
    ["another quantity", DELTA, XI],
    ["another source", DELTA, DELTA.replace("A. Nobody", "C. Nobody")],
    ["another value", DELTA, DELTA.replace("117", "118")],
    ["another error", DELTA, DELTA.replace("+- 3", "+3 -2")],
    ["one charge state", DELTA, DELTA.replace("Delta(1232)", "Delta(1232)++")],
    ["the fit and the tables, each its own", `${DELTA}, use: fit`, `${DELTA}, use: table`],
  ])("%s may stand beside it", (_, first, second) => {
    expect(said(study(first, second))).toBeUndefined();
  });

  test("and so does a prior", () => {
    const prior = "  - { parameter: g(10), value: 2 +- 0.1, source: D. Nobody }\n";
    expect(said(study(DELTA, XI, `priors:\n${prior}`))).toBeUndefined();
    expect(said(study(DELTA, XI, `priors:\n${prior}${prior}`))).toBe(
      "s.yaml:10:5: priors/1: expected each measurement once, got prior g(10) with the value and source of line 9 again. Take one of them out; if both were measured, say in `source` what tells them apart.",
    );
  });
});
