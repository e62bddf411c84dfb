import { expect, test } from "vitest";
import { describeUncertainties } from "../../src/cli/describe-uncertainty.js";
import { describeFit } from "../../src/cli/fit.js";
import { fitModel } from "../../src/model/fit-model.js";
import { resolveStudy } from "../../src/model/resolve-study.js";
import { readStudy } from "../../src/study/read-study.js";
import { leaveOneOut } from "../../src/uncertainty/leave-one-out.js";

test("a limit is printed as it was written, also where it is left out", () => {
  const text = `couplet: 1
title: A limit, invented
multiplets:
  d: { irrep: 10, spinParity: 3/2+, members: [{ name: Sigma(1700), place: Sigma, mass: 1700 MeV, width: 90 MeV }] }
decays: [{ from: d, to: [baryon-octet, pseudoscalar-octet], L: 1, model: a }]
measurements:
  - { width: Sigma(1700) -> Lambda pi, value: 20 +4 -3 MeV, source: invented }
  - { fraction: Sigma(1700) -> N Kbar, value: < 30 % at 95 %, source: invented }
`;
  const fit = fitModel(resolveStudy(readStudy(Buffer.from(text), "study.yaml")));
  const left = describeUncertainties(fit, { leaveOneOut: leaveOneOut(fit) });
  for (const printed of [describeFit(fit), left]) {
    expect(printed).toMatch(/fraction Sigma\(1700\) -> N Kbar +< 0\.3 at 95 %/);
    expect(printed).toMatch(/width Sigma\(1700\) -> Lambda pi +20 \+4 -3/);
  }
});
