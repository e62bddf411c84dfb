import { createHash } from "node:crypto";
import { describe, expect, test } from "vitest";
import { complete } from "../../src/completion/complete.js";
import { InputError, TableError } from "../../src/errors.js";
import { couplet } from "../../src/gen/couplet.js";
import { parseIrrep } from "../../src/su3/irrep.js";
import { isoscalarTable } from "../../src/su3/isoscalar-factors.js";
import { canonicalJson } from "../../src/tables/canonical-json.js";
import { decodeDecays } from "../../src/tables/decode-decays.js";
import { decodeFactors } from "../../src/tables/decode-factors.js";
import { DECAYS_SCHEMA_MINOR, encodeDecays } from "../../src/tables/encode-decays.js";
import { encodeFactors, FACTORS_SCHEMA_MINOR } from "../../src/tables/encode-factors.js";
import { checkSeal, digestOf, sealBytes } from "../../src/tables/sealed-bytes.js";
import { fitOf } from "../chain/run.js";

import v1 = couplet.v1;

const STUDY = `couplet: 1
title: small
decays:
  - { from: baryon-decuplet, to: [baryon-octet, pseudoscalar-octet], L: 1, model: a }
measurements:
  - { width: Delta(1232) -> N pi, value: 117 +- 3 MeV, source: invented }
  - { fraction: Sigma(1385) -> Lambda pi, value: 87 +- 2 %, source: invented }
  - { fraction: Sigma(1385) -> Sigma pi, value: 12 +- 2 %, source: invented }
  - { fraction: Xi(1530) -> Xi pi, value: 1, source: invented, use: table }
`;
const decays = encodeDecays(complete(fitOf(STUDY), 0));
const factors = encodeFactors(isoscalarTable(parseIrrep("8"), parseIrrep("8")), { states: false });

/** The table with something changed in its message, sealed again: what another writer could have made. */
function rewritten(bytes: Uint8Array, change: (tables: v1.DecayTables) => void): Uint8Array {
  const tables = v1.DecayTables.decode(bytes);
  change(tables);
  tables.sha256 = new Uint8Array();
  return sealBytes(v1.DecayTables.encode({ ...tables, sha256: null }).finish());
}

const thrown = (read: () => unknown): unknown => {
  try {
    return read();
  } catch (error) {
    return error;
  }
};

describe("a sealed file", () => {
  test("ends in the SHA-256 of every byte before its last field", () => {
    for (const bytes of [decays, factors]) {
      const body = bytes.subarray(0, bytes.length - 35);
      expect([...bytes.subarray(body.length, body.length + 3)]).toEqual([0xc2, 0x3e, 32]);
      expect(digestOf(bytes)).toBe(createHash("sha256").update(body).digest("hex"));
    }
  });

  test("says what it is, by its first field", () => {
    expect(checkSeal(decays, "t.pb")).toBe("couplet.v1.DecayTables");
    expect(checkSeal(factors, "t.pb")).toBe("couplet.v1.FactorTable");
  });

  test("has its digest in the message, so that any protobuf reader finds it", () => {
    const read = v1.DecayTables.decode(decays);
    expect(Buffer.from(read.sha256 as Uint8Array).toString("hex")).toBe(digestOf(decays));
  });

  test("has the same bytes when it is made again", () => {
    expect(Buffer.from(encodeDecays(complete(fitOf(STUDY), 0))).equals(Buffer.from(decays))).toBe(true);
    const again = encodeFactors(isoscalarTable(parseIrrep("8"), parseIrrep("8")), { states: false });
    expect(Buffer.from(again).equals(Buffer.from(factors))).toBe(true);
  });
});

