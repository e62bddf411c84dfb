import { afterAll, beforeAll, describe, expect, test } from "vitest";
import type { SidecarClient } from "../../src/clients/typescript/couplet-sidecar.js";
import { chiSquareProbability } from "../../src/fit/chi-square.js";
import { failure, type Running, running } from "./running.js";

let server: Running;
let client: SidecarClient;
const PARENT = "Sigma(1385)0";

beforeAll(async () => {
  server = await running();
  client = server.client();
});
afterAll(() => server.stop());

/** Chance of a chi-square as large, of counts against the expected ones; rows that expect nothing must have nothing. */
function chance(rows: readonly number[], fractions: readonly number[]): number {
  const counts = fractions.map((_, k) => rows.filter((row) => row === k).length);
  let chi2 = 0;
  let cells = 0;
  for (const [k, fraction] of fractions.entries()) {
    if (fraction === 0) expect(counts[k]).toBe(0);
    else {
      chi2 += (counts[k]! - fraction * rows.length) ** 2 / (fraction * rows.length);
      cells++;
    }
  }
  return chiSquareProbability(chi2, cells - 1);
}

test("the same seed and batch give the same rows; another seed, batch or parent gives others", async () => {
  const draw = async (parent: string, seed: number, batch: number) =>
    (await client.draw(parent, seed, batch, 200)).rows.join();
  const first = await draw(PARENT, 1, 0);
  expect(await draw(PARENT, 1, 0)).toBe(first);
  const others = [await draw(PARENT, 2, 0), await draw(PARENT, 1, 1)];
  expect(new Set([first, ...others]).size).toBe(3);
  expect(await draw("Delta(1232)+", 1, 0)).not.toBe(await draw("Delta(1232)0", 1, 0));
});

test("a batch is the beginning of a longer one", async () => {
  const { rows } = await client.draw(PARENT, 9, 3, 1000);
  expect((await client.draw(PARENT, 9, 3, 100)).rows).toEqual(rows.slice(0, 100));
});

// False-alarm rate 1e-6 in each; the seeds are fixed, so that a run can be repeated.
describe("100,000 draws with seed 20261201", () => {
  test("at the nominal mass follow the table's parts per 10^9, and would not follow others", async () => {
    const { parent } = await client.decayTable(PARENT);
    const fractions = parent.rows.map(({ partsPerBillion }) => partsPerBillion! / 1e9);
    const { rows } = await client.draw(PARENT, 20261201, 0, 100_000);
    expect(chance(rows, fractions)).toBeGreaterThan(1e-6);
    const [a, b] = fractions.map((f, k) => [f, k] as const).sort((x, y) => y[0] - x[0]);
    const wrong = fractions.map((f, k) => (k === a![1] ? f - b![0] / 5 : k === b![1] ? f * 1.2 : f));
    expect(chance(rows, wrong)).toBeLessThan(1e-6);
  });

  test("at a mass off the shell follow the fractions there", async () => {
    const mass = 1400;
    const { fractions } = await client.widths(PARENT, mass);
    const rows: number[] = [];
    for (let batch = 0; batch < 100; batch++) {
      const masses = new Array<number>(1000).fill(mass);
      rows.push(...(await client.drawAt(PARENT, 20261201, batch, masses)).rows);
    }
    expect(chance(rows, fractions)).toBeGreaterThan(1e-6);
  });
});

test("a mass where every row is closed gives -1, and the draws beside it are as without it", async () => {
  const { rows } = await client.drawAt("rho(770)0", 1, 0, [100, 800, 100]);
  expect([rows[0], rows[2]]).toEqual([-1, -1]);
  expect(rows[1]).toBeGreaterThanOrEqual(0);
});

test("a stream draws what single calls draw", async () => {
  const stream = client.drawsStream();
  const answers = await Promise.all(
    [0, 1, 2].map((batch) => stream.ask({ parent: client.key(PARENT), seed: 4, batch, count: 50 })),
  );
  for (const [batch, { rows }] of answers.entries())
    expect(rows).toEqual((await client.draw(PARENT, 4, batch, 50)).rows);
  stream.end();
});

test("count and masses together, or neither, are refused", async () => {
  const stream = client.drawsStream();
  expect(await failure(stream.ask({ parent: client.key(PARENT), seed: 1 }))).toEqual({
    code: 3,
    details: 'draws: expected either a count or masses, got "count 0 and 0 masses". Give one of them.',
  });
});
