import { describe, expect, test } from "vitest";
import { WHOLE } from "../../src/completion/parts-per-billion.js";
import { decodeDecays } from "../../src/tables/decode-decays.js";
import { encodeDecays } from "../../src/tables/encode-decays.js";
import { rowsEvaluator, tableHadrons } from "../../src/tables/evaluate-rows.js";
import { gridWidthMeV } from "../../src/widths/mass-grid.js";
import { octetStudy, parentOf, rowOf, tablesOf } from "./whole-study.js";

const mode = (text: string, rest: string) => `  - { mode: "${text}", ${rest}, source: invented }\n`;
const modes = (...lines: string[]) => octetStudy(`modes:\n${lines.join("")}`);
const messageOf = (text: string): string => {
  try {
    tablesOf(text);
  } catch (error) {
    return (error as Error).message;
  }
  throw new Error("expected a refusal, got none");
};

describe("a mode outside the symmetry is a row", () => {
  const tables = tablesOf(
    modes(
      mode("N(1675)+ -> p gamma", "fraction: 0.01 +- 0.002"),
      mode("N(1675)+ -> p pi+ pi-", "width: 20 +- 5 MeV"),
    ),
  );

  test("with its measured number, its source, and no waves", () => {
    const radiative = rowOf(tables, "N(1675)+ -> p gamma");
    expect(radiative.origin).toBe("measured");
    expect(radiative.fraction.value).toBe(0.01);
    expect(radiative.fraction.plus).toBeCloseTo(0.002, 12);
    expect(radiative.widthMeV.value).toBeCloseTo(1.45, 12);
    expect([radiative.sources, radiative.waves]).toEqual([["invented"], []]);
    const three = rowOf(tables, "N(1675)+ -> p pi+ pi-");
    expect(three.widthMeV.value).toBe(20);
    expect(three.daughters.map(({ name }) => name)).toEqual(["p", "pi+", "pi-"]);
    expect(three.thresholdMeV).toBeCloseTo(938.27208816 + 2 * 139.57039, 9);
  });

  test("that runs as the power of the distance from threshold: 3 for a photon, 2 for three bodies", () => {
    const read = decodeDecays(encodeDecays(tables), "made.pb");
    const parent = read.parents.find(({ hadron }) => hadron.name === "N(1675)+")!;
    const evaluator = rowsEvaluator(parent, tableHadrons(read));
    const widths = new Array<number>(evaluator.rowCount).fill(Number.NaN);
    for (const [id, power, nominal] of [
      ["N(1675)+ -> p gamma", 3, 1.45],
      ["N(1675)+ -> p pi+ pi-", 2, 20],
    ] as const) {
      const row = rowOf(tables, id);
      const k = parent.rows.findIndex((candidate) => candidate.id === id);
      for (const massMeV of [1300, 1675, 1800]) {
        const distance = (m: number) => m - row.thresholdMeV;
        const wanted = nominal * (distance(massMeV) / distance(1675)) ** power;
        evaluator.widthsInto(massMeV, widths, 0);
        expect(Math.abs(widths[k]! / wanted - 1)).toBeLessThan(1e-12);
        expect(Math.abs(gridWidthMeV(row.grid!, massMeV) / wanted - 1)).toBeLessThan(1e-4);
      }
    }
  });

  test("and the remainder shrinks by what it takes, to the last part", () => {
    const { rows } = parentOf(tables, "N(1675)+");
    expect(rows.reduce((sum, { partsPerBillion }) => sum + partsPerBillion, 0)).toBe(WHOLE);
    const others = rows.slice(0, -1).reduce((sum, { fraction }) => sum + fraction.value, 0);
    expect(rows.at(-1)!.flags).toEqual(["undecayable"]);
    expect(rows.at(-1)!.fraction.value).toBeCloseTo(1 - others, 12);
    const integrated = rows.reduce((sum, row) => sum + row.integrated!.value, 0);
    expect(integrated).toBeCloseTo(1, 6);
  });
});

