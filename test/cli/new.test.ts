import { existsSync, readdirSync, readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { afterAll, describe, expect, test } from "vitest";
import { studyJsonSchema } from "../../src/study/json-schema.js";
import { couplet, refusal, scratchFolder } from "./command.js";

const { folder, remove } = scratchFolder();
afterAll(remove);

const run = (...args: string[]) => couplet(folder, ...args);
const text = (name: string) => readFileSync(join(folder, name), "utf8");

describe("couplet new", () => {
  test("writes a study and its schema, and says what to try next", () => {
    expect(run("new", "mine")).toEqual({
      code: 0,
      out: `wrote mine.yaml, a study to make your own: every number in it is invented
wrote mine.schema.json, from which editors complete and check its keys

Try next:
  couplet fit mine.yaml
  couplet tables mine.yaml -o mine-tables
`,
      error: "",
    });
    expect(readdirSync(folder)).toEqual(["mine.schema.json", "mine.yaml"]);
    expect(text("mine.yaml").split("\n")[0]).toBe("# yaml-language-server: $schema=mine.schema.json");
    expect(text("mine.yaml")).toContain("EVERY NUMBER IN IT IS INVENTED");
    expect(JSON.parse(text("mine.schema.json"))).toEqual(studyJsonSchema());
  });

  test("the study runs to its tables as it is", () => {
    const { code, out, error } = run("tables", "mine.yaml", "-o", "mine-tables");
    expect([code, error]).toEqual([0, ""]);
    expect(out).toContain("wrote mine-tables/mine.decays.pb: 8 parents");
    expect(out).not.toContain("WARNING");
  });

  test("does not overwrite a study, nor its schema", () => {
    writeFileSync(join(folder, "mine.yaml"), "precious");
    const message = (file: string) =>
      `${file}: expected no file there yet, got one. It stays as it is; choose another name.`;
    expect(run("new", "mine.yaml")).toEqual(refusal(message("mine.yaml")));
    expect(text("mine.yaml")).toBe("precious");
    writeFileSync(join(folder, "other.schema.json"), "precious");
    expect(run("new", "other")).toEqual(refusal(message("other.schema.json")));
    expect([text("other.schema.json"), existsSync(join(folder, "other.yaml"))]).toEqual(["precious", false]);
  });

  test("--schema brings the schema up to date and leaves the study alone", () => {
    writeFileSync(join(folder, "mine.schema.json"), "{}");
    expect(run("new", "mine", "--schema").code).toBe(0);
    expect(JSON.parse(text("mine.schema.json"))).toEqual(studyJsonSchema());
    expect(text("mine.yaml")).toBe("precious");
  });

  test("refuses a name that would need quotes", () => {
    expect(run("new", "my study")).toEqual(
      refusal('couplet new: expected a name of letters, digits and any of _ . + -, got "my study".'),
    );
  });
});
