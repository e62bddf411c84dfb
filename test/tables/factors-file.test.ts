import { existsSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, describe, expect, test } from "vitest";
import { InputError, LimitError } from "../../src/errors.js";
import { formatRoot, rootToNumber } from "../../src/exact/signed-root.js";
import { parseIrrep } from "../../src/su3/irrep.js";
import { isoscalarTable } from "../../src/su3/isoscalar-factors.js";
import { canonicalJson } from "../../src/tables/canonical-json.js";
import { decodeFactors } from "../../src/tables/decode-factors.js";
import {
  encodedPieces,
  encodeFactors,
  factorPieces,
  factorsMessage,
  stateCoefficients,
} from "../../src/tables/encode-factors.js";
import { rootOfExact } from "../../src/tables/exact-message.js";
import { jsonPieces } from "../../src/tables/json-pieces.js";
import { sealedPieces } from "../../src/tables/sealed-bytes.js";
import { writeWholePieces } from "../../src/tables/whole-file.js";

const folder = mkdtempSync(join(tmpdir(), "couplet-factors-"));
afterAll(() => rmSync(folder, { recursive: true }));

const [octet, twentySeven, sixtyFour] = ["8", "27", "64"].map(parseIrrep) as [
  { p: number; q: number },
  { p: number; q: number },
  { p: number; q: number },
];

describe("a factor table in pieces", () => {
  test("joins to the bytes of the table made at once, with every factor in its place", () => {
    const table = isoscalarTable(sixtyFour, twentySeven);
    const pieces = [...sealedPieces(encodedPieces(table, { states: false }))];
    expect(pieces.length).toBeGreaterThan(4);
    const bytes = Buffer.concat(pieces);
    expect(bytes.equals(encodeFactors(table, { states: false }))).toBe(true);
    const read = decodeFactors(bytes, "t.pb").factors.map(({ value, ...labels }) => ({
      ...labels,
      value: formatRoot(rootOfExact(value)),
      double: value?.value,
    }));
    const computed = [...table.factors()].map(({ value, ...labels }) => ({
      ...labels,
      value: formatRoot(value),
      double: rootToNumber(value),
    }));
    expect(JSON.parse(JSON.stringify(read))).toEqual(computed);
  });

  test("joins to the canonical JSON of the whole, with and without coefficients between states", () => {
    for (const right of [octet, twentySeven]) {
      for (const states of [false, true]) {
        const table = isoscalarTable(octet, right);
        const whole = canonicalJson("couplet.v1.FactorTable", factorsMessage(table, { states }));
        const text = [...jsonPieces("couplet.v1.FactorTable", factorPieces(table, { states }))].join("");
        expect(text).toBe(`${JSON.stringify(whole, null, 2)}\n`);
      }
    }
  });

  test("is refused beforehand where the coefficients between states would be too many", () => {
    const table = isoscalarTable({ p: 5, q: 5 }, { p: 5, q: 5 });
    expect(() => stateCoefficients(table).next()).toThrow(LimitError);
    expect(() => stateCoefficients(table).next()).toThrow(
      /^stateCoefficients: expected at most 5000000 coefficients between states, got \d{7,} in 216 x 216\. Ask for isoscalar factors alone, or for one irrep\.$/,
    );
  });
});

describe("a file written in pieces", () => {
  const pieces = [Buffer.from("one "), Buffer.from("two")];

  test("stands whole in its place, and its temporary name is told before and after", () => {
    const path = join(folder, "new", "a.txt");
    const told: [string, boolean][] = [];
    expect(writeWholePieces(path, pieces, (beside, exists) => told.push([beside, exists]))).toBe(7);
    expect(readFileSync(path, "utf8")).toBe("one two");
    expect(told.map(([, exists]) => exists)).toEqual([true, false]);
    expect(told[0]![0]).toContain("a.txt");
    expect(told[1]![0]).toBe(told[0]![0]);
    expect(readdirSync(join(folder, "new"))).toEqual(["a.txt"]);
  });

  test("leaves the old file and nothing else when its pieces fail, and passes their error on", () => {
    const path = join(folder, "b.txt");
    writeFileSync(path, "old");
    function* failing() {
      yield pieces[0]!;
      throw new LimitError("too much");
    }
    expect(() => writeWholePieces(path, failing())).toThrow(new LimitError("too much"));
    expect(readFileSync(path, "utf8")).toBe("old");
    expect(readdirSync(folder).filter((name) => name.includes("b.txt"))).toEqual(["b.txt"]);
  });

  test("says why it cannot be written, and removes the folders it made", () => {
    writeFileSync(join(folder, "plain"), "");
    expect(() => writeWholePieces(join(folder, "plain", "c", "d.txt"), pieces)).toThrow(InputError);
    expect(() => writeWholePieces("", pieces)).toThrow(
      new InputError("expected the name of a file to write, got an empty name."),
    );
    expect(existsSync(join(folder, "plain", "c"))).toBe(false);
  });
});
