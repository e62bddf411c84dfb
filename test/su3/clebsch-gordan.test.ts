import { describe, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { divideRational, multiplyRational, rational, rationalToNumber } from "../../src/exact/rational.js";
import { formatRoot, type SignedRoot, signedSquare } from "../../src/exact/signed-root.js";
import { su3ClebschGordan } from "../../src/su3/clebsch-gordan.js";
import { conjugate, type Irrep, irrepName, parseIrrep } from "../../src/su3/irrep.js";
import { isoscalarTable } from "../../src/su3/isoscalar-factors.js";
import { conjugateState, type State, states } from "../../src/su3/state.js";
import { irrepsUpTo } from "../support/irreps-up-to.js";
import { scalarProductOfRoots } from "../support/sum-of-roots.js";

const state = (name: string, threeY: number, twoI: number, twoI3: number): State => ({
  irrep: parseIrrep(name),
  threeY,
  twoI,
  twoI3,
});

/** The matrix of all coefficients of a product: a row for each product state and copy, a column for each pair. */
function matrixOf(left: Irrep, right: Irrep): SignedRoot[][] {
  const table = isoscalarTable(left, right);
  const pairs = states(left).flatMap((a) => states(right).map((b) => [a, b] as const));
  return table.series.flatMap(({ irrep, multiplicity }) =>
    Array.from({ length: multiplicity }, (_, i) => i + 1).flatMap((copy) =>
      states(irrep).map((product) => pairs.map(([a, b]) => su3ClebschGordan(a, b, product, copy, table))),
    ),
  );
}

describe("SU(3) Clebsch-Gordan coefficients", () => {
  test("of 8 x 8, 10 x 8, 6 x 3bar and 3 x 15 form orthogonal matrices, exactly", () => {
    for (const [left, right] of [
      ["8", "8"],
      ["10", "8"],
      ["6", "3bar"],
      ["3", "15(2,1)"],
    ] as const) {
      const rows = matrixOf(parseIrrep(left), parseIrrep(right));
      expect(rows.length).toBe(rows[0]!.length);
      for (const [i, row] of rows.entries()) {
        expect(formatRoot(scalarProductOfRoots(row, row))).toBe("1");
        for (const other of rows.slice(0, i)) expect(formatRoot(scalarProductOfRoots(row, other))).toBe("0");
      }
    }
  });

  test("make the singlet of a with its conjugate the sum of conjugate pairs, phases included", () => {
    const singlet = state("1", 0, 0, 0);
    for (const irrep of irrepsUpTo(4)) {
      const signs = states(irrep).map((a) => {
        const { phase, state: b } = conjugateState(a);
        const value = su3ClebschGordan(a, b, singlet, 1);
        expect(signedSquare(value).den % BigInt(states(irrep).length)).toBe(0n);
        return value.sign * phase;
      });
      expect(new Set(signs).size, `${irrepName(irrep)} x ${irrepName(conjugate(irrep))}`).toBe(1);
    }
  });

  test("give Omega- -> Xi0 K- against Delta+ -> p pi0 the flavour ratio 3/2", () => {
    // Review of Particle Physics, "SU(3) isoscalar factors", its worked example (provenance: memory).
    const [p, pi0] = [state("8", 3, 1, 1), state("8", 0, 2, 0)];
    const [xi0, kMinus] = [state("8", -3, 1, 1), state("8", -3, 1, -1)];
    const omega = su3ClebschGordan(xi0, kMinus, state("10", -6, 0, 0), 1);
    const delta = su3ClebschGordan(p, pi0, state("10", 3, 3, 1), 1);
    const ratio = divideRational(square(omega), square(delta));
    expect(ratio).toEqual(rational(3, 2));
  });

  test("relate F/D to the couplings of the two octets as (sqrt5/3) gA/gS", () => {
    // At p -> p pi0 and Xi0 -> Xi0 pi0 the amplitude is D + F and D - F, or gS c1 + gA c2.
    const octetOctet = (baryon: State, copy: number) =>
      signedSquare(su3ClebschGordan(baryon, state("8", 0, 2, 0), baryon, copy));
    const [s, a] = [1, 2].map((copy) => octetOctet(state("8", 3, 1, 1), copy)) as [never, never];
    const squared = divideRational(s, a);
    expect(multiplyRational(squared, rational(25, 9))).toEqual(rational(5));
    const [s2, a2] = [1, 2].map((copy) => octetOctet(state("8", -3, 1, 1), copy)) as [never, never];
    expect(divideRational(s2, a2)).toEqual(rational(-9, 5));
    expect(Math.sqrt(rationalToNumber(rational(5, 9)))).toBeCloseTo(0.7453559924999299, 14);
  });

  test("vanish where charges do not add up, and refuse states that do not exist", () => {
    const proton = state("8", 3, 1, 1);
    expect(su3ClebschGordan(proton, proton, state("27", 6, 2, 0), 1).sign).toBe(0);
    expect(() => su3ClebschGordan({ ...proton, twoI3: 3 }, proton, proton, 1)).toThrow(
      new InputError("su3ClebschGordan: left: twoI3: expected a number from -1 to 1 in steps of 2, got 3."),
    );
  });
});

function square(root: SignedRoot) {
  return rational(root.num, root.den);
}
