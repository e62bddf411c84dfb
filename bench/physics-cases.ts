import { readFileSync } from "node:fs";
import { join } from "node:path";
import { complete } from "../src/completion/complete.js";
import type { Tables } from "../src/completion/tables.js";
import { levenbergMarquardt } from "../src/fit/levenberg-marquardt.js";
import type { couplet } from "../src/gen/couplet.js";
import { chiSquareProblem } from "../src/model/chi-square-problem.js";
import { evaluator } from "../src/model/evaluate.js";
import { fitModel, fittedObservables } from "../src/model/fit-model.js";
import { resolveStudy } from "../src/model/resolve-study.js";
import { readStudy } from "../src/study/read-study.js";
import { decodeDecays } from "../src/tables/decode-decays.js";
import { encodeDecays } from "../src/tables/encode-decays.js";
import { rowsEvaluator, tableHadrons } from "../src/tables/evaluate-rows.js";
import { foldedFactor } from "../src/widths/folded-width.js";
import { widthModel } from "../src/widths/width-model.js";
import { NUCLEON_MEV, PION_MEV, resonance } from "../test/widths/resonances.js";
import { type BenchCase, requireResult } from "./bench-case.js";
import { tenObservables } from "./ten-observables.js";

/** Cases of fits, widths and decay tables. */
export const PHYSICS_CASES: readonly BenchCase[] = [
  fitCase(),
  studyCase(),
  foldCase(),
  evaluateCase(),
  encodeCase(),
  decodeCase(),
];

const DECUPLET = join(__dirname, "..", "test", "chain", "studies", "decuplet.yaml");

function decuplet(): Tables {
  return complete(fitModel(resolveStudy(readStudy(readFileSync(DECUPLET), DECUPLET))), 0);
}

function fitCase(): BenchCase {
  const name = "fit/ten-observables";
  return {
    name,
    make: () => {
      const { model, minima } = tenObservables();
      const best = minima[0]!;
      const problem = chiSquareProblem(evaluator(model), fittedObservables(model));
      const start = best.vector.map((value, k) => (k < model.couplingCount ? 1.3 * value : value));
      return {
        run: () => levenbergMarquardt(problem, start, { initialRadius: 0.1 }),
        check: ({ chi2 }: { chi2: number }) =>
          requireResult(name, Math.abs(chi2 - best.chi2) < 1e-9 * chi2, `chi2 ${chi2}`),
      };
    },
  };
}

function studyCase(): BenchCase {
  const name = "model/every-minimum/decuplet";
  return {
    name,
    make: () => {
      const text = readFileSync(DECUPLET);
      return {
        run: () => fitModel(resolveStudy(readStudy(text, DECUPLET))),
        check: ({ minima }: { minima: readonly unknown[] }) =>
          requireResult(name, minima.length === 1, `${minima.length} minima`),
      };
    },
  };
}

/** Delta pi in a D wave from N(1520); the average over the Delta's line shape, beside which a plain K is nothing. */
export function deltaPi() {
  const model = widthModel("c");
  return { model, vertex: { L: 2 }, daughters: [resonance("Delta"), PION_MEV] } as const;
}

function foldCase(): BenchCase {
  const name = "widths/folded-factor/Delta-pi";
  return {
    name,
    make: () => {
      const channel = deltaPi();
      return {
        run: () => foldedFactor(channel, 1515),
        // The value of an independent program in test/widths/folded-width.test.ts.
        check: ({ value }: { value: number }) =>
          requireResult(
            name,
            Math.abs(value / 12.2686136085215 - 1) < 1e-8,
            `${value} MeV for ${NUCLEON_MEV}`,
          ),
      };
    },
  };
}

function evaluateCase(): BenchCase {
  const name = "tables/rows-at-1000-masses/Sigma(1385)0";
  return {
    name,
    make: () => {
      const tables = decodeDecays(encodeDecays(decuplet()), "bench");
      const parent = tables.parents.find(({ hadron }) => hadron?.name === "Sigma(1385)0")!;
      const evaluator = rowsEvaluator(parent, tableHadrons(tables));
      const masses = Float64Array.from({ length: 1000 }, (_, k) => 1300 + k / 4);
      const nominal = masses.findIndex((mass) => mass >= parent.hadron!.mass!);
      const [widths, totals] = [new Float64Array(1000 * evaluator.rowCount), new Float64Array(1000)];
      return {
        run: () => {
          evaluator.manyInto(masses, widths, totals);
          return totals;
        },
        check: (found: Float64Array) =>
          requireResult(name, Math.abs(found[nominal]! / parent.totalWidth! - 1) < 0.02, `${found[nominal]}`),
      };
    },
  };
}

function encodeCase(): BenchCase {
  const name = "tables/encode-decays/decuplet";
  return {
    name,
    make: () => {
      const tables = decuplet();
      return {
        run: () => encodeDecays(tables),
        check: (bytes: Uint8Array) =>
          requireResult(name, decodeDecays(bytes, name).parents.length === tables.parents.length, "parents"),
      };
    },
  };
}

function decodeCase(): BenchCase {
  const name = "tables/decode-decays/decuplet";
  return {
    name,
    make: () => {
      const tables = decuplet();
      const bytes = encodeDecays(tables);
      return {
        run: () => decodeDecays(bytes, name),
        check: ({ parents }: couplet.v1.DecayTables) =>
          requireResult(name, parents.length === tables.parents.length, `${parents.length} parents`),
      };
    },
  };
}
