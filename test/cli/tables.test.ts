import { mkdirSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterEach, beforeEach, expect, test } from "vitest";
import { writeTables } from "../../src/cli/tables.js";
import { InputError } from "../../src/errors.js";
import { checkSeal, digestOf } from "../../src/tables/sealed-bytes.js";
import { fitOf, studyText, withMeasurements } from "../chain/run.js";

/** Two widths of an octet: the data do not choose between two solutions, and each gets its pair of tables. */
const study = withMeasurements(studyText("octet-5-2"), [
  "width: N(1675) -> N pi",
  "width: Sigma(1775) -> Lambda pi",
]).replaceAll(/width: \d+ MeV \}/g, "width: sum }");
const fit = fitOf(`${study}fit: { mirrors: each }\n`);
const NAMES = [1, 2].flatMap((k) => [`s.minimum-${k}.decays.pb`, `s.minimum-${k}.couplings.pb`]);

let folder = "";
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), "couplet-tables-"));
});
afterEach(() => rmSync(folder, { recursive: true, force: true }));

test("each minimum has its pair of tables, listed with their digests", () => {
  const written = writeTables(fit, "some/s.yaml", join(folder, "out"));
  expect(readdirSync(join(folder, "out")).sort()).toEqual([...NAMES].sort());
  const listed = written.flatMap(({ couplings, ...decays }) => [decays, couplings]);
  expect(listed.map(({ file }) => file)).toEqual(NAMES.map((name) => join(folder, "out", name)));
  for (const { file, bytes, sha256 } of listed) {
    const read = readFileSync(file);
    expect(() => checkSeal(read, file)).not.toThrow();
    expect([read.length, digestOf(read)]).toEqual([bytes, sha256]);
  }
});

test("a last place that cannot be written leaves every old file as it was", () => {
  for (const name of NAMES.slice(0, 2)) writeFileSync(join(folder, name), `old ${name}`);
  const last = join(folder, NAMES.at(-1)!);
  mkdirSync(last);
  expect(() => writeTables(fit, "some/s.yaml", folder)).toThrow(
    new InputError(`${last}: expected a place for a file, got a folder. Name a file in it.`),
  );
  expect(readdirSync(folder).sort()).toEqual([...NAMES.slice(0, 2), NAMES.at(-1)!].sort());
  for (const name of NAMES.slice(0, 2)) expect(readFileSync(join(folder, name), "utf8")).toBe(`old ${name}`);
});
