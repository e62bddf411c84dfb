import { afterAll, expect, test } from "vitest";
import { printable } from "../../src/cli/print.js";
import { studyText } from "../chain/run.js";
import { couplet, scratchFolder } from "./command.js";

const TITLE = "red \u001b[31m, \u202eback, \u009b1m, \u0007";
const WRITTEN = "red \\u001b[31m, \\u202eback, \\u009b1m, \\u0007";
const study = studyText("decuplet").replace(/^title: .*$/m, `title: ${JSON.stringify(TITLE)}`);

const { folder, remove } = scratchFolder({ "s.yaml": study });
afterAll(remove);

const run = (...args: string[]) => couplet(folder, ...args);

test("characters that steer a terminal are written out, all others stay", () => {
  expect(printable(TITLE)).toBe(WRITTEN);
  expect(printable("Ξ(1530)⁰ → Ξ π\n\tñ 日本 +-\n")).toBe("Ξ(1530)⁰ → Ξ π\n\tñ 日本 +-\n");
});

test("a title of somebody's study does not steer the terminal, and is as it is in JSON", () => {
  const fit = run("fit", "s.yaml");
  const tables = run("tables", "s.yaml", "-o", ".");
  const shown = run("show", "s.decays.pb");
  for (const { code, out } of [fit, tables, shown]) {
    expect([code, out.includes(WRITTEN), printable(out) === out]).toEqual([0, true, true]);
  }
  expect(JSON.parse(run("fit", "s.yaml", "--json").out).title).toBe(TITLE);
  expect(JSON.parse(run("show", "s.decays.pb", "--json").out).header.title).toBe(TITLE);
});

test("nor does a name that comes back in an error", () => {
  const { code, error } = run("show", "no\u001b[31m.pb");
  expect([code, error]).toEqual([
    2,
    "couplet: no\\u001b[31m.pb: could not be read: ENOENT: no such file or directory. Check the path.\n",
  ]);
});
