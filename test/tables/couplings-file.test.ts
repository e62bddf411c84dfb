import { describe, expect, test } from "vitest";
import { couplingTable } from "../../src/completion/tabulate-couplings.js";
import { InputError, TableError } from "../../src/errors.js";
import { formatRoot, parseRoot } from "../../src/exact/signed-root.js";
import { couplet } from "../../src/gen/couplet.js";
import { isoscalarTable } from "../../src/su3/isoscalar-factors.js";
import { canonicalJson } from "../../src/tables/canonical-json.js";
import { decodeCouplings } from "../../src/tables/decode-couplings.js";
import { couplingsMessage, encodeCouplings } from "../../src/tables/encode-couplings.js";
import { encodeFactors } from "../../src/tables/encode-factors.js";
import { exactMessage, rootOfExact } from "../../src/tables/exact-message.js";
import { sealBytes } from "../../src/tables/sealed-bytes.js";
import { fitOf, MIXED_OCTET, TWENTY_SEVEN } from "../completion/coupling-studies.js";

const table = couplingTable(fitOf(MIXED_OCTET), 0);
const message = couplingsMessage(table);
const bytes = encodeCouplings(table);
const json = (value: object) => canonicalJson("couplet.v1.CouplingTables", value) as Record<string, unknown>;

describe("coupling table files", () => {
  test("what is read is what was written, digest apart", () => {
    const { sha256, ...read } = json(decodeCouplings(bytes, "couplings.pb"));
    expect(sha256).toMatch(/^[A-Za-z0-9+/]{43}=$/);
    expect(read).toEqual(json(message));
  });

  test("the same table gives the same bytes", () => {
    expect(encodeCouplings(couplingTable(fitOf(MIXED_OCTET), 0))).toEqual(bytes);
  });

  test("a row can be used without asking back", () => {
    const row = message.charged!.find(({ id }) => id === "Lambda(1718) -> p K-")!;
    expect(row.parent).toEqual({ name: "Lambda(1718)", mcNumber: null });
    expect(row.daughters).toEqual([
      { name: "p", mcNumber: 2212 },
      { name: "K-", mcNumber: -321 },
    ]);
    const octet = { p: 1, q: 1 };
    const [component] = row.components!;
    expect(component!.states).toEqual([
      { multiplet: "r", state: { irrep: octet, threeY: 0, twoI: 0, twoI3: 0 } },
      { multiplet: "baryon-octet", state: { irrep: octet, threeY: 3, twoI: 1, twoI3: 1 } },
      { multiplet: "pseudoscalar-octet", state: { irrep: octet, threeY: -3, twoI: 1, twoI3: -1 } },
    ]);
    expect(
      component!.terms!.map(({ reduced, irrep, copy, coefficient, matrixCoefficient }) => [
        reduced,
        irrep,
        copy,
        formatRoot(rootOfExact(coefficient)),
        formatRoot(rootOfExact(matrixCoefficient)),
      ]),
    ).toEqual([
      ["octet.g(8_1)", octet, 1, "sqrt(1/20)", "-sqrt(1/20)"],
      ["octet.g(8_2)", octet, 2, "1/2", "-1/2"],
    ]);
    expect(row).toMatchObject({
      twoL: 4,
      twoS: 1,
      convention: "deswart-v1",
      matrixConvention: "couplet-matrix-v1",
      unit: "1",
      model: "a",
      options: [
        { name: "n", value: 2, unit: "1" },
        { name: "referenceMomentumMeV", value: 1000, unit: "MeV" },
        { name: "referenceMassMeV", value: 1000, unit: "MeV" },
      ],
      minimum: 0,
      sign: Math.sign(row.value!.value!),
      matrixSign: -Math.sign(row.value!.value!),
    });
    expect(row.value!.plus).toBeGreaterThan(0);
  });

  test("the header names the Lagrangian and lays out its matrices", () => {
    const { lagrangian, octets, phases } = message.matrixConvention!;
    expect(lagrangian).toBe("L = sqrt2 { D Tr(Bbar {M, B}) + F Tr(Bbar [M, B]) }");
    const at = (symbol: string, row: number, column: number) =>
      octets!
        .find((matrix) => matrix.symbol === symbol)!
        .entries!.find((entry) => entry.row === row && entry.column === column)!
        .parts!.map(({ hadron, times }) => [hadron, formatRoot(rootOfExact(times))]);
    expect(at("B", 1, 3)).toEqual([["p", "1"]]);
    expect(at("B", 3, 1)).toEqual([["Xi-", "1"]]);
    expect(at("M", 2, 2)).toEqual([
      ["pi0", "-sqrt(1/2)"],
      ["eta", "sqrt(1/6)"],
    ]);
    expect(phases).toHaveLength(8);
  });

  test("fields of the matrix convention are absent where it is not defined, I3 by isospin", () => {
    const exotic = couplingsMessage(couplingTable(fitOf(TWENTY_SEVEN), 0));
    const [charged] = json(exotic)["charged"] as Record<string, unknown>[];
    expect(Object.keys(charged!).filter((key) => key.startsWith("matrix"))).toEqual([]);
    const isospin = json(message)["isospin"] as { components: { states: { state: object }[] }[] }[];
    expect(isospin[0]!.components[0]!.states.map(({ state }) => Object.keys(state))).toEqual([
      ["irrep", "threeY", "twoI"],
      ["irrep", "threeY", "twoI"],
      ["irrep", "threeY", "twoI"],
    ]);
  });

  test("exact numbers survive the way through a message", () => {
    for (const text of ["0", "1", "-1/2", "-sqrt(3/20)", "sqrt(123456789012345678901/2)"]) {
      expect(formatRoot(rootOfExact(exactMessage(parseRoot(text))))).toBe(text);
    }
    expect(formatRoot(rootOfExact(undefined))).toBe("0");
  });

  test("a changed byte, a cut file, another table and another file are refused", () => {
    for (const position of [40, bytes.length >> 1, bytes.length - 1]) {
      const changed = Uint8Array.from(bytes);
      changed[position]! ^= 1;
      expect(() => decodeCouplings(changed, "a.pb")).toThrow(
        new TableError(
          `a.pb: the file is damaged: its digest does not match its content (${bytes.length} bytes). Nothing was read; get a fresh copy or write the table again.`,
        ),
      );
    }
    expect(() => decodeCouplings(bytes.subarray(0, 100), "a.pb")).toThrow(TableError);
    const factors = encodeFactors(isoscalarTable({ p: 1, q: 0 }, { p: 1, q: 0 }), { states: false });
    expect(() => decodeCouplings(factors, "a.pb")).toThrow(
      new InputError(
        "a.pb: expected couplet.v1.CouplingTables, got couplet.v1.FactorTable. Give a file of the kind expected.",
      ),
    );
    expect(() => decodeCouplings(Buffer.from("couplet: 1"), "a.pb")).toThrow(InputError);
  });

  test("a newer schema and another convention are refused in words", () => {
    const written = (header: object) => {
      const changed = { ...message, header: { ...message.header, ...header } };
      return sealBytes(couplet.v1.CouplingTables.encode(changed).finish());
    };
    expect(() => decodeCouplings(written({ schemaMinor: 7 }), "a.pb")).toThrow(
      new TableError("a.pb: expected schema version 1.0 or older, got 1.7. Read it with a newer Couplet."),
    );
    expect(() => decodeCouplings(written({ convention: "u-spin" }), "a.pb")).toThrow(
      new TableError(
        'a.pb: expected phase convention deswart-v1, got "u-spin". Read it with a newer Couplet.',
      ),
    );
  });
});
