import { expect, test } from "vitest";
import { nearestNames } from "../src/nearest-names.js";

test("nearest names come nearest first, whatever the case, and none that are far", () => {
  expect(nearestNames("sigmA", ["Lambda", "Sigma+", "Sigma", "Omega"])).toEqual(["Sigma", "Sigma+"]);
  expect(nearestNames("zzz", ["Lambda", "Sigma"])).toEqual([]);
});
