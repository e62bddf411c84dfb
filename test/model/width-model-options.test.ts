import { expect, test } from "vitest";
import { resolveStudy } from "../../src/model/resolve-study.js";
import { readStudy } from "../../src/study/read-study.js";

const optionsOf = (model: string) => {
  const text = `couplet: 1
title: Options
multiplets:
  x: { irrep: 8, spinParity: 1--, members: [{ name: X, place: rho, mass: 1700 MeV, width: sum }] }
decays: [{ from: x, to: [pseudoscalar-octet, pseudoscalar-octet], L: 1, model: ${model} }]
measurements: [{ total: X, value: 1 +- 1 MeV, source: test }]
`;
  return resolveStudy(readStudy(Buffer.from(text), "study.yaml")).decays[0]!.model.options;
};

test("an energy may have any unit, a number none", () => {
  const options = optionsOf("{ id: a, n: 1, referenceMomentumMeV: 0.5 GeV, referenceMassMeV: 900 }");
  expect(options).toEqual({ n: 1, referenceMomentumMeV: 500, referenceMassMeV: 900 });
  expect(optionsOf("{ id: c, radiusFm: 0.5 }")).toMatchObject({ radiusFm: 0.5 });
});

test.each([
  ["{ id: a, n: 1 MeV }", 'n: expected a number without a unit (it is in 1), got "1 MeV".'],
  ["{ id: c, radiusFm: 1 MeV }", 'radiusFm: expected a number without a unit (it is in fm), got "1 MeV".'],
  [
    "{ id: b, rangeMeV: 350 +- 20 MeV }",
    'rangeMeV: expected an energy without an error, got "350 +20 -20 MeV".',
  ],
])("%s is refused", (model, message) => {
  expect(() => optionsOf(model)).toThrow(message);
});
