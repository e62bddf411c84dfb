import { afterAll, beforeAll, describe, expect, test } from "vitest";
import type { SidecarClient } from "../../src/clients/typescript/couplet-sidecar.js";
import { couplet } from "../../src/gen/couplet.js";
import { isoscalarTable } from "../../src/su3/isoscalar-factors.js";
import { encodeFactors } from "../../src/tables/encode-factors.js";
import { digestOf } from "../../src/tables/sealed-bytes.js";
import { failure, type Running, running } from "./running.js";

import v1 = couplet.v1;

let server: Running;
let client: SidecarClient;

beforeAll(async () => {
  server = await running();
  client = server.client();
});
afterAll(() => server.stop());

test("ListTables names tables, digests, convention, cautions and limits", async () => {
  const { tables, cautions, limits, producer, refusedReplacement } = await client.listTables();
  expect(tables.map(({ kind }) => kind)).toEqual(["couplet.v1.DecayTables", "couplet.v1.CouplingTables"]);
  expect(tables.map(({ header }) => header?.convention)).toEqual(["deswart-v1", "deswart-v1"]);
  expect(tables.every(({ sha256 }) => sha256?.length === 32)).toBe(true);
  expect(tables[0]?.parents).toHaveLength(16);
  expect(tables[0]?.parents?.[1]).toMatchObject({ name: "Delta(1232)+", mcNumber: 2214, rows: 5 });
  expect(tables[1]?.families?.[0]).toMatchObject({ from: "decuplet", twoL: 2, twoS: 1 });
  expect(cautions.join()).toMatch(/20-30 % in amplitude/);
  expect(limits).toMatchObject({ masses: 1000, draws: 100_000, streams: 1000, factors: 2000 });
  expect(producer).toMatch(/^couplet \d/);
  expect(refusedReplacement).toBe("");
});

test("GetDecayTable gives a parent's rows, which add up to 10^9 parts, and every daughter", async () => {
  const { parent, daughters, convention } = await client.decayTable("Sigma(1385)0");
  expect(parent.rows.reduce((sum, { partsPerBillion }) => sum + (partsPerBillion ?? 0), 0)).toBe(1e9);
  const named = new Set(parent.rows.flatMap((row) => (row.daughters ?? []).map(({ name }) => name)));
  expect(new Set(daughters.map(({ name }) => name))).toEqual(named);
  expect(convention).toBe("deswart-v1");
});

describe("EvaluateWidths", () => {
  test("at the nominal mass gives the table's widths and fractions", async () => {
    const { parent } = await client.decayTable("Sigma(1385)0");
    const { widths, fractions, totalWidth } = await client.widths("Sigma(1385)0", parent.hadron.mass!);
    for (const [k, row] of parent.rows.entries()) {
      expect(widths[k]).toBeCloseTo(row.width!.value!, 8);
      expect(fractions[k]).toBeCloseTo(row.fraction!.value!, 10);
    }
    expect(totalWidth).toBeCloseTo(parent.totalWidth!, 8);
  });

  test("off the shell follows q^3/M^2 of model a", async () => {
    const pionMeV = 139.57039;
    const q = (m: number) => Math.sqrt(m ** 2 / 4 - pionMeV ** 2);
    const [low, high] = [await client.widths("rho(770)0", 700), await client.widths("rho(770)0", 800)];
    const { parent } = await client.decayTable("rho(770)0");
    const row = parent.rows.findIndex(({ id }) => id === "rho(770)0 -> pi+ pi-");
    const law = (m: number) => q(m) ** 3 / m ** 2;
    expect(high.widths[row]! / low.widths[row]!).toBeCloseTo(law(800) / law(700), 10);
  });

  test("below every threshold gives 0 and no NaN", async () => {
    const { totalWidth, widths, fractions } = await client.widths("rho(770)0", 100);
    expect(totalWidth).toBe(0);
    expect([...widths, ...fractions].every((x) => x === 0)).toBe(true);
  });

  test("finds a parent by its Monte Carlo number", async () => {
    const stream = client.widthsStream();
    const answer = await stream.ask({ parent: { mcNumber: 113 }, masses: [800] });
    expect(answer.totalWidths).toEqual([(await client.widths("rho(770)0", 800)).totalWidth]);
    stream.end();
  });
});

test("a batch and a stream of batches give what single queries give, in order", async () => {
  const masses = [1350, 1383.7, 1400, 1450.5];
  const single = await Promise.all(masses.map((mass) => client.widths("Sigma(1385)0", mass)));
  const batch = await client.widthsBatch("Sigma(1385)0", masses);
  expect(batch.totalWidths).toEqual(single.map(({ totalWidth }) => totalWidth));
  expect(batch.widths).toEqual(single.flatMap(({ widths }) => widths));
  expect(batch.fractions).toEqual(single.flatMap(({ fractions }) => fractions));
  const stream = client.widthsStream();
  const answers = await Promise.all(
    masses.map((mass) => stream.ask({ parent: client.key("Sigma(1385)0"), masses: [mass] })),
  );
  expect(answers.map(({ totalWidths }) => totalWidths[0])).toEqual(batch.totalWidths);
  stream.end();
});

