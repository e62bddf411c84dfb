import { describe, expect, test } from "vitest";
import { DEMO_STUDY } from "../../src/cli/demo-study.js";
import { InputError, TableError } from "../../src/errors.js";
import { couplet } from "../../src/gen/couplet.js";
import { decodeDecays } from "../../src/tables/decode-decays.js";
import { type CascadeParticle, cascadeDrawer } from "../../src/tables/draw-cascade.js";
import { encodeDecays } from "../../src/tables/encode-decays.js";
import { tableHadrons } from "../../src/tables/evaluate-rows.js";
import { breakupMomentumMeV } from "../../src/widths/breakup-momentum.js";
import { cumulativeAt, type DrawGrid } from "../../src/widths/draw-mass.js";
import { studyText, tablesOf } from "../chain/run.js";
import { seededIntegers } from "../support/seeded-integers.js";
import { kolmogorovSmirnov, ONE_IN_A_MILLION } from "../widths/kolmogorov-smirnov.js";

import v1 = couplet.v1;

const decoded = (text: string) => decodeDecays(encodeDecays(tablesOf(text)), "made.pb");
const TABLES = {
  demo: decoded(DEMO_STUDY),
  mesons: decoded(studyText("mesons-whole")),
  n1520: decoded(studyText("n1520-delta-pi")),
};

function uniformNumbers(): () => number {
  const random = seededIntegers(20261202);
  return () => random.below(2 ** 31) / 2 ** 31;
}

const copyOf = (tables: v1.DecayTables) => v1.DecayTables.decode(v1.DecayTables.encode(tables).finish());
const parentOf = (tables: v1.DecayTables, name: string) =>
  tables.parents.find(({ hadron }) => hadron?.name === name)!;

/** The tables with one row alone of a parent: every decay of it is this one. */
function onlyRow(tables: v1.DecayTables, parent: string, id: string): v1.DecayTables {
  const copy = copyOf(tables);
  const rows = parentOf(copy, parent);
  rows.rows = rows.rows.filter((row) => row.id === id);
  return copy;
}

function gridOf(tables: v1.DecayTables, name: string): DrawGrid {
  const { low, distances, cumulative, power } = tableHadrons(tables).get(name)!.lineShape!;
  return { originMeV: low!, distancesMeV: distances!, cumulative: cumulative!, power: power! };
}

/** Cumulative distribution of a mass with the density rho K below `highMeV`, added up in 20,000 steps. */
function integrated(grid: DrawGrid, highMeV: number, K: (w: number) => number): (w: number) => number {
  const high = Math.min(highMeV, grid.originMeV + grid.distancesMeV.at(-1)!);
  const steps = 20_000;
  const step = (high - grid.originMeV) / steps;
  const sums = [0];
  for (let k = 0; k < steps; k++) {
    const low = grid.originMeV + k * step;
    const chance = cumulativeAt(grid, low + step) - cumulativeAt(grid, low);
    sums.push(sums[k]! + chance * K(low + step / 2));
  }
  return (w) => sums[Math.min(steps, Math.round((w - grid.originMeV) / step))]! / sums[steps]!;
}

describe("masses of daughters follow their line shapes times K", () => {
  const { waves } = parentOf(TABLES.n1520, "N(1520)+").rows[0]!;
  const barrier = (strength: (wave: number) => number, M: number) => (w: number) => {
    const q = breakupMomentumMeV(M, w, 139.57039);
    const z = (q / 197.3269804) ** 2;
    return q * (strength(0) + (strength(1) * z * z) / (9 + 3 * z + z * z));
  };
  const fitted = (wave: number) => waves[wave]!.flavourAmplitude! ** 2;
  const deltaPi = ["N(1520)+", "N(1520)+ -> Delta(1232)++ pi-", 139.57039] as const;
  const rhoPi = ["a2(1320)+", "a2(1320)+ -> rho(770)+ pi0", 134.9768] as const;
  const left = 1318.2 - 134.9768;
  const cases = [
    {
      what: "two folded waves",
      of: TABLES.n1520,
      row: deltaPi,
      M: 1515,
      K: barrier(fitted, 1515),
      wrong: barrier((wave) => 1 - wave, 1515),
    },
    {
      what: "a row open only through the width of a daughter",
      of: TABLES.n1520,
      row: deltaPi,
      M: 1300,
      K: barrier(fitted, 1300),
      wrong: () => 1,
    },
    {
      what: "a row outside the symmetry",
      of: TABLES.mesons,
      row: rhoPi,
      M: 1318.2,
      K: (w: number) => (left - w) ** 2.5,
      wrong: (w: number) => (left - w) ** 1.5,
    },
  ];

  test.each(cases)(
    "$what: a sample passes that a wrong K fails",
    ({ of, row: [parent, id, other], M, K, wrong }) => {
      const drawer = cascadeDrawer(onlyRow(of, parent, id));
      const uniform = uniformNumbers();
      const sample = Array.from({ length: 20_000 }, () => drawer.draw(parent, uniform, M)[1]!.massMeV);
      const grid = gridOf(of, parentOf(of, parent).rows.find((row) => row.id === id)!.daughters![0]!.name!);
      expect(kolmogorovSmirnov(sample, integrated(grid, M - other, K))).toBeLessThan(ONE_IN_A_MILLION);
      expect(kolmogorovSmirnov(sample, integrated(grid, M - other, wrong))).toBeGreaterThan(ONE_IN_A_MILLION);
    },
  );
});

