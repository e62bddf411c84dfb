import { describe, expect, test } from "vitest";
import { formatRoot, multiplyRoots, type SignedRoot, signedRoot } from "../../src/exact/signed-root.js";
import { su3ClebschGordan } from "../../src/su3/clebsch-gordan.js";
import { isoscalarTable } from "../../src/su3/isoscalar-factors.js";
import { commutator, type Matrix, octetMatrixStates, overlap, product } from "../../src/su3/matrix-phases.js";
import { sameState, states } from "../../src/su3/state.js";

const octet = { p: 1, q: 1 };

function anticommutator(a: Matrix, b: Matrix): Matrix {
  const ba = product(b, a);
  return product(a, b).map((row, i) => row.map((value, j) => value + ba[i]![j]!));
}

describe("the matrix basis of the octet", () => {
  const basis = octetMatrixStates();

  test("has the states of the octet in order, and orthogonal matrices", () => {
    expect(basis.every((entry, i) => sameState(entry.state, states(octet)[i]!))).toBe(true);
    for (const a of basis) {
      for (const b of basis) expect(overlap(a.entries, b.entries)).toBe(a === b ? a.square : 0);
    }
  });

  test("has the phases + + + - - - + - for p n Sigma+ Sigma0 Sigma- Lambda Xi0 Xi-", () => {
    // Follows from de Swart's phases for these matrices; unique up to one overall sign.
    expect(basis.map(({ phase }) => phase)).toEqual([1, 1, 1, -1, -1, -1, 1, -1]);
  });

  for (const [name, copy, combination, square] of [
    ["the anticommutator, with sqrt(3/10) Tr(R^T {B, M})", 1, anticommutator, [3, 10]],
    ["the commutator, with sqrt(1/6) Tr(R^T [M, B])", 2, (b: Matrix, m: Matrix) => commutator(m, b), [1, 6]],
  ] as const) {
    test(`turns octet ${copy} of 8 x 8 into ${name}, for every triple of states`, () => {
      const table = isoscalarTable(octet, octet);
      for (const r of basis) {
        for (const b of basis) {
          for (const m of basis) {
            const trace = overlap(r.entries, combination(b.entries, m.entries));
            // The overall sign of the phases is free; these relations hold for the other choice, minus each phase.
            const phase = -(r.phase * b.phase * m.phase);
            const scale = signedRoot(1, square[0], square[1] * r.square * b.square * m.square);
            const expected: SignedRoot = multiplyRoots(signedRoot(trace * phase, trace * trace), scale);
            const value = su3ClebschGordan(b.state, m.state, r.state, copy, table);
            expect(formatRoot(value)).toBe(formatRoot(expected));
          }
        }
      }
    });
  }
});