test("answers under way at the same time, of streams and single batches, do not mix", async () => {
  const name = "Sigma(1385)0";
  const parent = client.key(name);
  const batch = (stream: number, k: number) =>
    Array.from({ length: 1 + ((7 * stream + 13 * k) % 200) }, (_, j) => 1300 + stream + k / 64 + j);
  const streams = Array.from({ length: 6 }, () => client.widthsStream());
  const asked = streams.flatMap((stream, s) =>
    Array.from({ length: 40 }, (_, k) => {
      const masses = batch(s, k);
      return [
        masses,
        k % 8 === 7 ? client.widthsBatch(name, masses) : stream.ask({ parent, masses }),
      ] as const;
    }),
  );
  for (const [masses, answer] of asked) {
    const { totalWidths, widths, fractions } = await answer;
    expect(totalWidths).toHaveLength(masses.length);
    for (const k of [0, masses.length - 1]) {
      const single = await client.widths(name, masses[k]!);
      const rows = single.widths.length;
      expect(totalWidths[k]).toBe(single.totalWidth);
      expect(widths.slice(k * rows, (k + 1) * rows)).toEqual(single.widths);
      expect(fractions.slice(k * rows, (k + 1) * rows)).toEqual(single.fractions);
    }
  }
  for (const stream of streams) stream.end();
});

test("GetIsoscalarFactors gives the table and the digest of the file of the same product", async () => {
  const { table, tableSha256 } = await client.isoscalarFactors({
    left: { p: 3, q: 0 },
    right: { p: 1, q: 1 },
  });
  const file = encodeFactors(isoscalarTable({ p: 3, q: 0 }, { p: 1, q: 1 }), { states: false });
  const { sha256: _, ...expected } = v1.FactorTable.toObject(v1.FactorTable.decode(file));
  expect(v1.FactorTable.toObject(v1.FactorTable.decode(v1.FactorTable.encode(table).finish()))).toEqual(
    expected,
  );
  expect(Buffer.from(tableSha256).toString("hex")).toBe(digestOf(file));
});

test("GetIsoscalarFactors gives one irrep of a product", async () => {
  const request = { left: { p: 1, q: 1 }, right: { p: 1, q: 1 }, into: { p: 3, q: 0 } };
  const { table } = await client.isoscalarFactors(request);
  expect(table.factors.every(({ irrep }) => irrep?.p === 3 && irrep.q === 0)).toBe(true);
  expect(table.factors.length).toBeGreaterThan(0);
});

test("GetCouplings gives the couplings of one vertex family", async () => {
  const family = { from: "decuplet", to: ["baryon-octet", "pseudoscalar-octet"] };
  const { reduced, charged, isospin, convention, matrixConvention } = await client.couplings(family);
  expect(reduced.map(({ name }) => name)).toEqual(["decuplet.g(10)"]);
  const ids = charged.map(({ id }) => id);
  expect(ids).toContain("Delta(1232)++ -> p pi+");
  expect(ids.every((id) => /^(Delta|Sigma|Xi)\(/.test(id ?? ""))).toBe(true);
  expect(isospin.map(({ id }) => id)).toContain("Delta(1232) -> N pi");
  expect([convention, matrixConvention.id]).toEqual(["deswart-v1", "couplet-matrix-v1"]);
});

test("an unknown family is refused with the ones there are", async () => {
  expect(await failure(client.couplings({ from: "decuplet", to: ["vectors"] }))).toEqual({
    code: 3,
    details:
      'family: expected a vertex family of the coupling tables served, got "decuplet -> vectors". There are: decuplet -> baryon-octet pseudoscalar-octet, 2L=2 2S=1; vectors -> pseudoscalar-octet pseudoscalar-octet, 2L=2 2S=0.',
  });
});

describe("every call that needs a parent says what was wrong with it", () => {
  test.each([
    [{}, 3, "parent: expected a name or a Monte Carlo number, got neither. Set one of the two."],
    [
      { name: "Sigma(1385)" },
      3,
      'parent: expected a parent of the tables served, got "Sigma(1385)". Nearest: Sigma(1385)+, Sigma(1385)0, Sigma(1385)-.',
    ],
    [
      { mcNumber: 7 },
      3,
      "parent: expected a parent of the tables served, got 7. List the tables for their parents.",
    ],
  ])("%j", async (parent, code, details) => {
    const stream = client.widthsStream();
    expect(await failure(stream.ask({ parent, masses: [1] }))).toEqual({ code, details });
  });

  test("a digest that is not served is refused as FAILED_PRECONDITION", async () => {
    const stream = client.widthsStream();
    const parent = { name: "Delta(1232)+", tableSha256: Buffer.alloc(32, 0xab) };
    const { code, details } = await failure(stream.ask({ parent, masses: [1] }));
    expect(code).toBe(9);
    expect(details).toMatch(
      /^parent\.table_sha256: expected the digest of a served table, got (ab){32}\. Served: [0-9a-f]{64} \(.*ground\.decays\.pb\)\. Tables may have been replaced; list them again\.$/,
    );
  });

  test.each([0, -5, Number.NaN, Number.POSITIVE_INFINITY, 1.1e6])("mass %d is refused", async (mass) => {
    expect(await failure(client.widths("rho(770)0", mass))).toEqual({
      code: 3,
      details: `mass: expected a mass in MeV above 0 and up to 1000000, got ${mass}.`,
    });
  });
});
