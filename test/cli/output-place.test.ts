import { copyFileSync, readFileSync, symlinkSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { studyText } from "../chain/run.js";
import { couplet, refusal, scratchFolder } from "./command.js";

const STUDY = studyText("decuplet");
const { folder, remove } = scratchFolder({ "s.yaml": STUDY, "other.yaml": "written by hand" });
afterAll(remove);

const run = (...args: string[]) => couplet(folder, ...args);
const text = (name: string) => readFileSync(join(folder, name), "utf8");

const input = (file: string) =>
  refusal(
    `${file}: expected a place other than the input's, got the input itself. It stays as it is; choose another name.`,
  );
const study = (file: string) =>
  refusal(`${file}: expected a place without a study, got one. It stays as it is; choose another name.`);

describe("results do not go where work of a person's would be lost", () => {
  beforeAll(() => {
    expect(run("tables", "s.yaml", "-o", ".").code).toBe(0);
    symlinkSync("s.yaml", join(folder, "link.pb"));
    symlinkSync(".", join(folder, "here"));
    copyFileSync(join(folder, "s.decays.pb"), join(folder, "table"));
  });

  test("into the study they are made from, under whatever name", () => {
    for (const name of ["s.yaml", "./s.yaml", "here/s.yaml", "link.pb"])
      expect(run("couplings", "s.yaml", "--out", name)).toEqual(input(name));
    expect(text("s.yaml")).toBe(STUDY);
  });

  test("through a link that stands where `tables` writes", () => {
    writeFileSync(join(folder, "t.yaml"), STUDY);
    symlinkSync("t.yaml", join(folder, "t.couplings.pb"));
    expect(run("tables", "t.yaml", "-o", ".")).toEqual(input("t.couplings.pb"));
    expect(text("t.yaml")).toBe(STUDY);
  });

  test("into the table that is exported", () => {
    const before = readFileSync(join(folder, "s.decays.pb"));
    expect(run("export", "s.decays.pb", "--to", "csv", "-o", "here/s.decays.pb")).toEqual(
      input("here/s.decays.pb"),
    );
    expect(readFileSync(join(folder, "s.decays.pb"))).toEqual(before);
  });

  test("into another study", () => {
    expect(run("export", "s.decays.pb", "--to", "csv", "-o", "other.yaml")).toEqual(study("other.yaml"));
    expect(run("factors", "3", "3", "--out", "other.yaml")).toEqual(study("other.yaml"));
    expect(run("couplings", "s.yaml", "--out", "other.yaml")).toEqual(study("other.yaml"));
    expect(text("other.yaml")).toBe("written by hand");
  });
});

test("earlier results are replaced", () => {
  expect(run("export", "table", "--to", "csv", "-o", "table.csv").code).toBe(0);
  expect(run("export", "table", "--to", "latex", "-o", "table.csv").code).toBe(0);
  expect(text("table.csv")).toContain("\\begin{");
  expect(run("couplings", "s.yaml", "--out", "s.couplings.pb").code).toBe(0);
  expect(run("tables", "s.yaml", "-o", ".").code).toBe(0);
});
