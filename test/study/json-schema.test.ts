import { readFileSync } from "node:fs";
import { join } from "node:path";
import { describe, expect, test } from "vitest";
import { parse } from "yaml";
import { z } from "zod";
import { DEMO_STUDY } from "../../src/cli/demo-study.js";
import { starterStudy } from "../../src/cli/starter-study.js";
import { studyJsonSchema } from "../../src/study/json-schema.js";
import { studySchema } from "../../src/study/schema.js";

type Schema = Readonly<Record<string, unknown>>;

const schema = studyJsonSchema();
// The JSON Schema read back as a check: what an editor knows, and no more.
const editor = z.fromJSONSchema(schema as Parameters<typeof z.fromJSONSchema>[0]);

const studies: [string, string][] = [
  ["starter", starterStudy("starter", "starter.schema.json")],
  ["demo", DEMO_STUDY],
  ["short", readFileSync(join(__dirname, "../library/short.yaml"), "utf8")],
];

describe("the JSON Schema of the study", () => {
  test("has the keys of the checks, and asks for the same", () => {
    expect(Object.keys(schema["properties"] as Schema)).toEqual(Object.keys(studySchema.shape));
    expect(schema["required"]).toEqual(["couplet", "title", "decays", "measurements"]);
    expect(schema["$schema"]).toBe("https://json-schema.org/draft/2020-12/schema");
  });

  test.each(studies)("accepts the %s study, as the checks do", (_, text) => {
    expect(editor.safeParse(parse(text)).success).toBe(true);
    expect(studySchema.safeParse(parse(text)).success).toBe(true);
  });

  test("refuses a misspelled key, a missing source and a wave of no number, as the checks do", () => {
    const [, text] = studies[2]!;
    for (const [from, to] of [
      ["title:", "titel:"],
      [", source: invented }", " }"],
      ["L: 1", "L: one"],
      ["use: table", "use: plot"],
    ] as const) {
      const wrong = text.replace(from, to);
      expect(wrong).not.toBe(text);
      expect(editor.safeParse(parse(wrong)).success, to).toBe(false);
      expect(studySchema.safeParse(parse(wrong)).success, to).toBe(false);
    }
  });

  test("describes every key, so that an editor can", () => {
    const bare: string[] = [];
    const visit = (node: unknown, path: string): void => {
      if (typeof node !== "object" || node === null) return;
      for (const [key, value] of Object.entries(node)) {
        const at = `${path}/${key}`;
        if (key === "properties") {
          for (const [name, property] of Object.entries(value as Record<string, Schema>)) {
            if (property["description"] === undefined) bare.push(`${path}/${name}`);
          }
        }
        visit(value, at);
      }
    };
    visit(schema, "");
    expect(bare).toEqual([]);
  });
});
