import { expect, test } from "vitest";
import { exactSum, readAccord } from "./accord-reader.js";

const TEXT = `# a comment
Block Mass Q= 91.0 # in GeV
  2212  .938272 # p
decay 3124 1.56D-02
   2.25E-01  2  2212 -321 # Lambda(1520) -> p K-

 +7.75e-01  3  3122 211 -211
`;

test("the reader takes what the grammar allows", () => {
  const { massesGeV, decays } = readAccord(TEXT);
  expect([...massesGeV]).toEqual([[2212, 0.938272]]);
  expect(decays.get(3124)).toEqual({
    widthGeV: 0.0156,
    modes: [
      { fraction: 0.225, written: "2.25E-01", ids: [2212, -321] },
      { fraction: 0.775, written: "+7.75e-01", ids: [3122, 211, -211] },
    ],
  });
});

test.each([
  ["a wrong count of daughters", "DECAY 1 1.0\n 1.0 3 2212 -321", "line 2: no mode:  1.0 3 2212 -321"],
  ["a single daughter", "DECAY 1 1.0\n 1.0 1 2212", "line 2: no mode:  1.0 1 2212"],
  ["a second table", "DECAY 1 1.0\nDECAY 1 1.0", "line 2: a second table: DECAY 1 1.0"],
  ["a width that is no number", "DECAY 1 wide", "line 1: no DECAY line: DECAY 1 wide"],
  ["an unknown keyword", "TABLE 1 1.0", "line 1: no keyword: TABLE 1 1.0"],
  ["data before any block", " 1 2.0", "line 1: data outside a block:  1 2.0"],
  ["a tab", "DECAY\t1 1.0", "line 1: a tab: DECAY\t1 1.0"],
])("the reader refuses %s", (_, text, message) => {
  expect(() => readAccord(text)).toThrow(message);
});

test("sums of printed decimals are exact", () => {
  expect(exactSum(["6.66666667E-01", "3.33333333E-01"])).toBe(10n ** 20n);
  expect(exactSum(["6.66666667E-01", "3.33333334E-01"])).not.toBe(10n ** 20n);
});
