import { expect, test } from "vitest";
import { DEMO_STUDY } from "../../src/cli/demo-study.js";
import { couplet } from "../../src/gen/couplet.js";
import { decodeDecays } from "../../src/tables/decode-decays.js";
import { encodeDecays } from "../../src/tables/encode-decays.js";
import { fractionsAt, rowsEvaluator, tableHadrons } from "../../src/tables/evaluate-rows.js";
import { partialWidthMeV } from "../../src/widths/partial-width.js";
import { widthModel } from "../../src/widths/width-model.js";
import { studyText, tablesOf } from "../chain/run.js";

const tablesOfText = (text: string) => decodeDecays(encodeDecays(tablesOf(text)), "test.pb");
const demo = tablesOfText(DEMO_STUDY);
const hadrons = tableHadrons(demo);
const parentNamed = (name: string) => demo.parents.find(({ hadron }) => hadron.name === name)!;

function widthsAt(tables: couplet.v1.DecayTables, parent: couplet.v1.Parent, massMeV: number): number[] {
  const evaluator = rowsEvaluator(parent, tableHadrons(tables));
  const widths = new Array<number>(evaluator.rowCount).fill(Number.NaN);
  evaluator.widthsInto(massMeV, widths, 0);
  return widths;
}

const relative = (value: number, wanted: number) =>
  wanted === 0 ? Math.abs(value) : Math.abs(value / wanted - 1);

test("at the nominal mass every row has its width, measured or predicted, with charge or averaged masses", () => {
  const averaged = studyText("decuplet");
  const charge = averaged.replaceAll("masses: average", "masses: charge");
  expect(charge).not.toBe(averaged);
  for (const tables of [demo, tablesOfText(averaged), tablesOfText(charge)]) {
    let rows = 0;
    for (const parent of tables.parents) {
      const widths = widthsAt(tables, parent, parent.hadron.mass!);
      for (const [k, row] of parent.rows.entries()) {
        expect(relative(widths[k]!, row.width.value!), row.id).toBeLessThan(1e-12);
        rows++;
      }
    }
    expect(rows).toBeGreaterThan(10);
  }
});

test("a row follows its width model off the nominal mass, a measured one scaled to what was measured", () => {
  const parent = parentNamed("Sigma(1731)+");
  const widths = widthsAt(demo, parent, 1800);
  for (const [k, row] of parent.rows.entries()) {
    if (row.waves.length === 0) continue;
    const [first, second] = row.daughters.map(({ name }) => hadrons.get(name)!.mass!);
    const shape = (massMeV: number, squared: number) =>
      partialWidthMeV(
        widthModel("a", { n: 2 }),
        squared,
        { parentMeV: massMeV, firstMeV: first!, secondMeV: second!, identicalDaughters: false },
        { L: 2 },
      );
    const wanted =
      row.kinematics === couplet.v1.Kinematics.KINEMATICS_OPEN
        ? row.width.value! * (shape(1800, 1) / shape(1731, 1))
        : shape(1800, row.waves[0]!.flavourAmplitude! ** 2);
    expect(relative(widths[k]!, wanted), row.id).toBeLessThan(1e-12);
  }
  const closed = parent.rows.findIndex(({ id }) => id === "Sigma(1731)+ -> Sigma+ eta");
  expect(parent.rows[closed]!.width.value).toBe(0);
  expect(widths[closed]).toBeGreaterThan(0.01);
});

test("rows are zero below threshold; a remainder keeps its width above the lowest threshold of its parent", () => {
  const parent = parentNamed("Sigma(1731)+");
  const lowest = Math.min(...parent.rows.flatMap((row) => (row.waves.length > 0 ? [row.threshold!] : [])));
  const remainder = parent.rows.at(-1)!;
  expect([lowest, remainder.daughters]).toEqual([1255.25339, []]);
  expect(widthsAt(demo, parent, lowest - 0.01)).toEqual(parent.rows.map(() => 0));
  const above = widthsAt(demo, parent, lowest + 0.01);
  expect(above.pop()).toBe(remainder.width.value);
  expect(above.filter((width) => width > 0)).toHaveLength(1);
});

test("the remainder of a parent below all its thresholds is there at every mass", () => {
  const parent = couplet.v1.Parent.decode(couplet.v1.Parent.encode(parentNamed("Sigma(1731)+")).finish());
  parent.hadron.mass = 1200;
  for (const wave of parent.rows.flatMap((row) => row.waves)) wave.re = 0;
  const remainder = parent.rows.at(-1)!.width.value!;
  for (const massMeV of [10, 1200, 1250]) {
    expect(widthsAt(demo, parent, massMeV)).toEqual(
      parent.rows.map(({ id }) => (id.endsWith("(remainder)") ? remainder : 0)),
    );
  }
});

test("a row outside the symmetry grows with its power of the distance from threshold", () => {
  const parent = couplet.v1.Parent.decode(couplet.v1.Parent.encode(parentNamed("Sigma(1731)+")).finish());
  const row = parent.rows[0]!;
  row.waves = [];
  row.threshold = 1631;
  row.power = 3;
  const widths = [1781, 1731, 1681, 1631, 1600].map((massMeV) => widthsAt(demo, parent, massMeV)[0]! / 2);
  expect(widths).toEqual([1.5 ** 3, 1, 0.5 ** 3, 0, 0]);
  row.threshold = 1732;
  expect(() => rowsEvaluator(parent, hadrons)).toThrow(
    expect.objectContaining({
      name: "TableError",
      message: `${row.id}: expected a width, a threshold below the parent's mass and a power >= 0, got others`,
    }),
  );
});

