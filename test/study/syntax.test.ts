import { expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { readStudy } from "../../src/study/read-study.js";
import { MAX_STUDY_BYTES } from "../../src/study/syntax.js";

/** The message with which bytes are refused as a study. */
function refusal(bytes: string | Uint8Array): string {
  try {
    readStudy(Buffer.from(bytes as string), "s.yaml");
  } catch (error) {
    if (error instanceof InputError) return error.message;
    throw error;
  }
  throw new Error("the study was not refused");
}

test("an empty file, one of blanks and one of comments are no study", () => {
  for (const text of ["", " \n\n", "# only a comment\n", "---\n"]) {
    expect(refusal(text)).toBe(
      "s.yaml: expected a study, got an empty file. Start one with `couplet new NAME`.",
    );
  }
});

test("bytes that are not UTF-8, or hold zeros, are another file", () => {
  expect(refusal(Buffer.from([0x63, 0xff, 0xfe]))).toBe(
    "s.yaml: expected a YAML text in UTF-8, got bytes that are not. Is this the right file?",
  );
  expect(refusal("couplet: 1\0\n")).toBe(
    "s.yaml: expected a YAML text, got a binary file. Is this the right file?",
  );
});

test("a file above the limit is refused before it is parsed", () => {
  expect(refusal(Buffer.alloc(50_000_000, 0x61))).toBe(
    `s.yaml: expected a study of at most ${MAX_STUDY_BYTES} bytes, got more. Is this the right file?`,
  );
});

test("a hundred thousand brackets do not exhaust the stack", () => {
  expect(refusal("[".repeat(100_000))).toBe(
    "s.yaml: expected a study, got lists nested too deeply. Is this the right file?",
  );
});

test("every fault of the YAML is listed with its place", () => {
  expect(refusal("a: [1, 2\nb: }\n")).toBe(
    "s.yaml:2:1: not valid YAML: Flow sequence in block collection must be sufficiently indented and end with a ].\n" +
      's.yaml:2:4: not valid YAML: Unexpected flow-map-end token in YAML stream: "}".',
  );
});

test("a key written twice is refused, together with what else is wrong", () => {
  expect(refusal("couplet: 1\ntitle: a\ntitle: b\ndecays: []\n")).toBe(
    "s.yaml:1:1: measurements: expected a list, got nothing.\n" +
      "s.yaml:3:1: not valid YAML: expected each key once, got it again. Take one of them out.\n" +
      "s.yaml:4:9: decays: expected at least 1 entry, got [].",
  );
});

test("aliases that multiply are refused at the first, in no time", () => {
  const levels = Array.from({ length: 9 }, (_, k) => {
    const value = k === 0 ? "x" : `*l${k - 1}`;
    return `l${k}: &l${k} [${Array.from({ length: 9 }, () => value).join(", ")}]\n`;
  });
  const started = performance.now();
  expect(refusal(levels.join(""))).toBe(
    "s.yaml:2:10: expected values, got aliases (`*name`) that stand for more than 100 copies. A study needs no aliases; write the values out.",
  );
  expect(performance.now() - started).toBeLessThan(5000);
});

test("an alias without its anchor is refused at its place", () => {
  expect(refusal("couplet: 1\ntitle: *nowhere\n")).toBe(
    "s.yaml:2:8: expected a value, got an alias (`*name`) of no anchor. A study needs no aliases; write the values out.",
  );
});

test("a single alias is YAML like any other", () => {
  const text = `couplet: 1
title: &title aliases
decays:
  - { from: baryon-decuplet, to: [baryon-octet, pseudoscalar-octet], L: 1, model: a }
measurements:
  - { width: Delta(1232) -> N pi, value: 117 +- 3 MeV, source: *title }
`;
  expect(readStudy(Buffer.from(text), "s.yaml").measurements[0]?.source).toBe("aliases");
});
