import { describe, expect, test } from "vitest";
import { InputError, LimitError } from "../../src/errors.js";
import { addRational, rational } from "../../src/exact/rational.js";
import {
  equalRoots,
  formatRoot,
  negateRoot,
  rootToNumber,
  type SignedRoot,
  signedSquare,
  ZERO_ROOT,
} from "../../src/exact/signed-root.js";
import { conjugate, type Irrep, irrepName, parseIrrep, sameIrrep } from "../../src/su3/irrep.js";
import {
  type IsoscalarTable,
  isoscalarFactor,
  isoscalarTable,
  valueAt,
} from "../../src/su3/isoscalar-factors.js";
import { irrepsUpTo } from "../support/irreps-up-to.js";
import { scalarProductOfRoots } from "../support/sum-of-roots.js";

/** The square matrices of all blocks of a table: a row for each copy, a column for each channel. */
function blocksOf(table: IsoscalarTable): SignedRoot[][][] {
  const columns = table.columns();
  const blocks = new Map<string, SignedRoot[][]>();
  for (const { threeY, twoI, start, channels } of columns.segments) {
    const key = `${threeY},${twoI}`;
    const rows = blocks.get(key) ?? [];
    rows.push(channels.map((_, c) => valueAt(columns, start + c)));
    blocks.set(key, rows);
  }
  return [...blocks.values()];
}

function transposed(rows: readonly SignedRoot[][]): SignedRoot[][] {
  return rows[0]!.map((_, c) => rows.map((row) => row[c]!));
}

/** Every product of two rows, as text: 1 on the diagonal and 0 elsewhere for an orthonormal matrix. */
function isOrthonormal(rows: readonly SignedRoot[][]): boolean {
  return rows.every((row, i) =>
    rows.slice(i).every((other, j) => formatRoot(scalarProductOfRoots(row, other)) === (j === 0 ? "1" : "0")),
  );
}

const octet = parseIrrep("8");
const irreps = irrepsUpTo(3);
const pairs = irreps.flatMap((left) => irreps.map((right) => [left, right] as const));