/** Draws of each key, among draws with these chances, within 5 standard deviations: all of them. */
function expectCounts(
  counts: ReadonlyMap<string, number>,
  chances: ReadonlyMap<string, number>,
  draws: number,
) {
  for (const key of counts.keys()) expect(chances.get(key) ?? 0, key).toBeGreaterThan(0);
  for (const [key, chance] of chances) {
    const sigma = Math.sqrt(chance * (1 - chance) * draws);
    // A rare row has a Poisson distribution: 8 where almost none is expected has a chance below 1e-6.
    expect(Math.abs((counts.get(key) ?? 0) - chance * draws), key).toBeLessThan(5 * sigma + 8);
  }
}

function counted(keys: readonly string[]): Map<string, number> {
  const counts = new Map<string, number>();
  for (const key of keys) counts.set(key, (counts.get(key) ?? 0) + 1);
  return counts;
}

describe("rows", () => {
  test("come out with their fractions integrated over the line shape: mass first, then the row at that mass", () => {
    const uniform = uniformNumbers();
    const drawer = cascadeDrawer(TABLES.mesons);
    for (const { hadron, rows } of TABLES.mesons.parents) {
      const drawn = Array.from({ length: 5000 }, () => drawer.draw(hadron!.name!, uniform)[0]!.row!.id!);
      const chances = rows!.map(
        (row) => [row.id!, row.integratedFraction ?? row.partsPerBillion! / 1e9] as const,
      );
      expectCounts(counted(drawn), new Map(chances), drawn.length);
    }
    // f2(1270) -> eta eta: the nominal fraction is not what comes out.
    const { rows } = parentOf(TABLES.mesons, "f2(1270)");
    const etas = rows.find(({ id }) => id === "f2(1270) -> eta eta")!;
    const n = 20_000;
    const drawn = Array.from({ length: n }, () => drawer.draw("f2(1270)", uniform)[0]!.row!.id);
    const excess = drawn.filter((id) => id === etas.id).length - (n * etas.partsPerBillion!) / 1e9;
    expect(Math.abs(excess)).toBeGreaterThan(5 * Math.sqrt((n * etas.partsPerBillion!) / 1e9));
  });

  test("down the chain: omega and its pi0 decay with the products of their fractions", () => {
    const [omega, pi0] = ["omega(782)", "pi0"].map((name) => parentOf(TABLES.mesons, name).rows) as [
      v1.Row[],
      v1.Row[],
    ];
    const chances = omega.flatMap((row): [string, number][] =>
      row.daughters!.some(({ name }) => name === "pi0")
        ? pi0.map((second) => [
            `${row.id}, ${second.id}`,
            (row.integratedFraction ?? 0) * (second.partsPerBillion! / 1e9),
          ])
        : [[row.id!, row.integratedFraction ?? 0]],
    );
    const drawer = cascadeDrawer(TABLES.mesons);
    const uniform = uniformNumbers();
    const drawn = Array.from({ length: 40_000 }, () => {
      const cascade = drawer.draw("omega(782)", uniform);
      const second = cascade[0]!.daughters.map((k) => cascade[k]!).find(({ name }) => name === "pi0");
      return [cascade[0]!.row!.id, ...(second === undefined ? [] : [second.row!.id])].join(", ");
    });
    expectCounts(counted(drawn), new Map(chances), drawn.length);
  });
});