test("a remainder with named daughters is divided by its weights and can be decayed", () => {
  const plain = tablesOf(octetStudy(""));
  const named = tablesOf(
    modes(mode("N(1675)+ -> p pi+ pi-", "remainder: 3"), mode("N(1675)+ -> n pi+ pi0", "remainder: 1")),
  );
  const left = parentOf(plain, "N(1675)+").rows.at(-1)!;
  const [first, second] = parentOf(named, "N(1675)+").rows.slice(-2);
  expect([first!.origin, first!.flags, first!.power]).toEqual(["remainder", [], 2]);
  expect(first!.fraction.value).toBeCloseTo(0.75 * left.fraction.value, 14);
  expect(second!.fraction.value).toBeCloseTo(0.25 * left.fraction.value, 14);
  expect(first!.fraction.plus).toBeCloseTo(0.75 * left.fraction.plus, 14);
  const undecayable = parentOf(named, "N(1675)+").rows.filter(({ flags }) => flags.includes("undecayable"));
  expect(undecayable).toEqual([]);
});

test("a summed total width grows by measured fractions: T = (sum of widths)/(1 - sum of fractions)", () => {
  const text = modes(mode("N(1675)+ -> p gamma", "fraction: 0.02 +- 0.005")).replace(
    "width: 145 +- 15 MeV",
    "width: sum",
  );
  const { rows, totalWidthMeV } = parentOf(tablesOf(text), "N(1675)+");
  const widths = rows.slice(0, -1).reduce((sum, { widthMeV }) => sum + widthMeV.value, 0);
  expect(totalWidthMeV).toBeCloseTo(widths / 0.98, 9);
  expect(rows.at(-1)!.fraction.value).toBeCloseTo(0.02, 14);
});

test("isospin multiplets split by SU(2) coefficients and phase space, equal masses by the former alone", () => {
  const tables = tablesOf(modes(mode("N(1675) -> Delta(1232) pi", "fraction: 0.3 +- 0.07, power: 0")));
  const share = (id: string) => rowOf(tables, id).fraction.value / 0.3;
  expect(share("N(1675)+ -> Delta(1232)++ pi-")).toBeCloseTo(1 / 2, 12);
  expect(share("N(1675)+ -> Delta(1232)+ pi0")).toBeCloseTo(1 / 3, 12);
  expect(share("N(1675)0 -> Delta(1232)+ pi-")).toBeCloseTo(1 / 6, 12);
  expect(rowOf(tables, "N(1675)+ -> Delta(1232)++ pi-").flags).toEqual(["isospin-split"]);
});

describe("a quoted sum with the charge conjugate", () => {
  const particles = `particles:
  - { name: f1(1420), mass: 1426.3 MeV, width: 54.5 MeV, charge: 0, spinParity: 1++, isospin: 0 }
`;

  test("`K* Kbar + c.c.` is four rows, a quarter each, each written once", () => {
    const tables = tablesOf(
      octetStudy(
        `${particles}modes:\n${mode("f1(1420) -> K*(892) Kbar + c.c.", "fraction: 0.8 +- 0.1, power: 0")}`,
      ),
    );
    const rows = parentOf(tables, "f1(1420)").rows.filter(({ origin }) => origin === "measured");
    expect(rows.map(({ id }) => id).sort()).toEqual([
      "f1(1420) -> K*(892)+ K-",
      "f1(1420) -> K*(892)- K+",
      "f1(1420) -> K*(892)0 K0bar",
      "f1(1420) -> K*(892)0bar K0",
    ]);
    for (const { fraction } of rows) expect(fraction.value).toBeCloseTo(0.2, 14);
  });

  test("without it the missing conjugate is named", () => {
    const text = octetStudy(`${particles}modes:\n${mode("f1(1420) -> K*(892)+ K-", "fraction: 0.2 +- 0.1")}`);
    expect(messageOf(text)).toBe(
      "study.yaml:21:5: modes/0: expected the charge conjugate f1(1420) -> K*(892)- K+ beside f1(1420) -> K*(892)+ K-, got none. Add `+ c.c.` and the sum of both, or a mode of its own.",
    );
  });
});