describe("tables of all products with p + q <= 3", () => {
  const tables = pairs.map(([left, right]) => isoscalarTable(left, right));

  test("have square blocks with exactly orthonormal rows and columns", () => {
    for (const table of tables) {
      for (const rows of blocksOf(table)) {
        expect(rows.length).toBe(rows[0]!.length);
        expect(
          isOrthonormal(rows) && isOrthonormal(transposed(rows)),
          `${irrepName(table.left)} x ${irrepName(table.right)}`,
        ).toBe(true);
      }
    }
  });

  test("have a positive first factor in the multiplet of largest isospin", () => {
    for (const table of tables) {
      for (const { irrep, multiplicity } of table.series) {
        const leading = { threeY: irrep.p - irrep.q, twoI: irrep.p + irrep.q };
        const channels = [...table.channels(leading)].sort((a, b) => b.twoI1 - a.twoI1 || b.twoI2 - a.twoI2);
        for (let copy = 1; copy <= multiplicity; copy++) {
          const values = channels.map((channel) => table.factor(irrep, copy, leading, channel));
          expect(values.find(({ sign }) => sign !== 0)!.sign).toBe(1);
        }
      }
    }
  });

  test("are symmetric under exchange of equal factors up to (-1)^(I1+I2-I), symmetric copies first", () => {
    for (const table of tables.filter(({ left, right }) => sameIrrep(left, right))) {
      for (const { irrep, multiplicity } of table.series) {
        const signs = Array.from({ length: multiplicity }, (_, i) => exchangeSign(table, irrep, i + 1));
        expect(signs, irrepName(irrep)).toEqual([...signs].sort((a, b) => b - a));
      }
    }
    const table = isoscalarTable(octet, octet);
    const signs = table.series.flatMap(({ irrep, multiplicity }) =>
      Array.from(
        { length: multiplicity },
        (_, i) => `${irrepName(irrep)} ${exchangeSign(table, irrep, i + 1)}`,
      ),
    );
    expect(signs).toEqual(["1 1", "8 1", "8 -1", "10 -1", "10bar -1", "27 1"]);
  });

  test("change by one sign in each irrep when unequal factors change places", () => {
    for (const table of tables) {
      const other = isoscalarTable(table.right, table.left);
      for (const { irrep, multiplicity } of table.series) {
        if (multiplicity > 1) continue;
        const ratios = new Set<number>();
        for (const { threeY, twoI, threeY1, twoI1, threeY2, twoI2, value, ...rest } of table.factors()) {
          if (!sameIrrep(rest.irrep, irrep)) continue;
          const swapped = { threeY1: threeY2, twoI1: twoI2, threeY2: threeY1, twoI2: twoI1 };
          const partner = other.factor(irrep, 1, { threeY, twoI }, swapped);
          expect(equalRoots(partner, value) || equalRoots(partner, negateRoot(value))).toBe(true);
          ratios.add(partner.sign * value.sign * alternating(twoI1 + twoI2 - twoI));
        }
        expect(ratios.size).toBe(1);
      }
    }
  });

  test("change by one sign in each irrep when all irreps are conjugated and every Y reversed", () => {
    for (const table of tables) {
      const other = isoscalarTable(conjugate(table.left), conjugate(table.right));
      for (const { irrep, multiplicity } of table.series) {
        if (multiplicity > 1) continue;
        const ratios = new Set<number>();
        for (const { threeY, twoI, threeY1, twoI1, threeY2, twoI2, value, ...rest } of table.factors()) {
          if (!sameIrrep(rest.irrep, irrep)) continue;
          const multiplet = { threeY: -threeY, twoI };
          const channel = { threeY1: -threeY1, twoI1, threeY2: -threeY2, twoI2 };
          const partner = other.factor(conjugate(irrep), 1, multiplet, channel);
          expect(equalRoots(partner, value) || equalRoots(partner, negateRoot(value))).toBe(true);
          ratios.add(partner.sign * value.sign * alternating(twoI1 + twoI2 - twoI));
        }
        expect(ratios.size).toBe(1);
      }
    }
  });

  test("give the same values for one irrep computed alone", () => {
    for (const table of tables) {
      for (const { irrep } of table.series) {
        const alone = [...isoscalarTable(table.left, table.right, { into: irrep }).factors()];
        expect(alone).toEqual([...table.factors()].filter((factor) => sameIrrep(factor.irrep, irrep)));
      }
    }
  });

  test("leave exact zeros out of the list and answer 0 for them", () => {
    for (const table of tables) {
      const columns = table.columns();
      const listed = [...table.factors()];
      expect(listed.every(({ value }) => value.sign !== 0)).toBe(true);
      expect(listed.length).toBe(columns.sign.filter((sign) => sign !== 0).length);
    }
    const table = isoscalarTable(octet, octet);
    const sigma = { threeY: 0, twoI: 2 };
    const sigmaPi = { threeY1: 0, twoI1: 2, threeY2: 0, twoI2: 2 };
    expect(table.factor(octet, 1, sigma, sigmaPi)).toEqual(ZERO_ROOT);
    expect(formatRoot(table.factor(octet, 2, sigma, sigmaPi))).toBe("sqrt(2/3)");
    // 86 channels, of which one vanishes in octet 1, four in octet 2 and one in the 27.
    expect([table.columns().sign.length, [...table.factors()].length]).toEqual([86, 80]);
  });

  test("come out in the order irrep, copy, Y, I, channel", () => {
    const table = isoscalarTable(octet, octet);
    const keys = [...table.factors()].map(({ irrep, copy, threeY, twoI, threeY1, twoI1, twoI2 }) => [
      table.series.findIndex((entry) => sameIrrep(entry.irrep, irrep)),
      copy,
      -threeY,
      -twoI,
      -threeY1,
      -twoI1,
      -twoI2,
    ]);
    expect(keys).toEqual(
      [...keys].sort((a, b) => a.map((value, i) => value - b[i]!).find((d) => d !== 0) ?? 0),
    );
    expect(table.channels({ threeY: 0, twoI: 2 })).toEqual([
      { threeY1: 3, twoI1: 1, threeY2: -3, twoI2: 1 },
      { threeY1: 0, twoI1: 2, threeY2: 0, twoI2: 2 },
      { threeY1: 0, twoI1: 2, threeY2: 0, twoI2: 0 },
      { threeY1: 0, twoI1: 0, threeY2: 0, twoI2: 2 },
      { threeY1: -3, twoI1: 1, threeY2: 3, twoI2: 1 },
    ]);
    expect(table.channels({ threeY: 9, twoI: 2 })).toEqual([]);
  });
});

