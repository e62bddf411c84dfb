import { parse } from "csv-parse/sync";
import { describe, expect, test } from "vitest";
import { couplingTable } from "../../src/completion/tabulate-couplings.js";
import { couplet } from "../../src/gen/couplet.js";
import { couplingsMessage } from "../../src/tables/encode-couplings.js";
import { decaysMessage } from "../../src/tables/encode-decays.js";
import { exportCouplingsCsv, exportDecaysCsv } from "../../src/tables/export-csv.js";
import { fitOf, studyText, tablesOf } from "../chain/run.js";
import { DELTA, madeDecays } from "./made-decays.js";

import v1 = couplet.v1;

const read = (text: string) => parse(text, { columns: true }) as Record<string, string>[];

describe("decay tables as comma-separated values", () => {
  const message = decaysMessage(tablesOf(studyText("octet-5-2")));
  const tables = v1.DecayTables.decode(v1.DecayTables.encode(message).finish());
  const text = exportDecaysCsv(tables);
  const lines = read(text);
  const rows = tables.parents.flatMap((parent) => parent.rows.map((row) => ({ parent, row })));

  test("another reader finds every row with every digit of its numbers", () => {
    expect(lines).toHaveLength(rows.length);
    for (const [k, { parent, row }] of rows.entries()) {
      const line = lines[k]!;
      expect([line["parent"], line["row"]]).toEqual([parent.hadron!.name, row.id]);
      expect(Number(line["parent mass [MeV]"])).toBe(parent.hadron!.mass);
      expect(Number(line["total width [MeV]"])).toBe(parent.totalWidth);
      expect(Number(line["fraction [parts per 10^9]"])).toBe(row.partsPerBillion);
      expect(Number(line["fraction [1]"])).toBe(row.fraction!.value);
      expect(Number(line["fraction error down [1]"])).toBe(row.fraction!.minus);
      expect(Number(line["fraction error from breaking [1]"])).toBe(row.fraction!.breaking);
      expect(Number(line["partial width [MeV]"])).toBe(row.width!.value);
      expect(Number(line["threshold [MeV]"])).toBe(row.threshold);
      const amplitudes = line["amplitudes, real part [sqrt(MeV)]"]!.split(" ").filter((cell) => cell !== "");
      expect(amplitudes.map(Number)).toEqual(row.waves!.map(({ re }) => re));
      expect(line["daughters"]).toBe(row.daughters!.map(({ name }) => name).join(" "));
    }
  });

  test("what a row does not have is an empty cell, and words stand for enumerations", () => {
    const predicted = lines.find((line) => line["row"] === "N(1675)+ -> p eta")!;
    expect([predicted["measured value"], predicted["pull [1]"], predicted["origin"]]).toEqual([
      "",
      "",
      "predicted",
    ]);
    const measured = lines.find((line) => line["row"] === "N(1675)+ -> n pi+")!;
    expect([measured["measured value"], measured["measured unit"], measured["sources"]]).toEqual([
      "58",
      "MeV",
      "PDG, from memory",
    ]);
    expect([measured["waves L/S"], measured["flags"], measured["kinematics"]]).toEqual([
      "2/1/2",
      "isospin split",
      "open",
    ]);
  });

  test("commas and quotes are quoted and lines end in CRLF, as RFC 4180 has it", () => {
    expect(text).toContain(',"PDG, from memory"\r\n');
    expect(text.split("\r\n")).toHaveLength(rows.length + 2);
    const quoted = exportDecaysCsv(madeDecays([{ ...DELTA, hadron: ['a "b", c', 1, 1, null] }]));
    expect(quoted).toContain('\r\n"a ""b"", c",1,1,');
    expect(read(quoted)[0]!["parent"]).toBe('a "b", c');
  });

  test("every title but names and words has its unit", () => {
    const [line] = lines;
    const titles = Object.keys(line!).filter((title) =>
      /mass|width \[|error|threshold|momentum|amplitude/.test(title),
    );
    const own = ["measured error up", "measured error down"];
    expect(titles.filter((title) => !own.includes(title) && !/\[.+\]$/.test(title))).toEqual([]);
  });
});

test("couplings are read back with their exact coefficients, by isospin and by charge state", () => {
  const message = couplingsMessage(couplingTable(fitOf(studyText("octet-5-2")), 0));
  const tables = v1.CouplingTables.decode(v1.CouplingTables.encode(message).finish());
  const lines = read(exportCouplingsCsv(tables));
  expect(lines).toHaveLength(tables.isospin.length + tables.charged.length);
  const vertex = lines.find((line) => line["vertex"] === "Sigma(1775)0 -> p K-")!;
  const wanted = tables.charged.find(({ id }) => id === "Sigma(1775)0 -> p K-")!;
  // De Swart's isoscalar factors sqrt(3/10) and sqrt(1/6), times the SU(2) coefficient sqrt(1/2).
  expect(vertex["coefficients"]).toBe("-sqrt(3/20) g(8_1); sqrt(1/12) g(8_2)");
  expect(Number(vertex["coupling"])).toBe(wanted.value!.value);
  expect([vertex["by"], vertex["L"], vertex["S"], vertex["convention"]]).toEqual([
    "charge state",
    "2",
    "1/2",
    "deswart-v1",
  ]);
});
