import { mkdtempSync, readFileSync, renameSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, describe, expect, test } from "vitest";
import { InputError, TableError } from "../../src/errors.js";
import { couplet } from "../../src/gen/couplet.js";
import { parseIrrep } from "../../src/su3/irrep.js";
import { isoscalarTable } from "../../src/su3/isoscalar-factors.js";
import { decodeDecays } from "../../src/tables/decode-decays.js";
import { decayPieces, decaysMessage, encodeDecays } from "../../src/tables/encode-decays.js";
import { encodeFactors } from "../../src/tables/encode-factors.js";
import { sealBytes, sealedPieces } from "../../src/tables/sealed-bytes.js";
import { openDecays } from "../../src/tables/stream-decays.js";
import { writeWholePieces } from "../../src/tables/whole-file.js";
import { octetStudy, tablesOf } from "../completion/whole-study.js";

const folder = mkdtempSync(join(tmpdir(), "couplet-stream-"));
afterAll(() => rmSync(folder, { recursive: true }));

const tables = tablesOf(octetStudy(""));
const bytes = encodeDecays(tables);

function fileOf(content: Uint8Array, name = "t.decays.pb"): string {
  const path = join(folder, name);
  writeFileSync(path, content);
  return path;
}

describe("decay tables piece by piece", () => {
  test("are the bytes of one message", () => {
    expect(Buffer.from(bytes)).toEqual(
      Buffer.from(sealBytes(couplet.v1.DecayTables.encode(decaysMessage(tables)).finish())),
    );
  });

  test("are written from parents that come one by one, and read back one by one", () => {
    const path = join(folder, "streamed.decays.pb");
    let made = 0;
    function* oneByOne() {
      for (const parent of tables.parents) {
        made++;
        yield parent;
      }
    }
    writeWholePieces(path, sealedPieces(decayPieces({ ...tables, parents: oneByOne() })));
    expect(made).toBe(tables.parents.length);
    expect(readFileSync(path)).toEqual(Buffer.from(bytes));
    const whole = decodeDecays(bytes, path);
    const streamed = openDecays(path);
    expect([...streamed.parents()]).toEqual([...whole.parents]);
    whole.parents = [];
    expect(streamed.head).toEqual(whole);
    streamed.close();
  });

  test("stay the same when another file takes the place of theirs", () => {
    const path = fileOf(bytes);
    const streamed = openDecays(path);
    writeFileSync(`${path}.new`, "something else");
    renameSync(`${path}.new`, path);
    expect([...streamed.parents()]).toHaveLength(tables.parents.length);
    streamed.close();
  });
});

describe("opening a file refuses", () => {
  test("a change of one bit in any of 300 bytes, and 100 truncations, as the reader of whole files does", () => {
    const wholeMessage = (content: Uint8Array) => {
      try {
        decodeDecays(content, join(folder, "bad.pb"));
        return "accepted";
      } catch (error) {
        return `${(error as Error).name}: ${(error as Error).message}`;
      }
    };
    const streamMessage = (content: Uint8Array) => {
      const path = fileOf(content, "bad.pb");
      try {
        openDecays(path).close();
        return "accepted";
      } catch (error) {
        return `${(error as Error).name}: ${(error as Error).message}`;
      }
    };
    const step = Math.floor(bytes.length / 300);
    for (let at = 0; at < bytes.length; at += step) {
      const changed = Uint8Array.from(bytes);
      changed[at]! ^= 1 << (at % 8);
      expect(streamMessage(changed)).toBe(wholeMessage(changed));
      if (at % 3 === 0)
        expect(streamMessage(bytes.subarray(0, at))).toBe(wholeMessage(bytes.subarray(0, at)));
    }
    expect(wholeMessage(bytes)).toBe("accepted");
  });

  test("a table of another kind, a sealed message that is none, a folder and a missing file", () => {
    const eight = parseIrrep("8");
    const factors = fileOf(encodeFactors(isoscalarTable(eight, eight), { states: false }), "f.pb");
    expect(() => openDecays(factors)).toThrow(
      new InputError(
        `${factors}: expected couplet.v1.DecayTables, got couplet.v1.FactorTable. Give a file of the kind expected.`,
      ),
    );
    const head = couplet.v1.DecayTables.encode({ kind: "couplet.v1.DecayTables" }).finish();
    const endless = fileOf(sealBytes(Buffer.concat([head, Buffer.from([0x22, 0x7f, 0x00])])), "e.pb");
    expect(() => openDecays(endless)).toThrow(
      new TableError(
        `${endless}: expected a message couplet.v1.DecayTables, got bytes that are none (field 4 ends behind the file). The file was written by something else; write it again.`,
      ),
    );
    expect(() => openDecays(folder)).toThrow(
      new InputError(`${folder}: expected a file, got a folder or a device. Check the path.`),
    );
    expect(() => openDecays(join(folder, "none.pb"))).toThrow(/could not be read: ENOENT/);
  });

  test("a newer schema at once, and rows that do not add up when their parent is asked for", () => {
    const message = decodeDecays(bytes, "t");
    message.sha256 = null as never;
    message.header!.schemaMinor = 99;
    const newer = fileOf(sealBytes(couplet.v1.DecayTables.encode(message).finish()), "n.pb");
    expect(() => openDecays(newer)).toThrow(/expected schema version 1\.\d+ or older, got 1\.99/);
    message.header!.schemaMinor = 0;
    message.parents[1]!.rows[0]!.partsPerBillion! += 1;
    const wrong = openDecays(fileOf(sealBytes(couplet.v1.DecayTables.encode(message).finish()), "w.pb"));
    const parents = wrong.parents();
    expect(parents.next().done).toBe(false);
    expect(() => parents.next()).toThrow(/expected rows that add up to 1000000000 parts, got 1000000001/);
    wrong.close();
  });
});