describe.each(Object.entries(TABLES))("cascades of %s", (name, tables) => {
  const hadrons = tableHadrons(tables);
  const antiparticles = new Map([...hadrons.values()].map((hadron) => [hadron.antiparticle, hadron]));
  const charges = (of: string): [number, number] => {
    const own = hadrons.get(of);
    if (own !== undefined) return [own.charge ?? 0, own.baryonNumber ?? 0];
    const { charge, baryonNumber } = antiparticles.get(of)!;
    return [0 - (charge ?? 0), 0 - (baryonNumber ?? 0)];
  };
  const ended = (cascade: readonly CascadeParticle[]) => cascade.filter(({ end }) => end !== "decayed");

  test("of particles and antiparticles conserve charge and baryon number, and daughters are lighter than mothers", () => {
    const drawer = cascadeDrawer(tables);
    const uniform = uniformNumbers();
    for (const { hadron } of tables.parents) {
      for (const start of [hadron!.name!, hadron!.antiparticle ?? hadron!.name!]) {
        for (let k = 0; k < 200; k++) {
          const cascade = drawer.draw(start, uniform);
          cascade.forEach(({ massMeV, daughters, mother }, place) => {
            const masses = daughters.map((d) => cascade[d]!.massMeV);
            if (daughters.length > 0) expect(masses.reduce((a, b) => a + b, 0)).toBeLessThan(massMeV);
            for (const d of daughters) expect(cascade[d]!.mother).toBe(place);
            expect(mother).toBeLessThan(place);
            expect(massMeV).toBeGreaterThanOrEqual(0);
          });
          const sums = ended(cascade).map((particle) => charges(particle.name));
          expect([0, 1].map((c) => sums.reduce((sum, each) => sum + each[c]!, 0))).toEqual(charges(start));
        }
      }
    }
  });

  test("end in particles without rows, but for the remainders of the studies that leave some", () => {
    const drawer = cascadeDrawer(tables);
    const uniform = uniformNumbers();
    const ends = new Set(
      tables.parents.flatMap(({ hadron }) =>
        Array.from({ length: 100 }, () =>
          ended(drawer.draw(hadron!.name!, uniform)).map(({ end }) => end),
        ).flat(),
      ),
    );
    expect([...ends].sort()).toEqual(name === "mesons" ? ["left"] : ["left", "undecayable"]);
  });
});

describe("edges", () => {
  const drawer = cascadeDrawer(TABLES.demo);

  test("an antiparticle decays by the conjugate rows where the table implies it, and is refused elsewhere", () => {
    const particle = drawer.draw("Sigma0bar", uniformNumbers(), 1192.642);
    expect(particle.map(({ name }) => name)).toEqual(["Sigma0bar", "Lambdabar", "gamma"]);
    expect(particle[0]!.conjugate).toBe(true);
    const rows = copyOf(TABLES.demo);
    rows.header!.policies!.antiparticles = "rows";
    const known = TABLES.demo.parents.map(({ hadron }) => hadron!.name).join(", ");
    expect(() => cascadeDrawer(rows).draw("Sigma0bar", Math.random)).toThrow(
      new InputError(`no rows for "Sigma0bar" in this table; there are: ${known}`),
    );
  });

  test("a mass below every threshold ends the branch, one that is none is refused", () => {
    expect(drawer.draw("N(1577)+", Math.random, 500)).toEqual([
      { name: "N(1577)+", massMeV: 500, mother: -1, end: "closed", conjugate: false, daughters: [] },
    ]);
    expect(() => drawer.draw("pi0", Math.random, 0)).toThrow(
      new InputError("mass of the parent: expected a finite number > 0, got 0. Give the mass in MeV."),
    );
  });

  test("a row with one daughter, and decays that do not end, are refused", () => {
    const single = copyOf(TABLES.demo);
    const pi0 = parentOf(single, "pi0").rows;
    pi0[1]!.daughters!.pop();
    expect(() => cascadeDrawer(single)).toThrow(
      new TableError("pi0 -> gamma gamma: expected two daughters or more, got 1"),
    );
    const endless = copyOf(TABLES.demo);
    const lineShape = { low: 0, high: 100, distances: [1, 100], cumulative: [0.01, 1], power: 1 };
    Object.assign(parentOf(endless, "pi0").hadron!, { lineShape, width: 10 });
    parentOf(endless, "pi0").rows = [
      v1.Row.create({
        id: "endless",
        daughters: [{ name: "pi0" }, { name: "pi0" }],
        power: 0,
        threshold: 0,
        width: { value: 1 },
        partsPerBillion: 1_000_000_000,
      }),
    ];
    expect(() => cascadeDrawer(endless).draw("pi0", uniformNumbers())).toThrow(
      new TableError("pi0: expected decays that end, got 1000 particles"),
    );
  });
});
