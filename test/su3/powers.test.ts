import { describe, expect, test } from "vitest";
import { InputError, LimitError } from "../../src/errors.js";
import { type Irrep, irrepDimension, irrepName, parseIrrep } from "../../src/su3/irrep.js";
import { antisymmetricPower, symmetricPower } from "../../src/su3/powers.js";
import { decomposeProduct, type SeriesEntry } from "../../src/su3/product.js";
import { exchangeMatrix } from "../../src/su3/symmetries.js";
import { irrepsUpTo } from "../support/irreps-up-to.js";

function text(series: readonly SeriesEntry[]): string {
  return series
    .map(({ irrep, multiplicity }) => (multiplicity > 1 ? `${multiplicity}*` : "") + irrepName(irrep))
    .join(" + ");
}

function size(series: readonly SeriesEntry[]): number {
  return series.reduce((sum, { irrep, multiplicity }) => sum + multiplicity * irrepDimension(irrep), 0);
}

/** Multiplicities as signed counts by name. */
function counts(...parts: [number, readonly SeriesEntry[]][]): Map<string, number> {
  const total = new Map<string, number>();
  for (const [sign, series] of parts) {
    for (const { irrep, multiplicity } of series) {
      const name = `${irrep.p},${irrep.q}`;
      const count = (total.get(name) ?? 0) + sign * multiplicity;
      if (count === 0) total.delete(name);
      else total.set(name, count);
    }
  }
  return total;
}

function timesIrrep(series: readonly SeriesEntry[], irrep: Irrep): SeriesEntry[] {
  return series.flatMap((entry) =>
    decomposeProduct(entry.irrep, irrep).map((part) => ({
      irrep: part.irrep,
      multiplicity: part.multiplicity * entry.multiplicity,
    })),
  );
}

describe("symmetric and antisymmetric powers", () => {
  test("of the octet are those of the literature", () => {
    const octet = parseIrrep("8");
    expect(text(symmetricPower(octet, 2))).toBe("1 + 8 + 27");
    expect(text(antisymmetricPower(octet, 2))).toBe("8 + 10 + 10bar");
    expect(text(symmetricPower(octet, 3))).toBe("1 + 8 + 10 + 10bar + 27 + 64");
    expect(text(antisymmetricPower(octet, 3))).toBe("1 + 8 + 10 + 10bar + 27");
    expect(text(antisymmetricPower(octet, 8))).toBe("1");
    expect(antisymmetricPower(octet, 9)).toEqual([]);
    expect(text(symmetricPower(parseIrrep("3"), 4))).toBe("15(4,0)");
    expect(text(antisymmetricPower(parseIrrep("3"), 2))).toBe("3bar");
  });

  test("have binomial dimensions, and two make up the square", () => {
    for (const irrep of irrepsUpTo(3)) {
      const d = irrepDimension(irrep);
      expect(size(symmetricPower(irrep, 2))).toBe((d * (d + 1)) / 2);
      expect(size(antisymmetricPower(irrep, 2))).toBe((d * (d - 1)) / 2);
      expect(size(symmetricPower(irrep, 3))).toBe((d * (d + 1) * (d + 2)) / 6);
      const square = counts([1, symmetricPower(irrep, 2)], [1, antisymmetricPower(irrep, 2)]);
      expect(square).toEqual(counts([1, decomposeProduct(irrep, irrep)]));
    }
  });

  test("alternate to zero: S3 - S2 x R + R x A2 - A3 = 0", () => {
    for (const irrep of irrepsUpTo(2)) {
      const sum = counts(
        [1, symmetricPower(irrep, 3)],
        [-1, timesIrrep(symmetricPower(irrep, 2), irrep)],
        [1, timesIrrep(antisymmetricPower(irrep, 2), irrep)],
        [-1, antisymmetricPower(irrep, 3)],
      );
      expect(sum.size).toBe(0);
    }
  });

  test("of two count the copies with exchange sign + and -", () => {
    for (const irrep of irrepsUpTo(3)) {
      for (const { irrep: into } of decomposeProduct(irrep, irrep)) {
        const signs = exchangeMatrix(irrep, irrep, into).map((row, i) => row[i]!.sign);
        const count = (series: readonly SeriesEntry[]) =>
          series.find((entry) => entry.irrep.p === into.p && entry.irrep.q === into.q)?.multiplicity ?? 0;
        expect(signs.filter((sign) => sign > 0).length).toBe(count(symmetricPower(irrep, 2)));
        expect(signs.filter((sign) => sign < 0).length).toBe(count(antisymmetricPower(irrep, 2)));
      }
    }
  });

  test("refuse powers below 1, and those too large to list", () => {
    expect(() => symmetricPower(parseIrrep("8"), 0)).toThrow(
      new InputError("symmetricPower: n: expected an integer >= 1, got 0."),
    );
    expect(() => symmetricPower(parseIrrep("27"), 10)).toThrow(
      new LimitError(
        "symmetricPower: expected at most 1000000 states, got 254186856 in power 10 of 27. Choose a smaller power.",
      ),
    );
  });
});
