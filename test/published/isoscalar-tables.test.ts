import { describe, expect, test } from "vitest";
import { TableError } from "../../src/errors.js";
import { addRational, rational } from "../../src/exact/rational.js";
import { formatRoot, type SignedRoot } from "../../src/exact/signed-root.js";
import { publishedIsoscalarTables } from "../../src/published/isoscalar-tables.js";
import octetOfDecuplet from "../../src/published/pdg-isoscalar-8-from-10x8.json";
import { type PublishedTable, readPublishedTable } from "../../src/published/published-table.js";
import { isoscalarTable } from "../../src/su3/isoscalar-factors.js";

const tables = publishedIsoscalarTables();

function magnitude(root: SignedRoot): string {
  return formatRoot({ ...root, sign: root.sign === 0 ? 0 : 1 });
}

function computedRows(table: PublishedTable): string[] {
  const engine = isoscalarTable(table.left, table.right, { into: table.irrep });
  return table.rows.map((row) => {
    const value = engine.factor(table.irrep, table.copy, row, row);
    return `${row.decay}: ${table.signs ? formatRoot(value) : magnitude(value)}`;
  });
}

describe("tables found by others", () => {
  test("are the six printed blocks of 75 values, four of the quark model, and three for regression", () => {
    const printed = tables.filter(({ kind, signs }) => kind === "published" && signs);
    expect(printed.length).toBe(6);
    expect(printed.reduce((sum, { rows }) => sum + rows.length, 0)).toBe(75);
    expect(tables.filter(({ signs }) => !signs).reduce((sum, { rows }) => sum + rows.length, 0)).toBe(19);
    expect(tables.filter(({ kind }) => kind === "regression").length).toBe(3);
  });

  for (const table of tables) {
    test(`${table.name} is reproduced value by value`, () => {
      expect(computedRows(table)).toEqual(
        table.rows.map(({ decay, value }) => `${decay}: ${formatRoot(value)}`),
      );
    });
  }

  test("list every channel of their multiplets, so that the squares add up to one", () => {
    for (const { name, rows } of tables) {
      const sums = new Map<string, ReturnType<typeof rational>>();
      for (const { threeY, twoI, value } of rows) {
        const key = `${name} ${threeY},${twoI}`;
        sums.set(key, addRational(sums.get(key) ?? rational(0), rational(value.num, value.den)));
      }
      for (const [key, sum] of sums) expect(sum, key).toEqual(rational(1));
    }
  });

  test("say where they come from", () => {
    for (const { source, provenance, kind } of tables) {
      expect(source.authors.length * source.title.length * source.journal.length).toBeGreaterThan(0);
      expect(provenance === "computed").toBe(kind === "regression");
    }
  });
});

describe("a table without its origin is refused", () => {
  for (const key of ["source", "provenance", "convention", "transcribed", "errata", "rows"] as const) {
    test(`when ${key} is missing`, () => {
      expect(() => readPublishedTable("t.json", { ...octetOfDecuplet, [key]: undefined })).toThrow(
        TableError,
      );
    });
  }

  test("with the file, the key and what was expected", () => {
    expect(() => readPublishedTable("t.json", { ...octetOfDecuplet, provenance: "rumour" })).toThrow(
      new TableError(
        't.json: provenance: expected one of read, memory, common practice, computed, got "rumour".',
      ),
    );
    expect(() => readPublishedTable("t.json", { ...octetOfDecuplet, convention: "" })).toThrow(
      new TableError('t.json: convention: expected a string, got "".'),
    );
    const rows = [{ ...octetOfDecuplet.rows[0], value: 0.5 }];
    expect(() => readPublishedTable("t.json", { ...octetOfDecuplet, rows })).toThrow(
      new TableError("t.json: rows[0].value: expected a string, got 0.5."),
    );
  });
});
