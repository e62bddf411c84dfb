import { describe, expect, test } from "vitest";
import { InputError, TableError } from "../../src/errors.js";
import { couplet } from "../../src/gen/couplet.js";
import { isoscalarTable } from "../../src/su3/isoscalar-factors.js";
import { type Comparison, compareTables } from "../../src/tables/compare.js";
import { encodeFactors, factorsMessage } from "../../src/tables/encode-factors.js";
import { sealBytes } from "../../src/tables/sealed-bytes.js";

import v1 = couplet.v1;

const octet = { p: 1, q: 1 };
const octets = isoscalarTable(octet, octet);
const plain = factorsMessage(octets, { states: false });
const withStates = factorsMessage(octets, { states: true });

const file = (message: v1.FactorTable.$Properties, name: string) => ({
  bytes: sealBytes(v1.FactorTable.encode(message).finish()),
  file: name,
});

function compared(
  original: v1.FactorTable.$Properties,
  change: (table: v1.FactorTable.$Properties) => void,
): Comparison {
  const other = structuredClone(original);
  change(other);
  return compareTables(file(original, "a.pb"), file(other, "b.pb"));
}

/** <N pi | 8_1 N>: sqrt(9/20), the only one of its labels. */
const isNPi = ({ irrep, copy, ...f }: v1.IsoscalarFactor.$Properties) =>
  irrep!.p === 1 && irrep!.q === 1 && copy === 1 && f.threeY === 3 && f.threeY1 === 3 && f.twoI2 === 2;
const N_PI = "<Y1=1 I1=1/2; Y2=0 I2=1 | 8_1 Y=1 I=1/2>";
const text = (value: string) => ({ kind: "text", text: value });

describe("comparison of factor tables", () => {
  test("equal tables have no difference, in any order", () => {
    for (const table of [plain, withStates]) {
      const { changed, counted, items } = compared(table, ({ factors, states }) => {
        factors!.reverse();
        states!.reverse();
      });
      expect([items, changed, counted]).toEqual([[], 0, 0]);
    }
  });

  test("a changed coefficient is named by its irrep, copy and channel, with both exact values", () => {
    expect(plain.factors!.filter(isNPi)).toHaveLength(1);
    const { items, changed, counted } = compared(plain, ({ factors }) => {
      const { value } = factors!.find(isNPi)!;
      Object.assign(value!, { sign: -1, denominator: "21" });
    });
    expect(items).toEqual([
      {
        kind: "factor",
        name: N_PI,
        status: "changed",
        changes: [{ path: "value", from: text("sqrt(9/20)"), to: text("-sqrt(3/7)"), counts: true }],
      },
    ]);
    expect([changed, counted]).toEqual([1, 1]);
  });

  test("another writing of the same number is no change", () => {
    const { changed } = compared(plain, ({ factors }) => {
      Object.assign(factors!.find(isNPi)!.value!, { numerator: "18", denominator: "40" });
    });
    expect(changed).toBe(0);
  });

  test("a coefficient that one table leaves out is 0 there", () => {
    const remove = (table: v1.FactorTable.$Properties) => {
      table.factors = table.factors!.filter((factor) => !isNPi(factor));
    };
    const removed = compared(plain, remove);
    expect(removed.items.map(({ kind, name, status }) => [kind, name, status])).toEqual([
      ["factor", N_PI, "changed"],
    ]);
    expect(removed.items[0]!.changes[0]).toMatchObject({ from: text("sqrt(9/20)"), to: text("0") });
    const less = structuredClone(plain);
    remove(less);
    const { items } = compareTables(file(less, "a.pb"), file(plain, "b.pb"));
    expect(items[0]!.changes[0]).toMatchObject({ from: text("0"), to: text("sqrt(9/20)") });
  });

  test("a copy that only one table has is one difference, not its coefficients", () => {
    const without = (p: number, copy: number) => (table: v1.FactorTable.$Properties) => {
      table.factors = table.factors!.filter(({ irrep, copy: k }) => irrep!.p !== p || k !== copy);
    };
    const gone = compared(plain, without(2, 1));
    expect(gone.items).toEqual([{ kind: "irrep", name: "27", status: "vanished", changes: [] }]);
    expect([gone.changed, gone.counted]).toEqual([1, 1]);
    const less = structuredClone(plain);
    without(1, 2)(less);
    expect(compareTables(file(less, "a.pb"), file(plain, "b.pb")).items).toEqual([
      { kind: "irrep", name: "8_2", status: "new", changes: [] },
    ]);
  });

  test("coefficients between states are compared where both tables have them", () => {
    const { items } = compared(withStates, ({ states }) => {
      const found = states!.find(
        ({ product, left, right }) =>
          product!.irrep!.p === 2 && product!.threeY === 6 && left!.twoI3 === 1 && right!.twoI3 === -1,
      );
      found!.value!.sign! *= -1;
    });
    expect(items.map(({ kind, name }) => [kind, name])).toEqual([
      ["state coefficient", "<Y1=1 I1=1/2 m1=1/2; Y2=1 I2=1/2 m2=-1/2 | 27 Y=2 I=1 m=0>"],
    ]);
    expect(compareTables(file(plain, "a.pb"), file(withStates, "b.pb")).items).toEqual([
      { kind: "coefficients between states", name: "all", status: "new", changes: [] },
    ]);
  });

  test("another convention or rule is told, before all else; what wrote the table does not count", () => {
    const { items, counted } = compared(plain, (table) => {
      table.convention = "another-convention";
      table.multiplicityRule = "another-rule";
      table.producer = "couplet 9.9.9";
      table.factors = table.factors!.filter((factor) => !isNPi(factor));
    });
    expect(items.map(({ kind }) => kind)).toEqual(["header", "factor"]);
    expect(items[0]!.changes.map(({ path, counts }) => [path, counts])).toEqual([
      ["convention", true],
      ["multiplicityRule", true],
      ["producer", false],
    ]);
    expect(counted).toBe(3);
  });

  test("tables of different products, and newer ones, are refused", () => {
    const other = encodeFactors(isoscalarTable({ p: 3, q: 0 }, octet), { states: false });
    expect(() => compareTables(file(plain, "a.pb"), { bytes: other, file: "b.pb" })).toThrow(
      new InputError(
        "b.pb: expected factors of 8 x 8 as in the first table, got those of 10 x 8. Compare tables of one product, with its factors in one order.",
      ),
    );
    expect(() => compared(plain, (table) => (table.schemaMinor = 1))).toThrow(
      new TableError("b.pb: expected schema version 1.0 or older, got 1.1. Read it with a newer Couplet."),
    );
  });
});
