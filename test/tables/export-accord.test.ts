import { describe, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { couplet } from "../../src/gen/couplet.js";
import { encodeDecays } from "../../src/tables/encode-decays.js";
import { type AccordOptions, exportAccord } from "../../src/tables/export-accord.js";
import { decayLine, massLine, modeLine } from "../../src/tables/export-accord-lines.js";
import { parseOwnNumbers } from "../../src/tables/export-numbers.js";
import { studyText, tablesOf } from "../chain/run.js";
import { exactSum, readAccord } from "../support/accord-reader.js";
import { CONJUGATE, DELTA, FOLDED, HALF, K_STAR, type MadeParent, madeDecays } from "./made-decays.js";

const PLAIN: AccordOptions = { numbers: new Map(), rescale: false };
const NUMBERED: AccordOptions = { ...PLAIN, numbers: parseOwnNumbers(["Z(1500)+=9900003"]) };

const exported = (parents: readonly MadeParent[], options = PLAIN) =>
  exportAccord(madeDecays(parents), "a.pb", options);

/** Modes of an id as `fraction ids`, in the order of the text. */
function modes(text: string, id: number): string[] {
  return readAccord(text)
    .decays.get(id)!
    .modes.map(({ fraction, ids }) => `${fraction} ${ids.join(" ")}`);
}

describe("lines of the accord", () => {
  // Written out by hand from the Fortran formats of arXiv:hep-ph/0311123, section 3.
  test("columns are exact", () => {
    expect(decayLine(3124, 0.0156, "Lambda(1520)")).toBe(
      "DECAY      3124     1.56000000E-02   # Lambda(1520)",
    );
    expect(modeLine(0.225, [2212, -321], "Lambda(1520) -> p K-")).toBe(
      "     2.25000000E-01    2        2212      -321   # Lambda(1520) -> p K-",
    );
    expect(massLine(2212, 0.93827209, "p")).toBe("      2212     9.38272090E-01   # p");
  });

  test("a number too small for two digits of exponent keeps its sixteen columns", () => {
    expect(decayLine(1, 1.5e-123, "x")).toBe("DECAY         1     1.50000000-123   # x");
    expect(decayLine(1, 0, "x")).toBe("DECAY         1     0.00000000E+00   # x");
  });
});

describe("decay tables as text of the accord", () => {
  test("a real table is read back: widths, masses, and fractions whose printed digits add up to exactly 1", () => {
    const bytes = encodeDecays(tablesOf(studyText("decuplet")));
    const tables = couplet.v1.DecayTables.decode(bytes);
    const { decays, massesGeV } = readAccord(exportAccord(tables, "decuplet.pb", PLAIN));
    expect([...decays.keys()]).toEqual(tables.parents.map(({ hadron }) => hadron!.mcNumber));
    for (const parent of tables.parents) {
      const { widthGeV, modes } = decays.get(parent.hadron!.mcNumber!)!;
      expect(widthGeV).toBeCloseTo(parent.totalWidth! / 1000, 10);
      expect(massesGeV.get(parent.hadron!.mcNumber!)).toBeCloseTo(parent.hadron!.mass! / 1000, 8);
      expect(exactSum(modes.map(({ written }) => written))).toBe(10n ** 20n);
      const open = parent.rows.filter(({ partsPerBillion }) => partsPerBillion! > 0);
      const wanted = open.map(({ daughters, partsPerBillion }) => [
        partsPerBillion! / 1e9,
        daughters!.map(({ mcNumber }) => mcNumber!).sort((a, b) => Math.abs(b) - Math.abs(a)),
      ]);
      const byFraction = (a: unknown[], b: unknown[]) => (b[0] as number) - (a[0] as number);
      expect(modes.map(({ fraction, ids }) => [fraction, ids])).toEqual(wanted.sort(byFraction));
      for (const { ids } of modes) {
        for (const id of ids) expect(massesGeV.has(Math.abs(id))).toBe(true);
      }
    }
  });

  test("closed modes are named in a comment only, and no fraction is 0 or negative", () => {
    const text = exported([DELTA]);
    expect(text).toContain("# not written: Delta(1232)+ -> Sigma0 K+ (closed at the nominal mass)\n");
    expect(modes(text, 2214)).toEqual(["0.666666667 2212 111", "0.333333333 2112 211"]);
  });

  test("a mode that is open only through the width of a daughter is written as its final states", () => {
    const text = exported([FOLDED, DELTA]);
    expect(modes(text, 9_900_001)).toEqual(["0.4 2212 -211", "0.4 2212 -211 111", "0.2 2112 211 -211"]);
    expect(text).toContain("# X(1300)0 -> Delta(1232)+ pi-, Delta(1232)+ -> p pi0\n");
  });

  test("the final states of an antiparticle are those of the particle's table, conjugated", () => {
    expect(modes(exported([CONJUGATE, K_STAR]), 9_900_002)).toEqual([
      "0.666666666 2212 -311 -211",
      "0.333333334 2212 -321 111",
    ]);
  });

  test("an antiparticle's own table is left to conjugation", () => {
    const anti: MadeParent = {
      ...K_STAR,
      hadron: ["K*(892)-", -323, 892, "K*(892)+"],
      rows: [["K- pi0", 1_000_000_000]],
    };
    const text = exported([K_STAR, anti]);
    expect([...readAccord(text).decays.keys()]).toEqual([323]);
    expect(text).toContain("# K*(892)- (-323): by conjugation from K*(892)+\n");
  });

  test("a user's numbers stand for hadrons without one, and the scaling is written down", () => {
    const text = exported([HALF], { ...NUMBERED, rescale: true });
    expect(modes(text, 9_900_003)).toEqual(["0.6 2112 211", "0.4 2212 111"]);
    expect(text).toContain("# scaled up to 1 from 0.500000000: the rest has no final state\n");
  });

  test("a title of two lines stays a comment", () => {
    expect(exported([DELTA]).split("\n")[0]).toBe("# made?up");
  });
});

describe("what the accord cannot hold is refused in words", () => {
  const message = (action: () => unknown) => {
    try {
      action();
    } catch (error) {
      expect(error).toBeInstanceOf(InputError);
      return (error as Error).message;
    }
    return "nothing was thrown";
  };

  test("hadrons without a number are named together, with how to give them one", () => {
    expect(message(() => exported([HALF], { ...PLAIN, rescale: true }))).toBe(
      "a.pb: expected a Monte Carlo number for every hadron, got none for Z(1500)+. Give them numbers that nothing else has in your production: --number 'Z(1500)+=ID'",
    );
  });

  test("a part of the width without final state is not scaled away unasked", () => {
    expect(message(() => exported([HALF, FOLDED], NUMBERED))).toBe(
      [
        "a.pb: expected final states for the whole width of every parent, since the accord's fractions add up to 1; got a part without any for",
        "  Z(1500)+: 50.00 % in Z(1500)+ -> (remainder) (no daughters are named)",
        "  X(1300)0: 60.00 % in X(1300)0 -> Delta(1232)+ pi- (open only through the width of a daughter that has no table here)",
        "  Complete the study, or give --rescale to scale the other modes up to 1.",
      ].join("\n"),
    );
  });

  test("a number that another hadron has, an unknown name and a text of another form are refused", () => {
    const withNumber = (...texts: string[]) =>
      message(() => exported([HALF], { numbers: parseOwnNumbers(texts), rescale: true }));
    expect(withNumber("Z(1500)+=2212")).toBe(
      "--number: expected a number of its own for each hadron, got 2212 for p and Z(1500)+. Choose another with --number.",
    );
    expect(withNumber("Z(1500)=9900003")).toBe(
      '--number: expected a hadron of this table, got "Z(1500)". Nearest: Z(1500)+.',
    );
    expect(withNumber("Z(1500)+")).toBe(
      '--number: expected NAME=ID with an integer of at most nine digits, not 0, got "Z(1500)+".',
    );
    expect(withNumber("p=1", "p=2")).toBe("--number: expected one number for p, got several.");
  });
});