test("a folded row follows its grid, to the grid's end", () => {
  const parent = couplet.v1.Parent.decode(couplet.v1.Parent.encode(parentNamed("Sigma(1731)+")).finish());
  const row = parent.rows[0]!;
  // ln width = 2 ln x: the width is the square of the distance.
  const points = [1, 4, 100].map((x) => Math.fround(x));
  row.grid = couplet.v1.MassGrid.create({
    threshold: 1400,
    distances: points,
    logWidths: points.map((x) => 2 * Math.log(x)),
    slopes: points.map(() => 2),
  });
  const closedForm = rowsEvaluator(parent, hadrons);
  row.flags.push(couplet.v1.Flag.FLAG_FOLDED);
  const folded = rowsEvaluator(parent, hadrons);
  const widths = [0];
  for (const [massMeV, wanted] of [
    [1399, 0],
    [1400.5, 0.25],
    [1402, 4],
    [1450, 2500],
    [1500, 10_000],
  ] as const) {
    folded.widthsInto(massMeV, widths, 0);
    expect(relative(widths[0]!, wanted)).toBeLessThan(1e-12);
  }
  expect(() => folded.widthsInto(1501, widths, 0)).toThrow(
    expect.objectContaining({
      message: "gridWidthMeV: massMeV: expected a mass up to 1500, got 1501. The grid ends there.",
    }),
  );
  closedForm.widthsInto(1731, widths, 0);
  expect(relative(widths[0]!, row.width.value!)).toBeLessThan(1e-12);
  row.flags = [];
  row.daughters[1]!.name = "Xi0";
  rowsEvaluator(parent, hadrons).widthsInto(1402, widths, 0);
  expect(relative(widths[0]!, 4)).toBeLessThan(1e-12);
});

test("fractions at a mass are parts of the sum of widths; all are zero where every row is closed", () => {
  const evaluator = rowsEvaluator(parentNamed("Xi(1874)0"), hadrons);
  const widths = [Number.NaN, ...new Array<number>(evaluator.rowCount).fill(0), Number.NaN];
  const total = evaluator.widthsInto(1900, widths, 1);
  expect(fractionsAt(evaluator, 1900)).toEqual(widths.slice(1, -1).map((width) => width / total));
  expect(
    relative(
      fractionsAt(evaluator, 1900).reduce((a, b) => a + b),
      1,
    ),
  ).toBeLessThan(1e-14);
  expect([widths[0], widths.at(-1)]).toEqual([Number.NaN, Number.NaN]);
  expect(fractionsAt(evaluator, 1200)).toEqual(widths.slice(1, -1).map(() => 0));
});

type Change = (row: couplet.v1.Row, wave: couplet.v1.Wave, parent: couplet.v1.Parent) => void;

const REFUSED: readonly [string, Change, string][] = [
  [
    "an unknown width model",
    (_, wave) => {
      wave.model = "z";
    },
    'expected a width model among a, b, c, d, e, got "z". Read the table with a newer version of Couplet.',
  ],
  [
    "a missing option",
    (_, wave) => {
      wave.model = "b";
      wave.options = wave.options.slice(0, 1);
    },
    "expected width model b with the options [rangeMeV in MeV, nucleonMassMeV in MeV], got [n in 1]. Read the table with a newer version of Couplet.",
  ],
  [
    "an impossible wave",
    (_, wave) => {
      wave.twoL = 3;
    },
    "width model a: L: expected an integer from 0 to 12, got 1.5. Give the orbital angular momentum.",
  ],
  [
    "a daughter that is not in the table",
    (row) => {
      row.daughters[0]!.name = "X";
    },
    "expected X among the hadrons of the table with its mass, got none",
  ],
  [
    "one daughter alone",
    (row) => {
      row.daughters = row.daughters.slice(0, 1);
    },
    "expected two daughters and a parent's mass > 0 of a row with waves, got others",
  ],
  [
    "a width that the nominal masses forbid, without a grid,",
    (row, wave) => {
      row.daughters[1]!.name = "Xi0";
      row.grid = undefined as never;
      wave.re = 2;
    },
    "expected a grid, since the nominal masses forbid the decay, got a width without one. Read the table with a newer version of Couplet.",
  ],
  [
    "a grid in the wrong order",
    (row) => {
      row.flags = [couplet.v1.Flag.FLAG_FOLDED];
      const [distances, logWidths, slopes] = [
        [2, 1],
        [0, 0],
        [1, 1],
      ];
      row.grid = couplet.v1.MassGrid.create({ threshold: 1400, distances, logWidths, slopes } as never);
    },
    "expected a grid of two points or more in ascending order, got another",
  ],
  [
    "an amplitude that is no number",
    (_, wave) => {
      wave.re = Number.NaN;
    },
    "expected finite amplitudes, got others",
  ],
];

test.each(REFUSED)("%s is refused as a table of another version", (_, change, message) => {
  const parent = couplet.v1.Parent.decode(couplet.v1.Parent.encode(parentNamed("Sigma(1731)+")).finish());
  const { id } = parent.rows[0]!;
  change(parent.rows[0]!, parent.rows[0]!.waves[0]!, parent);
  expect(() => rowsEvaluator(parent, hadrons)).toThrow(
    expect.objectContaining({ name: "TableError", message: `${id}: ${message}` }),
  );
});

test("a mass that is not positive, or at which widths overflow, is refused", () => {
  const evaluator = rowsEvaluator(parentNamed("Sigma(1731)+"), hadrons);
  expect(() => fractionsAt(evaluator, 0)).toThrow(
    expect.objectContaining({
      name: "InputError",
      message: "mass of the parent: expected a finite number > 0, got 0. Give the mass in MeV.",
    }),
  );
  expect(() => fractionsAt(evaluator, 1e200)).toThrow(
    expect.objectContaining({
      name: "InputError",
      message: "mass of the parent: expected one at which widths are finite, got 1e+200.",
    }),
  );
});