describe("refused with where, what and how to mend it:", () => {
  test.each([
    [
      "a charge that is not conserved",
      mode("N(1675)+ -> n gamma", "fraction: 0.01 +- 0.002"),
      'N(1675)+ -> n gamma: expected a final state that conserves charge, got "1 before and 0 after". Check the names; a weak decay takes `weak: true`.',
    ],
    [
      "strangeness, unless the decay is weak",
      mode("N(1675)+ -> Lambda pi+", "fraction: 0.01 +- 0.002"),
      'N(1675)+ -> Lambda pi+: expected a final state that conserves strangeness, got "0 before and -1 after". Check the names; a weak decay takes `weak: true`.',
    ],
    [
      "a C parity",
      mode("omega(782) -> pi0 pi0", "fraction: 0.01 +- 0.002"),
      'omega(782) -> pi0 pi0: expected a final state that conserves C parity, got "-1 before and 1 after". Check the names; a weak decay takes `weak: true`.',
    ],
    [
      "a closed final state",
      mode("N(1675)+ -> p phi(1020)", "fraction: 0.01 +- 0.002"),
      "N(1675)+ -> p phi(1020): expected a threshold below the parent's 1675 MeV, got 1957.73308816. Check the masses, or give a `threshold` where an unstable daughter can be lighter.",
    ],
    [
      "an unknown daughter",
      mode("N(1675)+ -> p gama", "fraction: 0.01 +- 0.002"),
      'mode: expected particles of the study, of the catalogue, a photon or leptons, got "gama". Did you mean gamma? Another one goes under `particles`.',
    ],
    [
      "an inclusive mode beside one it contains",
      mode("N(1675)+ -> Delta(1232)++ pi-", "fraction: 0.2 +- 0.1") +
        mode("N(1675)+ -> p pi+ pi-", "fraction: 0.3 +- 0.1"),
      "expected every final state once, got N(1675)+ -> p pi+ pi-, which contains N(1675)+ -> Delta(1232)++ pi- by the decays of its daughters. Leave one of the two out, or let the larger one take the `remainder`.",
    ],
    [
      "a channel of the study's decays",
      mode("N(1675)+ -> p pi0", "fraction: 0.2 +- 0.1"),
      "expected every final state once, got N(1675)+ -> p pi0 and N(1675)+ -> p pi0, which are the same. A channel of the study's decays is written under `measurements`.",
    ],
    [
      "an isospin multiplet in three bodies",
      mode("N(1675)+ -> N pi pi", "fraction: 0.2 +- 0.1"),
      'mode: expected charge states of each of three or more daughters, got ["N","pi","pi"]. Write one mode for each.',
    ],
  ])("%s", (_, line, text) => {
    const message = messageOf(modes(line));
    expect(message.replace(/^study\.yaml:\d+:\d+: modes\/\d: /, "")).toBe(text);
  });

  test("an upper limit, which settles no row", () => {
    expect(messageOf(modes(mode("N(1675)+ -> p gamma", "fraction: < 1 % at 90 %")))).toBe(
      'study.yaml:19:46: modes/0/fraction: expected a value, since an upper limit settles no row, got "< 1 % at 90 %".',
    );
  });

  test("a remainder of a summed width", () => {
    const text = modes(mode("N(1675)+ -> p gamma", "remainder: 1")).replace(
      "width: 145 +- 15 MeV",
      "width: sum",
    );
    expect(messageOf(text)).toBe(
      'study.yaml:19:5: modes/0: mode: expected a parent with a measured total width, which leaves a remainder, got "N(1675)+". Give the member a total width, or the mode a value.',
    );
  });
});

test("a remainder named p pi+ pi- may stand beside Delta pi, since it is what is left", () => {
  const tables = tablesOf(
    modes(
      mode("N(1675) -> Delta(1232) pi", "fraction: 0.3 +- 0.07"),
      mode("N(1675)+ -> p pi+ pi-", "remainder: 1"),
    ),
  );
  expect(rowOf(tables, "N(1675)+ -> p pi+ pi-").fraction.value).toBeGreaterThan(0.1);
});
