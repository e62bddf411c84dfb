import { expect, test } from "vitest";
import { shown } from "../src/require.js";

test("a value in a message is JSON, text in quotes, and nothing has a word", () => {
  expect(
    ["a\nb", 1.5, Number.NaN, 7n, true, null, undefined, [1, "a", []], { p: 1, "q r": { s: [null] } }].map(
      shown,
    ),
  ).toEqual([
    '"a\\nb"',
    "1.5",
    "NaN",
    "7",
    "true",
    "null",
    "nothing",
    '[1,"a",[]]',
    '{"p":1,"q r":{"s":[null]}}',
  ]);
});

test("a long value is cut behind 60 characters", () => {
  expect(shown("x".repeat(58))).toBe(`"${"x".repeat(58)}"`);
  expect(shown("x".repeat(59))).toBe(`"${"x".repeat(59)}...`);
  expect(shown(Array.from({ length: 1000 }, () => 1))).toBe(`[${"1,".repeat(29)}1...`);
});

test("a value that contains itself, or more of itself than memory holds, is cut too", () => {
  const ring: unknown[] = [];
  ring.push(ring);
  expect(shown(ring)).toBe(`${"[".repeat(60)}...`);
  let many: unknown = "ha";
  for (let k = 0; k < 100; k++) many = { a: many, b: many };
  expect(shown(many)).toBe(`${'{"a":'.repeat(12)}...`);
});
