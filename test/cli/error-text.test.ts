import { expect, test } from "vitest";
import { errorText } from "../../src/cli/error-text.js";

test("an error names the program once", () => {
  expect(errorText("t.pb: expected a table")).toBe("couplet: t.pb: expected a table");
  expect(errorText("couplet fit: --toys: expected 1")).toBe("couplet fit: --toys: expected 1");
});

test("names of the library's functions are left out, at the start and behind a place in a study", () => {
  expect(errorText('parseIrrep: expected a dimension, got "x".')).toBe(
    'couplet: expected a dimension, got "x".',
  );
  expect(errorText('productContent: factor: expected 3 or 3bar, got "8".')).toBe(
    'couplet: expected 3 or 3bar, got "8".',
  );
  expect(
    errorText(
      "s.yaml:3:4: x/irrep: parseIrrep: expected 8, got 9.\ns.yaml:4:1: x/place: placeOf: name: expected N.",
    ),
  ).toBe("couplet: s.yaml:3:4: x/irrep: expected 8, got 9.\ns.yaml:4:1: x/place: expected N.");
});

test("keys of a study and names of files stay, though they look alike", () => {
  const text = "s.yaml:3:1: quarkLine: expected a list, got 1.";
  expect(errorText(text)).toBe(`couplet: ${text}`);
  expect(errorText("myTable: expected a file, got a folder.")).toBe(
    "couplet: myTable: expected a file, got a folder.",
  );
});
