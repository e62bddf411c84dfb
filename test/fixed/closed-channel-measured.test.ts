import { expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { fitOf } from "../chain/run.js";

// A width of a channel below its threshold went into the fit, which could only predict 0 for it.
test("a measured width of a closed channel is refused, even where it would enter the fit only", () => {
  const study = (channel: string) => `couplet: 1
title: closed
decays:
  - { from: baryon-decuplet, to: [baryon-octet, pseudoscalar-octet], L: 1, model: a }
measurements:
  - { width: Delta(1232) -> N pi, value: 117 +- 3 MeV, source: invented }
  - { width: ${channel}, value: 5 +- 3 MeV, source: invented, use: fit }
`;
  expect(() => fitOf(study("Delta(1232) -> Sigma K"))).toThrow(
    new InputError(
      "study.yaml:7:14: measurements/1/width: expected a channel that is open, got Delta(1232)++ -> Sigma+ K+ with its threshold at 1683.0 MeV above the parent's 1232 MeV. Check the masses, or take the measurement out.",
    ),
  );
  expect(fitOf(study("Xi(1530) -> Xi pi")).minima.length).toBe(1);
});