describe("larger tables", () => {
  test("27 x 27 and 35 x 10bar have exactly orthonormal rows and columns", () => {
    for (const [left, right] of [
      ["27", "27"],
      ["35", "10bar"],
    ] as const) {
      const table = isoscalarTable(parseIrrep(left), parseIrrep(right));
      for (const rows of blocksOf(table))
        expect(isOrthonormal(rows) && isOrthonormal(transposed(rows))).toBe(true);
    }
  });

  test("squares that pass 2^53 still add up to 1 exactly: (6,6) in (6,6) x (6,6)", () => {
    const table = isoscalarTable({ p: 6, q: 6 }, { p: 6, q: 6 }, { into: { p: 6, q: 6 } });
    const columns = table.columns();
    expect(columns.big.size).toBeGreaterThan(0);
    for (const { start, channels } of columns.segments) {
      const squares = channels
        .map((_, c) => valueAt(columns, start + c))
        .map(({ num, den }) => rational(num, den));
      expect(squares.reduce(addRational, rational(0))).toEqual(rational(1));
    }
  });

  test("doubles are the correctly rounded factors, in the places of the columns", () => {
    for (const [left, right] of [
      [octet, octet],
      [
        { p: 3, q: 3 },
        { p: 4, q: 1 },
      ],
      [
        { p: 9, q: 0 },
        { p: 0, q: 9 },
      ],
    ] as const) {
      const table = isoscalarTable(left, right);
      const columns = table.columns();
      const doubles = table.doubles();
      expect(doubles.length).toBe(columns.sign.length);
      doubles.forEach((value, place) => {
        expect(value).toBe(rootToNumber(valueAt(columns, place)));
      });
    }
  });

  test("one factor by itself is the factor of the table", () => {
    const [decuplet, delta] = [parseIrrep("10"), { threeY: 3, twoI: 3 }];
    const channel = { threeY1: 3, twoI1: 3, threeY2: 0, twoI2: 2 };
    expect(formatRoot(isoscalarFactor(decuplet, octet, decuplet, 1, delta, channel))).toBe("sqrt(5/8)");
    const forbidden = { threeY1: 3, twoI1: 3, threeY2: 3, twoI2: 1 };
    expect(isoscalarFactor(decuplet, octet, decuplet, 1, delta, forbidden)).toEqual(ZERO_ROOT);
  });
});

describe("a table names what it is", () => {
  test("with its convention and its rule for copies", () => {
    const table = isoscalarTable(octet, octet);
    expect([table.convention, table.multiplicityRule]).toEqual([
      "deswart-v1",
      "exchange-then-first-channels-v1",
    ]);
  });
});

describe("bad requests are refused", () => {
  test("for irreps that are not in the product", () => {
    const message = 'expected one of 1, 8, 10, 10bar, 27, got "1,0".';
    expect(() => isoscalarTable(octet, octet, { into: parseIrrep("3") })).toThrow(
      new InputError(`isoscalarTable: into: ${message}`),
    );
    const table = isoscalarTable(octet, octet);
    const multiplet = { threeY: 1, twoI: 1 };
    const channel = { threeY1: 3, twoI1: 1, threeY2: 0, twoI2: 2 };
    expect(() => table.factor(parseIrrep("3"), 1, multiplet, channel)).toThrow(
      new InputError(`isoscalar factor: irrep: ${message}`),
    );
  });

  test("for copies that do not exist", () => {
    const table = isoscalarTable(octet, octet);
    const nucleon = { threeY: 3, twoI: 1 };
    const channel = { threeY1: 3, twoI1: 1, threeY2: 0, twoI2: 2 };
    expect(() => table.factor(octet, 3, nucleon, channel)).toThrow(
      new InputError(
        "isoscalar factor: copy of 8: expected an integer from 1 to 2, got 3. Copies count from 1.",
      ),
    );
  });

  test("for multiplets that do not exist", () => {
    const table = isoscalarTable(octet, octet);
    const channel = { threeY1: 3, twoI1: 3, threeY2: 0, twoI2: 2 };
    expect(() => table.factor(octet, 1, { threeY: 3, twoI: 1 }, channel)).toThrow(
      new InputError(
        "isoscalar factor: channel, first factor: expected (threeY, twoI) of an isospin multiplet of 8, got [3,3].",
      ),
    );
  });

  test("for tables too large to serve, before any work", () => {
    expect(() => isoscalarTable({ p: 40, q: 40 }, { p: 40, q: 40 })).toThrow(
      new LimitError(
        "isoscalarTable: expected at most 1000000 channels, got 2825761 or more in 68921 x 68921. Choose smaller irreps.",
      ),
    );
    expect(() => isoscalarTable({ p: 10, q: 10 }, { p: 10, q: 10 })).toThrow(
      /^isoscalarTable: expected at most 20000000 factors, got \d+ in 1331 x 1331\. Choose smaller irreps, or ask for one irrep with `into`\.$/,
    );
  });
});

/** The sign of a copy under exchange; fails where it is neither symmetric nor antisymmetric. */
function exchangeSign(table: IsoscalarTable, irrep: Irrep, copy: number): number {
  const signs = new Set<number>();
  for (const { threeY, twoI, threeY1, twoI1, threeY2, twoI2, value, ...rest } of table.factors()) {
    if (!sameIrrep(rest.irrep, irrep) || rest.copy !== copy) continue;
    const swapped = { threeY1: threeY2, twoI1: twoI2, threeY2: threeY1, twoI2: twoI1 };
    const partner = table.factor(irrep, copy, { threeY, twoI }, swapped);
    expect(signedSquare(partner).den).toBe(signedSquare(value).den);
    expect(partner.num).toBe(value.num);
    signs.add(partner.sign * value.sign * alternating(twoI1 + twoI2 - twoI));
  }
  expect(signs.size).toBe(1);
  return [...signs][0]!;
}

/** (-1)^(twoN/2) for an even integer. */
function alternating(twoN: number): number {
  return (twoN / 2) % 2 === 0 ? 1 : -1;
}
