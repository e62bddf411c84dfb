import { spawn } from "node:child_process";
import { randomBytes } from "node:crypto";
import { once } from "node:events";
import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeAll, expect, test } from "vitest";
import { checkSeal, sealBytes } from "../../src/tables/sealed-bytes.js";
import "../cli/command.js";

/** `.ci/run` kills 200 times; a few do for every day. */
const KILLS = Number(process.env["COUPLET_KILLS"] ?? 40);
const AT_ONCE = 4;

const folder = mkdtempSync(join(tmpdir(), "couplet-kill-"));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

/** A sealed file of our kind and of a given size; its content is noise. */
function sealed(size: number): Uint8Array {
  const kind = "couplet.v1.FactorTable";
  return sealBytes(Buffer.concat([Buffer.from([0x0a, kind.length]), Buffer.from(kind), randomBytes(size)]));
}

const contents = [sealed(300_000), sealed(400_000)];
const files = contents.map((_, k) => join(folder, `content-${k}`));
beforeAll(() => {
  for (const [k, file] of files.entries()) writeFileSync(file, contents[k]!);
});

/** Starts a writer at a place that holds the first content, and kills it with SIGKILL some milliseconds after it began. */
async function killWriter(how: "whole" | "naive", place: string, afterMs: number): Promise<void> {
  writeFileSync(place, contents[0]!);
  const writer = spawn(process.execPath, [join(__dirname, "kill-writer.cjs"), how, place, ...files], {
    stdio: ["ignore", "pipe", "inherit"],
  });
  await once(writer.stdout, "data");
  await new Promise((resolve) => setTimeout(resolve, afterMs));
  writer.kill("SIGKILL");
  const [, signal] = (await once(writer, "close")) as [number | null, string | null];
  expect(signal).toBe("SIGKILL");
}

/** Whether a place holds one of the contents, every byte of it. */
function isWhole(place: string): boolean {
  const bytes = readFileSync(place);
  return contents.some((content) => bytes.equals(content));
}

/** Kills writers some at once, each at its own place; returns the places whose files are not whole. */
async function halves(how: "whole" | "naive", kills: number): Promise<string[]> {
  const found: string[] = [];
  let started = 0;
  const worker = async (): Promise<void> => {
    while (started < kills) {
      const place = join(folder, `${how}-${started++}.pb`);
      await killWriter(how, place, Math.random() * 20);
      if (!isWhole(place)) found.push(place);
    }
  };
  await Promise.all(Array.from({ length: AT_ONCE }, worker));
  return found;
}

test(`after ${KILLS} kills in the middle of writing, each file is the old or the new one, never a half`, async () => {
  expect(await halves("whole", KILLS)).toEqual([]);
  const left = readdirSync(folder).filter((name) => /^\.?whole-/.test(name));
  const stale = left.filter((name) => !name.endsWith(".pb"));
  // What a killed writer leaves beside its place tells that the kill came in the middle; none is named like a table.
  expect(stale.length).toBeGreaterThan(KILLS / 10);
  expect(left.length - stale.length).toBe(KILLS);
  for (const name of left) {
    const bytes = readFileSync(join(folder, name));
    if (contents.some((content) => bytes.equals(content))) continue;
    expect(() => checkSeal(bytes, name)).toThrow();
  }
}, 240_000);

test("the same kills find halves where a file is written straight into its place", async () => {
  expect((await halves("naive", 20)).length).toBeGreaterThan(0);
}, 120_000);
