import { describe, expect, test } from "vitest";
import { complete } from "../../src/completion/complete.js";
import { couplingTable } from "../../src/completion/tabulate-couplings.js";
import { parseIrrep } from "../../src/su3/irrep.js";
import { isoscalarTable } from "../../src/su3/isoscalar-factors.js";
import { decodeCouplings } from "../../src/tables/decode-couplings.js";
import { decodeDecays } from "../../src/tables/decode-decays.js";
import { decodeFactors } from "../../src/tables/decode-factors.js";
import { encodeCouplings } from "../../src/tables/encode-couplings.js";
import { encodeDecays } from "../../src/tables/encode-decays.js";
import { encodeFactors } from "../../src/tables/encode-factors.js";
import type { TableKind } from "../../src/tables/sealed-bytes.js";
import { fitOf } from "../chain/run.js";
import { changedBytes, type Outcome, outcome } from "./damage.js";

/** The smallest study with a table worth the name: one member, one open decay. */
const fit = fitOf(`couplet: 1
title: small
multiplets:
  m:
    irrep: 10
    spinParity: 3/2+
    members: [{ name: Omega(2200), place: Omega, mass: 2200 MeV, width: sum }]
decays:
  - { from: m, to: [baryon-octet, pseudoscalar-octet], L: 1, model: a }
measurements:
  - { width: Omega(2200) -> Xi Kbar, value: 5 +- 1 MeV, source: invented }
`);

const ALL_OTHER_VALUES = Array.from({ length: 255 }, (_, k) => k + 1);
const ONE_BIT = Array.from({ length: 8 }, (_, k) => 1 << k);

const files: [TableKind, Uint8Array, (bytes: Uint8Array) => unknown, readonly number[]][] = [
  [
    "couplet.v1.FactorTable",
    encodeFactors(isoscalarTable(parseIrrep("3"), parseIrrep("3bar")), { states: false }),
    (bytes) => decodeFactors(bytes, "t.pb"),
    ALL_OTHER_VALUES,
  ],
  ["couplet.v1.DecayTables", encodeDecays(complete(fit, 0)), (bytes) => decodeDecays(bytes, "t.pb"), ONE_BIT],
  [
    "couplet.v1.CouplingTables",
    encodeCouplings(couplingTable(fit, 0)),
    (bytes) => decodeCouplings(bytes, "t.pb"),
    ONE_BIT,
  ],
];

describe.each(files)("a file of %s", (kind, bytes, read, values) => {
  // Tag, length and name of the kind: without them the file is not ours at all.
  const head = 2 + kind.length;

  test("is read as it is", () => {
    expect(outcome(read, bytes)).toBe("accepted");
    expect(bytes.length).toBeLessThan(12_000);
  });

  test(`is refused with any byte changed (${values.length} ways)`, () => {
    const wrong = new Set<string>();
    let count = 0;
    for (const { place, bytes: changed } of changedBytes(bytes, values)) {
      const expected: Outcome = place < head ? "not ours" : "damaged";
      const came = outcome(read, changed);
      if (came !== expected) wrong.add(`byte ${place}: ${came}`);
      count++;
    }
    expect([...wrong]).toEqual([]);
    expect(count).toBe(bytes.length * values.length);
  });

  test("is refused cut at any length, and with bytes behind its end", () => {
    for (let length = 0; length < bytes.length; length++) {
      const came = outcome(read, bytes.subarray(0, length));
      expect(came, `cut to ${length} bytes`).toBe(length < head ? "not ours" : "damaged");
    }
    expect(outcome(read, Buffer.concat([bytes, Buffer.from([0])]))).toBe("damaged");
    expect(outcome(read, Buffer.concat([bytes, bytes]))).toBe("damaged");
  });
});
