import { afterAll, describe, expect, test } from "vitest";
import { describeParent } from "../../src/cli/show.js";
import { decodeDecays } from "../../src/tables/decode-decays.js";
import { encodeDecays } from "../../src/tables/encode-decays.js";
import { studyText, tablesOf } from "../chain/run.js";
import { couplet, scratchFolder } from "./command.js";

const bytes = encodeDecays(tablesOf(studyText("decuplet")));
const one = `couplet: 1
title: One parent, every number invented
multiplets:
  x: { irrep: 1, spinParity: 3/2-, members: [{ name: Lambda(1500), place: Lambda, mass: 1500 MeV, width: 15 MeV }] }
decays:
  - { from: x, to: [baryon-octet, pseudoscalar-octet], L: 2, model: a }
measurements:
  - { width: Lambda(1500) -> N Kbar, value: 3 +- 0.5 MeV, source: invented }
`;
const { folder, remove } = scratchFolder({ "decuplet.decays.pb": bytes, "one.yaml": one });
afterAll(remove);

describe("couplet show", () => {
  test("names as daughters to be known elsewhere only those of rows that can happen", () => {
    const { externals } = decodeDecays(bytes, "decuplet.decays.pb");
    const all = externals.map(({ name }) => name!);
    const [, line] = /daughters to be known elsewhere: (.*)\n/.exec(
      couplet(folder, "show", "decuplet.decays.pb").out,
    )!;
    const shown = line!.split(", ");
    // Sigma(1385) reaches N Kbar within its line shape; nothing here reaches a baryon with eta or K.
    expect(all).toEqual(expect.arrayContaining(["K-", "eta", "K+"]));
    expect(shown).toContain("K-");
    expect(all.filter((name) => !shown.includes(name)).sort()).toEqual(["K+", "K0", "eta"]);
  });

  test("one of a thing is no plural", () => {
    const made = couplet(folder, "tables", "one.yaml", "-o", "out");
    expect([made.code, made.error]).toEqual([0, ""]);
    expect(made.out).toMatch(/\nwrote out\/one\.decays\.pb: 1 parent, \d+ rows, sha256/);
    expect(couplet(folder, "show", "out/one.decays.pb").out).toContain("; 1 parent; daughters");
  });

  test("prints what is no more than a rounded zero as 0, and the smallest row that is more as it is", () => {
    const [parent] = decodeDecays(bytes, "decuplet.decays.pb").parents;
    const [row] = parent!.rows;
    const line = (fraction: number) => {
      const zero = { ...row!, fraction: { value: fraction, plus: 1e-17, minus: 1e-17, breaking: 0 } };
      Object.assign(zero, {
        width: { value: 117 * fraction },
        integratedFraction: fraction,
        integrated: null,
      });
      const text = describeParent(Object.assign(Object.create(parent!), { rows: [zero] }));
      return text
        .split("\n")
        .find((each) => each.includes(row!.id!))!
        .split(/ {2,}/)
        .slice(2, 6);
    };
    expect(line(1.377e-31).slice(0, 3)).toEqual(["0", "0", "0"]);
    expect(line(2e-12)[0]).toBe("2.000e-10");
  });
});

test("the other errors of a percentage stand beside it, before the column over the line shape", () => {
  const [parent] = decodeDecays(bytes, "t.pb").parents;
  const row = {
    ...parent!.rows[0]!,
    fraction: { value: 0.5, plus: 0.1, minus: 0.1, breaking: 0.07, model: 0.2 },
  };
  Object.assign(row, { integratedFraction: 0.25, integrated: null });
  const text = describeParent(Object.assign(Object.create(parent!), { rows: [row] }));
  const [titles, line] = text.split("\n").slice(2);
  const cell = (title: string, length: number) => line!.slice(titles!.indexOf(title)).slice(0, length);
  expect(cell("its other errors", 18)).toBe("br. 7.0  mod. 20  ");
  const titlesOf = titles!.trim().split(/ {2,}/);
  expect(titlesOf.slice(0, 4)).toEqual(["channel", "percent", "its other errors", "over line shape"]);
  expect(line!.trim().split(/ {2,}/).slice(1, 5)).toEqual(["50 +- 10", "br. 7.0", "mod. 20", "25.0"]);
});

describe("a parent's head", () => {
  const head = (text: string, name: string) => {
    const { parents } = decodeDecays(encodeDecays(tablesOf(text)), "t.pb");
    return describeParent(parents.find(({ hadron }) => hadron?.name === name)!).split("\n")[1]!;
  };

  test("has both sides of the total width, says where it comes from, and the window of the mass", () => {
    const wide = one.replace("width: 15 MeV", "width: 15 +3 -2 MeV");
    expect(head(wide, "Lambda(1500)")).toMatch(
      /^Lambda\(1500\) {2}mass 1500\.00 MeV, width 15\.0 \+3\.0 -2\.0 MeV \(given in the study\), line shape from \d+ to 1545 MeV, /,
    );
    expect(head(one.replace("width: 15 MeV", "width: sum"), "Lambda(1500)")).toContain("MeV (sum of rows), ");
  });

  test("tells a total width of the catalogue from one of the study", () => {
    const known = one
      .replaceAll("Lambda(1500)", "Lambda(1520)")
      .replace("mass: 1500 MeV, width: 15 MeV", "mass: 1519 MeV");
    expect(head(known, "Lambda(1520)")).toContain("MeV (catalogue), ");
    const [parent] = decodeDecays(encodeDecays(tablesOf(known)), "t.pb").parents;
    expect(parent!.totalSource).toBe("RPP 2024");
  });
});
