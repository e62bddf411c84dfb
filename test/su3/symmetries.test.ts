import { describe, expect, test } from "vitest";
import {
  equalRoots,
  formatRoot,
  multiplyRoots,
  type SignedRoot,
  signedRoot,
  ZERO_ROOT,
} from "../../src/exact/signed-root.js";
import { su3ClebschGordan } from "../../src/su3/clebsch-gordan.js";
import { conjugate, type Irrep, irrepDimension, irrepName, parseIrrep } from "../../src/su3/irrep.js";
import { isoscalarTable } from "../../src/su3/isoscalar-factors.js";
import { decomposeProduct } from "../../src/su3/product.js";
import { conjugateState, states } from "../../src/su3/state.js";
import {
  type CopyMatrix,
  conjugationMatrix,
  exchangeMatrix,
  transferMatrix,
} from "../../src/su3/symmetries.js";
import { irrepsUpTo } from "../support/irreps-up-to.js";
import { scalarProductOfRoots, sumOfRoots } from "../support/sum-of-roots.js";

const products: [Irrep, Irrep][] = irrepsUpTo(2).flatMap((a) =>
  irrepsUpTo(2).map((b) => [a, b] as [Irrep, Irrep]),
);
products.push([parseIrrep("10"), parseIrrep("8")], [parseIrrep("27"), parseIrrep("8")]);

function isOrthogonal(matrix: CopyMatrix): boolean {
  return matrix.every((row, i) =>
    matrix.every((other, j) => formatRoot(scalarProductOfRoots(row, other)) === (i === j ? "1" : "0")),
  );
}

/** Every full coefficient must obey: left side of copy i = sum over j of matrix[i][j] times the right side of copy j. */
function allHold(
  matrix: CopyMatrix,
  left: (copy: number) => SignedRoot,
  right: (copy: number) => SignedRoot,
): boolean {
  return matrix.every((row, i) => {
    const terms = row.map((m, j) => (m.sign === 0 ? ZERO_ROOT : multiplyRoots(m, right(j + 1))));
    return equalRoots(sumOfRoots(terms), left(i + 1));
  });
}

describe("symmetries of the coefficients, with their phases computed", () => {
  test("exchange of the factors, between full coefficients", () => {
    for (const [left, right] of products) {
      for (const { irrep } of decomposeProduct(left, right)) {
        const matrix = exchangeMatrix(left, right, irrep);
        expect(isOrthogonal(matrix)).toBe(true);
        const [table, other] = [
          isoscalarTable(left, right, { into: irrep }),
          isoscalarTable(right, left, { into: irrep }),
        ];
        const s = states(irrep)[Math.floor(irrepDimension(irrep) / 2)]!;
        for (const a of states(left)) {
          for (const b of states(right)) {
            const holds = allHold(
              matrix,
              (i) => su3ClebschGordan(a, b, s, i, table),
              (j) => su3ClebschGordan(b, a, s, j, other),
            );
            expect(holds, `${irrepName(left)} ${irrepName(right)} ${irrepName(irrep)}`).toBe(true);
          }
        }
      }
    }
  });

  test("conjugation, between full coefficients with conjugated states", () => {
    for (const [left, right] of products) {
      for (const { irrep } of decomposeProduct(left, right)) {
        const matrix = conjugationMatrix(left, right, irrep);
        expect(isOrthogonal(matrix)).toBe(true);
        const table = isoscalarTable(left, right, { into: irrep });
        const other = isoscalarTable(conjugate(left), conjugate(right), { into: conjugate(irrep) });
        const signs = new Set<number>();
        for (const s of states(irrep).slice(0, 6)) {
          for (const a of states(left)) {
            for (const b of states(right)) {
              const [abar, bbar, sbar] = [a, b, s].map(conjugateState) as [
                ReturnType<typeof conjugateState>,
                ReturnType<typeof conjugateState>,
                ReturnType<typeof conjugateState>,
              ];
              const phase = signedRoot(abar.phase * bbar.phase * sbar.phase, 1);
              const value = (i: number) => su3ClebschGordan(a, b, s, i, table);
              const bar = (j: number) =>
                multiplyRoots(phase, su3ClebschGordan(abar.state, bbar.state, sbar.state, j, other));
              // The phases of states may leave one sign, the same for all coefficients of the irrep.
              const plus = allHold(matrix, value, bar);
              const minus = allHold(matrix, value, (j) => multiplyRoots(signedRoot(-1, 1), bar(j)));
              expect(plus || minus).toBe(true);
              if (plus !== minus) signs.add(plus ? 1 : -1);
            }
          }
        }
        expect(signs.size).toBe(1);
      }
    }
  });

  test("transfer of a factor to the other side, between full coefficients", () => {
    for (const [left, right] of products) {
      for (const { irrep } of decomposeProduct(left, right)) {
        const matrix = transferMatrix(left, right, irrep);
        expect(isOrthogonal(matrix)).toBe(true);
        const table = isoscalarTable(left, right, { into: irrep });
        const other = isoscalarTable(irrep, conjugate(right), { into: left });
        const ratio = signedRoot(1, irrepDimension(left), irrepDimension(irrep));
        for (const s of states(irrep).slice(0, 5)) {
          for (const a of states(left)) {
            for (const b of states(right)) {
              const bar = conjugateState(b);
              const holds = allHold(
                matrix,
                (i) => multiplyRoots(ratio, su3ClebschGordan(a, b, s, i, table)),
                (j) => multiplyRoots(signedRoot(bar.phase, 1), su3ClebschGordan(s, bar.state, a, j, other)),
              );
              expect(holds, `${irrepName(left)} ${irrepName(right)} ${irrepName(irrep)}`).toBe(true);
            }
          }
        }
      }
    }
  });

  test("exchange in 8 x 8 is + for 1, 8_1, 27 and - for 8_2, 10, 10bar", () => {
    const octet = parseIrrep("8");
    const text = (name: string) =>
      exchangeMatrix(octet, octet, parseIrrep(name)).map((row) => row.map(formatRoot));
    expect(text("8")).toEqual([
      ["1", "0"],
      ["0", "-1"],
    ]);
    for (const [name, sign] of [
      ["1", "1"],
      ["27", "1"],
      ["10", "-1"],
      ["10bar", "-1"],
    ] as const)
      expect(text(name)).toEqual([[sign]]);
  });
});
