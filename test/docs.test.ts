import { readFileSync } from "node:fs";
import { join, resolve } from "node:path";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { readStudy } from "../src/study/read-study.js";
import { couplet, scratchFolder } from "./cli/command.js";

const ROOT = resolve(__dirname, "..");
const README = readFileSync(join(ROOT, "README.md"), "utf8");

/** Code blocks of a language in the README, as written. */
function blocks(language: string): string[] {
  return [...README.matchAll(new RegExp(`^\`\`\`${language}\\n([\\s\\S]*?)^\`\`\``, "gm"))].map(
    (match) => match[1]!,
  );
}

/** Words of a command line; double quotes hold blanks together. */
function words(line: string): string[] {
  return [...line.matchAll(/"([^"]*)"|(\S+)/g)].map((match) => match[1] ?? match[2]!);
}

describe("what README says", () => {
  const { folder, remove } = scratchFolder();
  beforeAll(() => {
    expect(couplet(folder, "demo").code).toBe(0);
  });
  afterAll(remove);

  // A server runs until it is stopped; its example is run by the tests of the sidecar.
  const commands = blocks("sh")
    .flatMap((block) => block.split("\n"))
    .map((line) => line.replace(/\s+#.*$/, ""))
    .filter((line) => line.startsWith("couplet ") && !line.startsWith("couplet serve"));

  test("shows at least one example of every command", () => {
    const listed = [...couplet(folder, "--help").out.matchAll(/^ {2}([a-z]+) .*$/gm)].map(
      (match) => match[1]!,
    );
    const shown = new Set([...README.matchAll(/^\s*(?:npx )?couplet ([a-z]+)/gm)].map((match) => match[1]));
    expect(listed.filter((name) => name !== "help" && !shown.has(name))).toEqual([]);
  });

  test.each(commands)("runs: %s", (command) => {
    const { code, error } = couplet(folder, ...words(command).slice(1));
    expect({ code, error }).toEqual({ code: 0, error: "" });
  });

  test.each(blocks("yaml").filter((block) => block.startsWith("couplet: 1")))(
    "is a study that can be read: %#",
    (study) => {
      expect(() => readStudy(Buffer.from(study), "README.md")).not.toThrow();
    },
  );

  test("names exports of the library that exist", () => {
    const library = require(join(ROOT, "dist", "index.js")) as Record<string, unknown>;
    for (const block of blocks("ts")) {
      for (const [, names] of block.matchAll(/import \{([^}]*)\} from "couplet"/g)) {
        for (const name of names!.split(",").map((part) => part.trim())) expect(library).toHaveProperty(name);
      }
    }
    // What paragraphs name for programs: functions begin in lower case, classes in upper.
    const paragraphs = README.split(/\n\n/).filter((text) =>
      /^From a program|^- `.*`|^In TypeScript:/.test(text),
    );
    const names = paragraphs
      .flatMap((text) => [...text.matchAll(/`([A-Za-z]+)(?:\(|`)/g)].map((match) => match[1]!))
      .filter((name) => /^[a-z]+[A-Z0-9]|^[A-Z][a-z]+[A-Z]/.test(name));
    expect(names.length).toBeGreaterThan(20);
    expect(names.filter((name) => !(name in library))).toEqual([]);
  });
});
