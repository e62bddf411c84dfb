import { describe, expect, test } from "vitest";
import { DEMO_STUDY } from "../../src/cli/demo-study.js";
import type { Estimate, Row } from "../../src/completion/tables.js";
import { decodeDecays } from "../../src/tables/decode-decays.js";
import { encodeDecays } from "../../src/tables/encode-decays.js";
import { errorParts } from "../../src/uncertainty/error-parts.js";
import { modelSpread } from "../../src/uncertainty/model-spread.js";
import { fitOf } from "../chain/run.js";
import { octetStudy, parentOf, rowOf, tablesOf } from "./whole-study.js";

/** The demo's study: its second minimum is 7 above the best. */
const twoMinima = DEMO_STUDY.replace("daughters: decayed", "widthModels: compared");

describe("a row's errors", () => {
  test("are those that errorParts gives, for the width of a predicted row", () => {
    const fit = fitOf(twoMinima);
    expect(fit.minima).toHaveLength(2);
    const parts = errorParts(fit, 0, { models: modelSpread(fit) });
    const rows = tablesOf(twoMinima).parents.flatMap((table) => table.rows);
    let compared = 0;
    for (const [channel, { id }] of fit.model.channels.entries()) {
      const row = rows.find((candidate) => candidate.id === id)!;
      const { statistical, ...others } = parts[channel]!;
      if (row.origin !== "predicted" || row.kinematics !== "open") continue;
      const { plus, minus, breaking, branch, model, value } = row.widthMeV;
      // Near the zero of an amplitude errorParts has the profile's error in place of the linear one.
      if (plus < value) expect(statistical).toBeCloseTo(plus, 9);
      expect(minus).toBe(plus);
      for (const [name, part] of Object.entries({ breaking, branch, model }))
        expect(part, `${id} ${name}`).toBeCloseTo(others[name as keyof typeof others]!, 9);
      compared++;
    }
    expect(compared).toBe(17);
  });

  test("of a fraction are the width's over the total where that is given", () => {
    const { rows, totalWidthMeV } = parentOf(tablesOf(twoMinima), "Lambda(1718)");
    const predicted = rows.filter(({ origin }) => origin === "predicted");
    expect(predicted).toHaveLength(3);
    for (const { fraction, widthMeV } of predicted) {
      expect(fraction.branch).toBeCloseTo(widthMeV.branch! / totalWidthMeV, 12);
      expect(fraction.model).toBeCloseTo(widthMeV.model! / totalWidthMeV, 12);
    }
    expect(Math.max(...predicted.map(({ fraction }) => fraction.branch!))).toBeGreaterThan(5e-4);
  });

  test("of a measured value that a given total divides are its own alone; the models are not compared unasked", () => {
    const tables = tablesOf(octetStudy(""));
    const { fraction, widthMeV } = rowOf(tables, "Sigma(1775)+ -> Lambda pi+");
    expect([widthMeV.value, widthMeV.plus, widthMeV.minus, widthMeV.breaking, widthMeV.branch]).toEqual([
      20, 4, 4, 0, 0,
    ]);
    expect([fraction.branch, "model" in fraction, "model" in widthMeV]).toEqual([0, false, false]);
    const compared = rowOf(
      tablesOf(octetStudy("tables: { widthModels: compared }\n")),
      "Sigma(1775)+ -> Lambda pi+",
    );
    expect([compared.fraction.model, compared.widthMeV.model]).toEqual([0, 0]);
  });

  test("of a measured sum's charge states are those of the split: width models have other phase space", () => {
    const tables = tablesOf(octetStudy("tables: { widthModels: compared }\n"));
    const rows = ["n pi+", "p pi0"].map((pair) => rowOf(tables, `N(1675)+ -> ${pair}`));
    const [a, b] = rows.map(({ widthMeV }) => widthMeV.model!) as [number, number];
    expect(a).toBeGreaterThan(0);
    expect(a).toBeLessThan(0.1);
    // What one charge state gains the other loses.
    expect(b).toBeCloseTo(a, 9);
  });

  test("come back from the file", () => {
    const tables = tablesOf(twoMinima);
    const decoded = decodeDecays(encodeDecays(tables), "f").parents.flatMap(({ rows }) => rows);
    const written: Row[] = tables.parents.flatMap(({ rows }) => [...rows]);
    expect(decoded).toHaveLength(written.length);
    for (const [k, { fraction, widthMeV }] of written.entries()) {
      const plain = (estimate: unknown): Estimate => ({ ...(estimate as Estimate) });
      expect(plain(decoded[k]!.fraction)).toEqual(fraction);
      expect(plain(decoded[k]!.width)).toEqual(widthMeV);
    }
    const own = decodeDecays(encodeDecays(tablesOf(octetStudy(""))), "f").parents[0]!.rows[0]!;
    expect(own.fraction?.model).toBeNull();
  });
});

describe("breaking of the symmetry where the total width is the sum of the rows", () => {
  const text = octetStudy("").replaceAll("width: 120 +- 10 MeV", "width: sum");

  test("moves the fractions against each other: those of one isospin channel together", () => {
    const { rows, totalWidthMeV } = parentOf(tablesOf(text), "Sigma(1775)+");
    const broken = new Map<string, number>();
    for (const { isospin, widthMeV, origin } of rows) {
      if (origin !== "predicted") continue;
      const name = isospin!.channel;
      broken.set(name, (broken.get(name) ?? 0) + widthMeV.breaking);
    }
    expect(broken.size).toBeGreaterThan(0);
    for (const { fraction, widthMeV, isospin, origin } of rows) {
      const own = origin === "predicted" ? isospin!.channel : "";
      const moved = [...broken].map(
        ([name, total]) => ((name === own ? widthMeV.breaking : 0) - fraction.value * total) / totalWidthMeV,
      );
      expect(fraction.breaking).toBeCloseTo(Math.hypot(...moved), 12);
    }
  });
});