describe("a reader refuses", () => {
  test("a table of a newer schema, and says what to do", () => {
    const newer = rewritten(decays, (tables) => {
      tables.header!.schemaMinor = DECAYS_SCHEMA_MINOR + 1;
    });
    expect(thrown(() => decodeDecays(newer, "t.pb"))).toEqual(
      new TableError(
        `t.pb: expected schema version 1.${DECAYS_SCHEMA_MINOR} or older, got 1.${DECAYS_SCHEMA_MINOR + 1}. Read it with a newer Couplet.`,
      ),
    );
    const table = v1.FactorTable.decode(factors);
    const newerFactors = sealBytes(
      v1.FactorTable.encode({ ...table, schemaMinor: FACTORS_SCHEMA_MINOR + 1, sha256: null }).finish(),
    );
    expect(thrown(() => decodeFactors(newerFactors, "t.pb"))).toEqual(
      new TableError(
        `t.pb: expected schema version 1.${FACTORS_SCHEMA_MINOR} or older, got 1.${FACTORS_SCHEMA_MINOR + 1}. Read it with a newer Couplet.`,
      ),
    );
  });

  test("a table without a header, or without the version in it", () => {
    const message =
      "t.pb: expected a header with the schema version, got a table without one. The file was written by something else; write it again.";
    const bare = rewritten(decays, (tables) => {
      Object.assign(tables, { header: null });
    });
    expect(thrown(() => decodeDecays(bare, "t.pb"))).toEqual(new TableError(message));
    const table = v1.FactorTable.decode(factors);
    const unversioned = sealBytes(
      v1.FactorTable.encode({ ...table, schemaMinor: null, sha256: null }).finish(),
    );
    expect(thrown(() => decodeFactors(unversioned, "t.pb"))).toEqual(new TableError(message));
  });

  test("a kind of table it does not know, if it is whole", () => {
    const kind = "couplet.v2.DecayTables";
    const whole = sealBytes(Buffer.concat([Buffer.from([0x0a, kind.length]), Buffer.from(kind)]));
    expect(thrown(() => checkSeal(whole, "t.pb"))).toEqual(
      new TableError(
        "t.pb: expected one of couplet.v1.CouplingTables, couplet.v1.DecayTables, couplet.v1.FactorTable, got a table of another kind. Read it with a newer Couplet.",
      ),
    );
    expect(thrown(() => checkSeal(whole.subarray(1), "t.pb"))).toBeInstanceOf(InputError);
  });

  test("a convention, and a rule for copies, that it does not know", () => {
    const other = rewritten(decays, (tables) => {
      tables.header!.convention = "another-v9";
    });
    expect(thrown(() => decodeDecays(other, "t.pb"))).toEqual(
      new TableError(
        't.pb: expected phase convention deswart-v1, got "another-v9". Read it with a newer Couplet.',
      ),
    );
    const table = v1.FactorTable.decode(factors);
    const ruled = sealBytes(
      v1.FactorTable.encode({ ...table, multiplicityRule: "another-v9", sha256: null }).finish(),
    );
    expect(thrown(() => decodeFactors(ruled, "t.pb"))).toEqual(
      new TableError(
        't.pb: expected copies by exchange-then-first-channels-v1, got "another-v9". Read it with a newer Couplet.',
      ),
    );
  });

  test("rows that do not add up, though the digest is right", () => {
    const other = rewritten(decays, (tables) => {
      tables.parents[0]!.rows[0]!.partsPerBillion = 999_999_999;
    });
    expect(thrown(() => decodeDecays(other, "t.pb"))).toEqual(
      new TableError(
        "t.pb: Delta(1232)++: expected rows that add up to 1000000000 parts, got 999999999. The file was written by something else; write it again.",
      ),
    );
  });

  test("another table than the one it was asked for", () => {
    expect(thrown(() => decodeDecays(factors, "t.pb"))).toEqual(
      new InputError(
        "t.pb: expected couplet.v1.DecayTables, got couplet.v1.FactorTable. Give a file of the kind expected.",
      ),
    );
  });

  test("bytes that are sealed but no message", () => {
    const body = decays.subarray(0, 40);
    const error = thrown(() => decodeDecays(sealBytes(body), "t.pb"));
    expect(error).toBeInstanceOf(TableError);
    expect((error as Error).message).toMatch(
      /^t\.pb: expected a message couplet\.v1\.DecayTables, got bytes that are none \(.*\)\. The file was written by something else; write it again\.$/,
    );
  });

  test("a file that is not ours at all", () => {
    const message = (bytes: number) =>
      `t.pb: expected a table file written by Couplet, got something else (${bytes} bytes). Give a .pb file that \`couplet tables\`, \`couplet couplings --out\` or \`couplet factors --out\` wrote.`;
    expect(thrown(() => checkSeal(Buffer.from("hello"), "t.pb"))).toEqual(new InputError(message(5)));
    expect(thrown(() => checkSeal(new Uint8Array(), "t.pb"))).toEqual(new InputError(message(0)));
  });
});

describe("canonical JSON", () => {
  const table = isoscalarTable(parseIrrep("8"), parseIrrep("8"));
  const json = canonicalJson("couplet.v1.FactorTable", v1.FactorTable.decode(factors)) as {
    left: unknown;
    right: unknown;
    convention: string;
    multiplicityRule: string;
    factors: Record<string, unknown>[];
  };

  test("of factors has every label, zeros included, and exact numbers as decimal text", () => {
    expect(json.left).toEqual({ p: 1, q: 1 });
    expect(json.right).toEqual({ p: 1, q: 1 });
    expect([json.convention, json.multiplicityRule]).toEqual([
      "deswart-v1",
      "exchange-then-first-channels-v1",
    ]);
    // The singlet: the first printed block of the Particle Data Group's isoscalar factors 8 x 8, N Kbar to 1 (memory).
    expect(json.factors[0]).toEqual({
      irrep: { p: 0, q: 0 },
      copy: 1,
      threeY: 0,
      twoI: 0,
      threeY1: 3,
      twoI1: 1,
      threeY2: -3,
      twoI2: 1,
      value: { sign: 1, numerator: "1", denominator: "4", value: 0.5 },
    });
    const labels = ["irrep", "copy", "threeY", "twoI", "threeY1", "twoI1", "threeY2", "twoI2", "value"];
    for (const factor of json.factors) expect(Object.keys(factor)).toEqual(labels);
  });

  test("of factors is the whole table, in its order", () => {
    expect(json.factors.length).toBe([...table.factors()].length);
  });

  test("of decays prints a fraction, a charge and a momentum of 0", () => {
    const { parents } = canonicalJson("couplet.v1.DecayTables", v1.DecayTables.decode(decays)) as {
      parents: { hadron: Record<string, unknown>; rows: Record<string, unknown>[] }[];
    };
    const neutral = parents.find(({ hadron }) => hadron["name"] === "Delta(1232)0")!;
    expect(neutral.hadron["charge"]).toBe(0);
    const closed = neutral.rows.find(({ id }) => id === "Delta(1232)0 -> Sigma0 K0")!;
    expect([closed["partsPerBillion"], closed["momentum"]]).toEqual([0, 0]);
  });
});
