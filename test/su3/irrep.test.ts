import { describe, expect, test } from "vitest";
import { InputError, LimitError } from "../../src/errors.js";
import { formatRational } from "../../src/exact/rational.js";
import {
  casimir,
  conjugate,
  hasMultiplet,
  irrepDimension,
  irrepName,
  isospinMultiplets,
  parseIrrep,
  sameIrrep,
  triality,
} from "../../src/su3/irrep.js";
import { irrepsUpTo } from "../support/irreps-up-to.js";

describe("labels", () => {
  test("dimensions are those of the usual names", () => {
    const labels = [
      [1, 0],
      [1, 1],
      [3, 0],
      [0, 3],
      [2, 2],
      [2, 0],
      [0, 2],
      [2, 1],
      [4, 1],
      [3, 3],
    ] as const;
    expect(labels.map(([p, q]) => irrepDimension({ p, q }))).toEqual([3, 8, 10, 10, 27, 6, 6, 15, 35, 64]);
  });

  test("the Casimir is 4/3, 3, 6 and 8 for 3, 8, 10 and 27", () => {
    const names = ["3", "8", "10", "27", "1", "6"];
    expect(names.map((name) => formatRational(casimir(parseIrrep(name))))).toEqual([
      "4/3",
      "3",
      "6",
      "8",
      "0",
      "10/3",
    ]);
  });

  test("conjugation keeps dimension and Casimir, reverses triality, and is its own inverse", () => {
    for (const irrep of irrepsUpTo(12)) {
      const other = conjugate(irrep);
      expect(irrepDimension(other)).toBe(irrepDimension(irrep));
      expect(casimir(other)).toEqual(casimir(irrep));
      expect((triality(irrep) + triality(other)) % 3).toBe(0);
      expect(sameIrrep(conjugate(other), irrep)).toBe(true);
    }
  });

  test("isospin multiplets hold as many states as the dimension, each once, Y then I descending", () => {
    for (const irrep of irrepsUpTo(9)) {
      const multiplets = isospinMultiplets(irrep);
      expect(multiplets.reduce((sum, { twoI }) => sum + twoI + 1, 0)).toBe(irrepDimension(irrep));
      expect(multiplets.length).toBe((irrep.p + 1) * (irrep.q + 1));
      for (const [i, { threeY, twoI }] of multiplets.entries()) {
        expect(hasMultiplet(irrep, { threeY, twoI })).toBe(true);
        const next = multiplets[i + 1];
        if (next !== undefined)
          expect(threeY > next.threeY || (threeY === next.threeY && twoI > next.twoI)).toBe(true);
      }
    }
    expect(isospinMultiplets(parseIrrep("8"))).toEqual([
      { threeY: 3, twoI: 1 },
      { threeY: 0, twoI: 2 },
      { threeY: 0, twoI: 0 },
      { threeY: -3, twoI: 1 },
    ]);
  });

  test("no multiplet is found outside the list", () => {
    for (const irrep of irrepsUpTo(4)) {
      const listed = new Set(isospinMultiplets(irrep).map(({ threeY, twoI }) => `${threeY},${twoI}`));
      for (let threeY = -20; threeY <= 20; threeY++) {
        for (let twoI = -2; twoI <= 8; twoI++) {
          expect(hasMultiplet(irrep, { threeY, twoI })).toBe(listed.has(`${threeY},${twoI}`));
        }
      }
    }
  });
});

describe("names", () => {
  test("the usual names mean the usual irreps", () => {
    const names = ["1", "3", "3bar", "6", "6bar", "8", "10", "10bar", "27", "35", "64"];
    const labels = [
      [0, 0],
      [1, 0],
      [0, 1],
      [2, 0],
      [0, 2],
      [1, 1],
      [3, 0],
      [0, 3],
      [2, 2],
      [4, 1],
      [3, 3],
    ] as const;
    expect(names.map(parseIrrep)).toEqual(labels.map(([p, q]) => ({ p, q })));
  });

  test("every name reads back as its irrep, and so do labels", () => {
    for (const irrep of irrepsUpTo(40)) {
      expect(parseIrrep(irrepName(irrep))).toEqual(irrep);
      expect(parseIrrep(`${irrep.p},${irrep.q}`)).toEqual(irrep);
      expect(parseIrrep(`(${irrep.p}, ${irrep.q})`)).toEqual(irrep);
    }
  });

  test("names are bare unless the dimension is shared", () => {
    const labels = [
      [1, 1],
      [0, 3],
      [2, 1],
      [1, 2],
      [4, 0],
      [0, 4],
      [4, 1],
    ] as const;
    const names = ["8", "10bar", "15(2,1)", "15bar(1,2)", "15(4,0)", "15bar(0,4)", "35"];
    expect(labels.map(([p, q]) => irrepName({ p, q }))).toEqual(names);
  });

  test("a shared dimension is refused with the choices named", () => {
    expect(() => parseIrrep("15")).toThrow(
      new InputError(
        'parseIrrep: expected 15(2,1) or 15(4,0), got "15". Dimension 15 belongs to several irreps; write the labels.',
      ),
    );
    expect(() => parseIrrep("15bar")).toThrow(
      new InputError(
        'parseIrrep: expected 15bar(1,2) or 15bar(0,4), got "15bar". Dimension 15 belongs to several irreps; write the labels.',
      ),
    );
  });

  test("a dimension no irrep has is refused with the nearest", () => {
    expect(() => parseIrrep("7")).toThrow(
      new InputError('parseIrrep: expected the dimension of an irrep (the nearest are 6 and 8), got "7".'),
    );
    expect(() => parseIrrep("0")).toThrow(
      new InputError('parseIrrep: expected the dimension of an irrep (the nearest are 1), got "0".'),
    );
  });

  test("a bar on a self-conjugate irrep and contradicting labels are refused", () => {
    expect(() => parseIrrep("8bar")).toThrow(
      new InputError('parseIrrep: expected 8, which is its own conjugate, got "8bar".'),
    );
    expect(() => parseIrrep("15(1,2)")).toThrow(
      new InputError('parseIrrep: expected 15bar(1,2) for (1, 2), got "15(1,2)".'),
    );
  });

  test("other text is refused", () => {
    expect(() => parseIrrep("octet")).toThrow(
      new InputError('parseIrrep: expected a dimension such as 8, 10 or 10bar, or labels p,q, got "octet".'),
    );
    for (const text of ["", " ", "8-bar", "-8", "1.5", "1,1,1", "bar"]) {
      expect(() => parseIrrep(text), text).toThrow(InputError);
    }
  });
});

describe("bad labels", () => {
  test("are refused with the argument named", () => {
    expect(() => irrepDimension({ p: 1.5, q: 0 })).toThrow(
      new InputError(
        "irrepDimension: p: expected an integer >= 0, got 1.5. Label irreps by (p, q); the octet is (1, 1).",
      ),
    );
    expect(() => casimir({ p: 1, q: -1 })).toThrow(
      new InputError(
        "casimir: q: expected an integer >= 0, got -1. Label irreps by (p, q); the octet is (1, 1).",
      ),
    );
  });

  test("are refused where dimensions would no longer be exact", () => {
    expect(() => irrepDimension({ p: 100_000, q: 1 })).toThrow(
      new LimitError(
        "irrepDimension: expected p + q <= 100000, got (100000, 1). Dimensions beyond are not exact.",
      ),
    );
    expect(Number.isSafeInteger(irrepDimension({ p: 50_000, q: 50_000 }))).toBe(true);
  });
});
