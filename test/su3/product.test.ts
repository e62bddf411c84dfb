import { describe, expect, test } from "vitest";
import { InputError, LimitError } from "../../src/errors.js";
import {
  conjugate,
  type Irrep,
  irrepDimension,
  irrepName,
  parseIrrep,
  sameIrrep,
  triality,
} from "../../src/su3/irrep.js";
import {
  couplingPaths,
  decomposeProduct,
  irrepMultiplicities,
  type SeriesEntry,
} from "../../src/su3/product.js";
import { states } from "../../src/su3/state.js";
import { irrepsUpTo } from "../support/irreps-up-to.js";

function named(series: readonly SeriesEntry[]): string {
  return series
    .map(({ irrep, multiplicity }) => (multiplicity === 1 ? "" : `${multiplicity}*`) + irrepName(irrep))
    .join(" + ");
}

function product(...names: string[]): string {
  return named(irrepMultiplicities(names.map(parseIrrep)));
}

/** The series by weights alone: multiplicities of weights, highest weights taken off one after another. */
function seriesByWeights(left: Irrep, right: Irrep): Map<string, number> {
  const counts = new Map<string, number>();
  const key = (threeY: number, twoI3: number) => `${threeY},${twoI3}`;
  for (const a of states(left)) {
    for (const b of states(right)) {
      const weight = key(a.threeY + b.threeY, a.twoI3 + b.twoI3);
      counts.set(weight, (counts.get(weight) ?? 0) + 1);
    }
  }
  const series = new Map<string, number>();
  // A weight above another has the larger p + q.
  for (const irrep of irrepsUpTo(left.p + left.q + right.p + right.q).reverse()) {
    const multiplicity = counts.get(key(irrep.p + 2 * irrep.q, irrep.p)) ?? 0;
    if (multiplicity === 0) continue;
    series.set(`${irrep.p},${irrep.q}`, multiplicity);
    for (const { threeY, twoI3 } of states(irrep)) {
      counts.set(key(threeY, twoI3), counts.get(key(threeY, twoI3))! - multiplicity);
    }
  }
  return series;
}

describe("products of two irreps", () => {
  test("are those known from hadron physics", () => {
    expect(product("8", "8")).toBe("1 + 2*8 + 10 + 10bar + 27");
    expect(product("10", "8")).toBe("8 + 10 + 27 + 35");
    expect(product("10bar", "8")).toBe("8 + 10bar + 27 + 35bar");
    expect(product("27", "8")).toBe("8 + 10 + 10bar + 2*27 + 35 + 35bar + 64");
    expect(product("3bar", "15(2,1)")).toBe("8 + 10 + 27");
    expect(product("3bar", "6bar")).toBe("8 + 10bar");
    expect(product("3", "3bar")).toBe("1 + 8");
  });

  test("agree with the count of weights for all p + q <= 4", () => {
    for (const left of irrepsUpTo(4)) {
      for (const right of irrepsUpTo(4)) {
        const series = decomposeProduct(left, right).map(
          ({ irrep, multiplicity }) => [`${irrep.p},${irrep.q}`, multiplicity] as const,
        );
        expect(new Map(series)).toEqual(seriesByWeights(left, right));
      }
    }
  });

  test("keep dimension and triality, commute, and conjugate, for all p + q <= 7", () => {
    for (const left of irrepsUpTo(7)) {
      for (const right of irrepsUpTo(7)) {
        const series = decomposeProduct(left, right);
        const total = series.reduce(
          (sum, { irrep, multiplicity }) => sum + multiplicity * irrepDimension(irrep),
          0,
        );
        expect(total).toBe(irrepDimension(left) * irrepDimension(right));
        for (const { irrep } of series) expect(triality(irrep)).toBe((triality(left) + triality(right)) % 3);
        expect(decomposeProduct(right, left)).toEqual(series);
        const conjugated = decomposeProduct(conjugate(left), conjugate(right));
        expect(
          new Set(conjugated.map(({ irrep, multiplicity }) => `${irrep.q},${irrep.p},${multiplicity}`)),
        ).toEqual(new Set(series.map(({ irrep, multiplicity }) => `${irrep.p},${irrep.q},${multiplicity}`)));
        expect(series.some(({ irrep }) => irrep.p + irrep.q === 0)).toBe(sameIrrep(left, conjugate(right)));
      }
    }
  });

  test("come by rising dimension, then falling p", () => {
    for (const left of irrepsUpTo(5)) {
      const sizes = decomposeProduct(left, { p: 2, q: 2 }).map(
        ({ irrep }) => irrepDimension(irrep) * 1000 - irrep.p,
      );
      expect(sizes).toEqual([...sizes].sort((a, b) => a - b));
      expect(new Set(sizes).size).toBe(sizes.length);
    }
  });
});

describe("products of several irreps", () => {
  test("do not depend on the order", () => {
    expect(product("3", "3", "3")).toBe("1 + 2*8 + 10");
    expect(product("8", "10", "3")).toBe(product("3", "8", "10"));
    expect(product("8")).toBe("8");
  });

  test("have one path for each occurrence, and the two octets of 3 x 3 x 3 pass through 3bar and 6", () => {
    const triplet = parseIrrep("3");
    const paths = couplingPaths([triplet, triplet, triplet]);
    const octets = paths.filter(({ irrep }) => irrepName(irrep) === "8");
    expect(octets.map(({ path }) => path.map(({ irrep, copy }) => `${irrepName(irrep)}/${copy}`))).toEqual([
      ["3bar/1", "8/1"],
      ["6/1", "8/1"],
    ]);
    expect(paths.map(({ irrep }) => irrepName(irrep))).toEqual(["1", "8", "8", "10"]);
  });

  test("count the copies of a step in the path", () => {
    const octet = parseIrrep("8");
    const paths = couplingPaths([octet, octet, octet]).filter(({ irrep }) => irrep.p + irrep.q === 0);
    expect(paths.map(({ path }) => path.map(({ irrep, copy }) => `${irrepName(irrep)}/${copy}`))).toEqual([
      ["8/1", "1/1"],
      ["8/2", "1/1"],
    ]);
    for (const { irrep, multiplicity } of irrepMultiplicities([octet, octet, octet])) {
      const count = couplingPaths([octet, octet, octet]).filter((path) =>
        sameIrrep(path.irrep, irrep),
      ).length;
      expect(count).toBe(multiplicity);
    }
  });

  test("of one irrep have one path without steps, of none are refused", () => {
    expect(couplingPaths([parseIrrep("8")])).toEqual([{ irrep: { p: 1, q: 1 }, path: [] }]);
    expect(() => couplingPaths([])).toThrow(
      new InputError("couplingPaths: irreps: expected one irrep or more, got []."),
    );
  });

  test("are refused where they would explode", () => {
    expect(() => couplingPaths(Array.from({ length: 12 }, () => parseIrrep("8")))).toThrow(LimitError);
    expect(() => decomposeProduct({ p: 301, q: 0 }, { p: 1, q: 1 })).toThrow(
      new LimitError("decomposeProduct: left: expected p + q <= 300, got (301, 0). Choose a smaller irrep."),
    );
  });
});
