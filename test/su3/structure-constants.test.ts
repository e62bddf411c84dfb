import { describe, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { formatRoot, rootToNumber } from "../../src/exact/signed-root.js";
import { structureD, structureF } from "../../src/su3/structure-constants.js";

const indices = [1, 2, 3, 4, 5, 6, 7, 8];
const f = (a: number, b: number, c: number) => rootToNumber(structureF(a, b, c));
const d = (a: number, b: number, c: number) => rootToNumber(structureD(a, b, c));
const sum = (term: (e: number) => number) => indices.reduce((total, e) => total + term(e), 0);

describe("structure constants", () => {
  test("equal the printed ones", () => {
    // M. Gell-Mann, Phys. Rev. 125 (1962) 1067, table I (provenance: memory).
    const printedF = [
      "123 1",
      "147 1/2",
      "156 -1/2",
      "246 1/2",
      "257 1/2",
      "345 1/2",
      "367 -1/2",
      "458 sqrt(3/4)",
      "678 sqrt(3/4)",
    ];
    const printedD = [
      "118 sqrt(1/3)",
      "146 1/2",
      "157 1/2",
      "228 sqrt(1/3)",
      "247 -1/2",
      "256 1/2",
      "338 sqrt(1/3)",
      "344 1/2",
      "355 1/2",
      "366 -1/2",
      "377 -1/2",
      "448 -sqrt(1/12)",
      "558 -sqrt(1/12)",
      "668 -sqrt(1/12)",
      "778 -sqrt(1/12)",
      "888 -sqrt(1/3)",
    ];
    const listed = (value: typeof structureF) =>
      indices.flatMap((a) =>
        indices
          .filter((b) => b >= a)
          .flatMap((b) =>
            indices
              .filter((c) => c >= b)
              .map((c) => `${a}${b}${c} ${formatRoot(value(a, b, c))}`)
              .filter((line) => !line.endsWith(" 0")),
          ),
      );
    expect(listed(structureF)).toEqual(printedF);
    expect(listed(structureD)).toEqual(printedD);
  });

  test("are totally antisymmetric and totally symmetric, d without trace", () => {
    for (const a of indices) {
      expect(sum((e) => d(a, e, e))).toBeCloseTo(0, 14);
      for (const b of indices) {
        for (const c of indices) {
          expect([f(b, a, c), f(a, c, b), f(b, c, a)]).toEqual([0 - f(a, b, c), 0 - f(a, b, c), f(a, b, c)]);
          expect([d(b, a, c), d(a, c, b)]).toEqual([d(a, b, c), d(a, b, c)]);
        }
      }
    }
  });

  test("obey Jacobi, and sum to 3 and 5/3", () => {
    for (const a of indices) {
      for (const b of indices) {
        expect(indices.reduce((t, c) => t + sum((e) => f(a, c, e) * f(b, c, e)), 0)).toBeCloseTo(
          a === b ? 3 : 0,
          12,
        );
        expect(indices.reduce((t, c) => t + sum((e) => d(a, c, e) * d(b, c, e)), 0)).toBeCloseTo(
          a === b ? 5 / 3 : 0,
          12,
        );
        for (const c of indices.slice(0, 4)) {
          for (const g of indices) {
            const jacobi = sum(
              (e) => f(a, b, e) * f(e, c, g) + f(b, c, e) * f(e, a, g) + f(c, a, e) * f(e, b, g),
            );
            expect(Math.abs(jacobi)).toBeLessThan(1e-14);
            const mixed = sum(
              (e) => f(a, b, e) * d(e, c, g) + f(a, c, e) * d(b, e, g) + f(a, g, e) * d(b, c, e),
            );
            expect(Math.abs(mixed)).toBeLessThan(1e-14);
          }
        }
      }
    }
  });

  test("refuse indices outside 1 to 8", () => {
    expect(() => structureF(1, 9, 2)).toThrow(
      new InputError("structureF: index 2: expected an integer from 1 to 8, got 9."),
    );
  });
});
