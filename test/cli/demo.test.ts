import { appendFileSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { afterAll, expect, test } from "vitest";
import { couplet, refusal, scratchFolder } from "./command.js";

const { folder, remove } = scratchFolder();
afterAll(remove);

test("couplet demo runs again over its own study, and leaves one that was edited alone", () => {
  const first = couplet(folder, "demo");
  expect([first.code, first.error]).toEqual([0, ""]);
  expect(couplet(folder, "demo")).toEqual(first);
  const study = join(folder, "couplet-demo/larkfield.yaml");
  appendFileSync(study, "# a thought of mine\n");
  const edited = readFileSync(study, "utf8");
  expect(couplet(folder, "demo")).toEqual(
    refusal(
      "couplet-demo/larkfield.yaml: expected the study of the demo or no file yet, got one that differs. It stays as it is; run it with `couplet tables couplet-demo/larkfield.yaml -o couplet-demo`, or choose another folder with --out.",
    ),
  );
  expect(readFileSync(study, "utf8")).toBe(edited);
});
