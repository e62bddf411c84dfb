import { describe, expect, test } from "vitest";
import { editDistance, nearestNames } from "../../src/hadrons/nearest-names.js";

describe("nearest names", () => {
  test("edit distance counts insertions, deletions and replacements", () => {
    expect([
      editDistance("kitten", "sitting"),
      editDistance("", "abc"),
      editDistance("same", "same"),
    ]).toEqual([3, 3, 0]);
  });

  test("come nearest first, whatever the case, and none that are far", () => {
    expect(nearestNames("sigmA", ["Lambda", "Sigma+", "Sigma", "Omega"])).toEqual(["Sigma", "Sigma+"]);
    expect(nearestNames("zzz", ["Lambda", "Sigma"])).toEqual([]);
  });
});
