import { describe, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { draftStudy, readStudy } from "../../src/study/read-study.js";
import { studySchema } from "../../src/study/schema.js";

const SHORT = `couplet: 1
title: short
decays:
  - { from: baryon-decuplet, to: [baryon-octet, pseudoscalar-octet], L: 1, model: a }
measurements:
  - { width: Delta(1232) -> N pi, value: 117 +- 3 MeV, source: invented }
`;

const read = (text: string) => readStudy(Buffer.from(text), "s.yaml");

/** The message with which a study is refused, as lines. */
function refusal(text: string): string[] {
  try {
    read(text);
  } catch (error) {
    if (error instanceof InputError) return error.message.split("\n");
    throw error;
  }
  throw new Error("the study was not refused");
}

const withMultiplet = (members: string) =>
  SHORT.replace(
    "decays:",
    `multiplets:\n  mine:\n    irrep: 8\n    spinParity: 5/2-\n    members:\n${members}decays:`,
  );

describe("a study", () => {
  test("of six lines is complete; what it leaves out has its default", () => {
    const { positions, ...study } = read(SHORT);
    expect(study).toMatchObject({
      file: "s.yaml",
      text: SHORT,
      title: "short",
      multiplets: {},
      mixing: [],
      decays: [
        {
          path: "decays/0",
          name: "",
          from: "baryon-decuplet",
          to: ["baryon-octet", "pseudoscalar-octet"],
          L: 1,
          twoS: undefined,
          model: { id: "a", options: {} },
          masses: "charge",
          daughters: "folded",
        },
      ],
      quarkLine: [],
      measurements: [
        {
          path: "measurements/0",
          kind: "width",
          channels: ["Delta(1232) -> N pi"],
          value: { value: 117, plus: 3, minus: 3, unit: "MeV" },
          signOnly: false,
          sign: 1,
          phase: undefined,
          normalisation: undefined,
          source: "invented",
          use: "both",
        },
      ],
      normalisations: {},
      priors: [],
      fit: { mirrors: "refuse", theoryError: 0, masses: "vary" },
      breaking: 0.2,
      hadronNames: [],
    });
    expect(positions.get("measurements/0/value")).toEqual({ file: "s.yaml", line: 6, column: 42 });
    expect(positions.get("decays/0/to/1")).toEqual({ file: "s.yaml", line: 4, column: 49 });
  });

  test("reads members with their units, and a spin and parity", () => {
    const study = read(
      withMultiplet(
        "      - { name: X(1500), place: N, mass: 1.5 +- 0.01 GeV, width: sum, chargeStates: { X(1500)+: { mass: 1501 MeV } } }\n",
      ),
    );
    expect(study.multiplets["mine"]).toEqual({
      irrep: "8",
      twoJ: 5,
      parity: -1,
      cParity: null,
      baryonNumber: 1,
      members: [
        {
          name: "X(1500)",
          place: "N",
          mass: { value: 1500, plus: 10, minus: 10, unit: "MeV" },
          width: "sum",
          chargeStates: {
            "X(1500)+": { mass: { value: 1501, plus: 0, minus: 0, unit: "MeV" }, mcAliases: [] },
          },
        },
      ],
    });
    expect(study.hadronNames).toEqual(["X(1500)", "X(1500)+"]);
  });

  test("with Windows line ends or a byte order mark is the same study", () => {
    const { text: _, positions: __, ...plain } = read(SHORT);
    for (const variant of [SHORT.replaceAll("\n", "\r\n"), `\uFEFF${SHORT}`]) {
      const { text: _text, positions: _positions, ...other } = read(variant);
      expect(other).toEqual(plain);
    }
  });
});

describe("a study with a fault of form says where, what was expected, what came and how to mend it", () => {
  test.each([
    ["couplet: 1", "couplet: 2", "s.yaml:1:10: couplet: expected 1, got 2."],
    ["title: short", "title: ''", 's.yaml:2:8: title: expected at least 1 character, got "".'],
    ["title: short", "title: 5", "s.yaml:2:8: title: expected a text, got 5."],
    ["L: 1", "L: -1", "s.yaml:4:73: decays/0/L: expected at least 0, got -1."],
    ["L: 1", "L: 1.5", "s.yaml:4:73: decays/0/L: expected a whole number, got 1.5."],
    ["L: 1", "L: 9", "s.yaml:4:73: decays/0/L: expected at most 8, got 9."],
    ["L: 1", "L: 1e999", 's.yaml:4:73: decays/0/L: expected a number, got "1e999".'],
    ["L: 1", "L: 1, S: two", 's.yaml:4:79: decays/0/S: expected a spin such as 1 or 3/2, got "two".'],
    [
      "L: 1",
      "L: 1, masses: mean",
      's.yaml:4:84: decays/0/masses: expected "charge" or "average", got "mean".',
    ],
    [
      "[baryon-octet, pseudoscalar-octet]",
      "baryon-octet",
      's.yaml:4:34: decays/0/to: expected a list of two, got "baryon-octet".',
    ],
    ["model: a", "model: { n: 1 }", "s.yaml:4:83: decays/0/model/id: expected a text, got nothing."],
    [
      "model: a",
      "model: { id: b, rangeMeV: 5 parsec }",
      's.yaml:4:102: decays/0/model/rangeMeV: expected an energy unit such as MeV or GeV, got "parsec" in "5 parsec".',
    ],
    [
      "117 +- 3 MeV",
      "117 +- 3",
      's.yaml:6:42: measurements/0/value: expected a unit such as MeV or GeV, got none in "117 +- 3".',
    ],
    [
      "117 +- 3 MeV",
      "-117 +- 3 MeV",
      's.yaml:6:42: measurements/0/value: expected a value >= 0, got "-117 +- 3 MeV".',
    ],
    [
      "117 +- 3 MeV",
      "1e999",
      's.yaml:6:42: measurements/0/value: expected a number that fits a double, got "1e999".',
    ],
    [
      "width: Delta(1232) -> N pi, value: 117 +- 3 MeV",
      "fraction: Delta(1232) -> N pi, value: 117 %",
      's.yaml:6:45: measurements/0/value: expected a fraction from 0 to 1, got "117 %".',
    ],
    [
      "width: Delta(1232) -> N pi, value: 117 +- 3 MeV",
      "ratio: [Delta(1232) -> N pi], value: 1 +- 0.1",
      's.yaml:6:14: measurements/0/ratio: expected at least 2 entries, got ["Delta(1232) -> N pi"].',
    ],
    [", source: invented", "", "s.yaml:6:5: measurements/0/source: expected a text, got nothing."],
    [
      "source: invented",
      "source: invented, use: plot",
      's.yaml:6:79: measurements/0/use: expected "fit" or "table" or "both", got "plot".',
    ],
    [
      "source: invented",
      "source: invented, colour: red",
      "s.yaml:6:74: measurements/0: expected keys among width, value, normalisation, source, use, got `colour`.",
    ],
  ])("%s -> %s", (from, to, message) => {
    expect(SHORT).toContain(from);
    expect(refusal(SHORT.replace(from, to))).toEqual([message]);
  });

  test("a misspelled key is named with those that there are", () => {
    expect(refusal(SHORT.replace("title:", "titel:"))).toEqual([
      "s.yaml:1:1: title: expected a text, got nothing.",
      `s.yaml:2:1: study: expected keys among ${Object.keys(studySchema.shape).join(", ")}, got \`titel\` (did you mean \`title\`?).`,
    ]);
  });

  test.each([
    [
      "mass: 1500, width: 100 MeV",
      's.yaml:8:42: multiplets/mine/members/0/mass: expected a unit such as MeV or GeV, got none in "1500".',
    ],
    [
      "mass: 0 MeV, width: 100 MeV",
      's.yaml:8:42: multiplets/mine/members/0/mass: expected a mass > 0, got "0 MeV".',
    ],
    [
      "mass: 1500 MeV, width: -100 MeV",
      's.yaml:8:59: multiplets/mine/members/0/width: expected a width > 0, got "-100 MeV".',
    ],
  ])("a member with %s", (values, message) => {
    expect(refusal(withMultiplet(`      - { name: X(1500), place: N, ${values} }\n`))).toEqual([message]);
  });

  test("spin and parity that no hadron has", () => {
    const text = withMultiplet("      - { name: X(1500), place: N }\n").replace("5/2-", "4/2-");
    expect(refusal(text)).toEqual([
      's.yaml:6:17: multiplets/mine/spinParity: expected spin and parity such as `5/2-` or `1+`, got "4/2-".',
    ]);
  });

  test("a file that is no mapping is shown in part only", () => {
    expect(refusal("x".repeat(5000))).toEqual([
      `s.yaml:1:1: study: expected a mapping (\`key: value\` lines), got "${"x".repeat(59)}....`,
    ]);
  });
});

describe("all faults of form", () => {
  const text = `couplet: 1
title: several faults
decays:
  - { from: baryon-decuplet, to: [baryon-octet, pseudoscalar-octet], L: one, model: a }
  - { name: second, from: baryon-decuplet, to: [baryon-octet, pseudoscalar-octet], L: 1, model: a }
measurements:
  - { width: Delta(1232) -> N pi, value: 117, source: invented }
  - { fraction: Sigma(1385) -> Lambda pi, value: 1.2, source: invented, use: table }
  - { width: Delta(1232) -> N pi, value: 117 +- 3 MeV, source: invented }
`;

  test("are reported at once, in the order of the file", () => {
    expect(refusal(text)).toEqual([
      's.yaml:4:73: decays/0/L: expected a number, got "one".',
      's.yaml:7:42: measurements/0/value: expected a unit such as MeV or GeV, got none in "117".',
      "s.yaml:8:50: measurements/1/value: expected a fraction from 0 to 1, got 1.2.",
    ]);
  });

  test("leave the sound entries, each with its path in the file", () => {
    const { study, problems } = draftStudy(Buffer.from(text), "s.yaml");
    expect(problems.length).toBe(3);
    expect(study?.decays.map(({ path, name }) => [path, name])).toEqual([["decays/1", "second"]]);
    expect(study?.measurements.map(({ path }) => path)).toEqual(["measurements/2"]);
  });
});

test("a study that contains itself is refused by its form", () => {
  expect(() => readStudy(Buffer.from("couplet: &a [*a]\ntitle: x\n"), "s.yaml")).toThrow(
    "s.yaml:1:13: couplet: expected 1, got [[[",
  );
});
