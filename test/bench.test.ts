import { describe, expect, test } from "vitest";
import { compared, ratioOf } from "../bench/compare.js";
import { checkDense, denseProduct, denseStates } from "../bench/dense-baseline.js";
import { checkFinished, ENGINE_CASES } from "../bench/engine-cases.js";
import { PHYSICS_CASES } from "../bench/physics-cases.js";
import { yardstick } from "../bench/yardstick.js";
import { parseIrrep } from "../src/su3/irrep.js";
import { isoscalarTable } from "../src/su3/isoscalar-factors.js";

describe("regression benchmarks", () => {
  test("take the median of the rounds, and its scatter", () => {
    const { ratio, noise } = ratioOf([2, 2.1, 1.9, 2, 9]);
    expect(ratio).toBe(2);
    expect(noise).toBeCloseTo((1.48 * 0.1) / 2 / Math.sqrt(5), 12);
  });

  test("call a case slower or faster only beyond three deviations and a tenth", () => {
    const steady = { ratio: 2, noise: 0.01 };
    const shaky = { ratio: 2, noise: 0.2 };
    expect(compared({ ratio: 3, noise: 0.01 }, steady).verdict).toBe("slower");
    expect(compared({ ratio: 1.5, noise: 0.01 }, steady).verdict).toBe("faster");
    expect(compared({ ratio: 2.15, noise: 0.01 }, steady).verdict).toBe("same");
    expect(compared({ ratio: 3, noise: 0.01 }, shaky).verdict).toBe("same");
    expect(compared(steady, undefined).verdict).toBe("new");
  });

  test("measure beside a yardstick that does the same work every time", () => {
    expect([yardstick(), yardstick()]).toEqual([yardstick(), yardstick()]);
  });

  test("have names that tell them apart, and results that pass their checks", () => {
    const cases = [...ENGINE_CASES, ...PHYSICS_CASES];
    expect(new Set(cases.map(({ name }) => name)).size).toBe(cases.length);
    for (const { name, make } of cases) {
      if (name.includes("125")) continue;
      const { run, check } = make();
      check(run() as never);
    }
  });

  test("notice a wrong table", () => {
    const columns = isoscalarTable(parseIrrep("8"), parseIrrep("8")).columns();
    checkFinished("8x8", columns, 86);
    expect(() => checkFinished("8x8", columns, 87)).toThrow("8x8: wrong result: 86 factors, not 87");
    const num = columns.num.map((n, i) => (i === 0 ? n + 1 : n));
    expect(() => checkFinished("8x8", { ...columns, num }, 86)).toThrow("do not add up to 1");
  });

  test("have a dense rival that spans the same states, and whose check notices others", () => {
    const [decuplet, octet] = [parseIrrep("10"), parseIrrep("8")];
    const product = denseProduct(decuplet, octet);
    const found = denseStates(product, decuplet, octet);
    const table = isoscalarTable(decuplet, octet);
    checkDense(product, found, table);
    const wrong = found.map((state, i) =>
      i === 3 ? { ...state, vector: state.vector.map((value, c) => (c === 0 ? value + 1n : value)) } : state,
    );
    expect(() => checkDense(product, wrong, table)).toThrow("the dense states differ from the table's");
  });
});
