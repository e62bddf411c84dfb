import { describe, expect, test } from "vitest";
import { rational } from "../../src/exact/rational.js";
import { formatRoot, multiplyRoots, type SignedRoot, ZERO_ROOT } from "../../src/exact/signed-root.js";
import { su3ClebschGordan } from "../../src/su3/clebsch-gordan.js";
import { chainState, chainTransformation, type FlavourChain } from "../../src/su3/flavour-chains.js";
import { parseIrrep } from "../../src/su3/irrep.js";
import { isoscalarTable } from "../../src/su3/isoscalar-factors.js";
import { LADDERS, rationalBasis, scaledRoot } from "../../src/su3/rational-basis.js";
import { type State, sameState, states, threeCharge } from "../../src/su3/state.js";
import { irrepsUpTo } from "../support/irreps-up-to.js";
import { irrepSpace } from "../support/ladder-space.js";
import { scalarProductOfRoots, sumOfRoots } from "../support/sum-of-roots.js";

const chains: FlavourChain[] = ["isospin", "U-spin", "V-spin"];
const irreps = irrepsUpTo(3);

/** A chain's transformation as a full matrix: a row for each of its states. */
function matrixOf(chain: FlavourChain, irrep: { p: number; q: number }): SignedRoot[][] {
  const columns = states(irrep);
  return chainTransformation(chain, irrep).map((terms) =>
    columns.map((column) => terms.find(({ state }) => sameState(state, column))?.value ?? ZERO_ROOT),
  );
}

describe("the rational basis", () => {
  test("has the squared matrix elements of a space of polynomials, and their signs", () => {
    for (const irrep of irreps) {
      const basis = rationalBasis(irrep);
      const space = irrepSpace(irrep);
      const find = (i: number) => basis.indexOf(space.threeY[i]!, space.twoI[i]!, space.twoI3[i]!);
      for (const ladder of LADDERS) {
        for (let i = 0; i < space.size; i++) {
          const image = basis.apply(ladder, new Map([[find(i), rational(1)]]));
          const expected = [...space.images[ladder][i]!].map(
            ([j, c]) =>
              `${find(j)} ${formatRoot(multiplyRoots(scaledRoot(c, space.norms[j]!), rootOfInverse(space.norms[i]!)))}`,
          );
          const norm = basis.norms[find(i)]!;
          const computed = [...image].map(
            ([j, c]) =>
              `${j} ${formatRoot(multiplyRoots(scaledRoot(c, basis.norms[j]!), rootOfInverse(norm)))}`,
          );
          expect(computed.sort()).toEqual(expected.sort());
        }
      }
    }
  });
});

describe("U-spin and V-spin chains", () => {
  test("are orthogonal transformations of the isospin chain, exactly", () => {
    for (const chain of chains) {
      for (const irrep of irreps) {
        const matrix = matrixOf(chain, irrep);
        matrix.forEach((row, i) => {
          matrix.slice(i).forEach((other, j) => {
            expect(formatRoot(scalarProductOfRoots(row, other))).toBe(j === 0 ? "1" : "0");
          });
        });
      }
    }
  });

  test("keep the weights: U-spin states have the charge -Y_U, V-spin states the charge Y + Y_V", () => {
    for (const irrep of irreps) {
      const list = states(irrep);
      chainTransformation("U-spin", irrep).forEach((terms, i) => {
        for (const { state } of terms) expect(threeCharge(state)).toBe(0 - list[i]!.threeY);
      });
      chainTransformation("V-spin", irrep).forEach((terms, i) => {
        for (const { state } of terms) expect(threeCharge(state) - state.threeY).toBe(list[i]!.threeY);
      });
    }
  });

  test("U-spin multiplets of the octet: n, Xi0 and Sigma0, Lambda mixed by sqrt3", () => {
    // S. Meshkov, C.A. Levinson, H.J. Lipkin, Phys. Rev. Lett. 10 (1963) 361 (provenance: memory).
    const octet = parseIrrep("8");
    const state = (threeY: number, twoI: number, twoI3: number): State => ({
      irrep: octet,
      threeY,
      twoI,
      twoI3,
    });
    const text = (chain: FlavourChain, s: State) =>
      chainState(chain, s).map(
        ({ state: t, value }) => `${t.threeY},${t.twoI},${t.twoI3}: ${formatRoot(value)}`,
      );
    expect(text("U-spin", state(0, 2, 2))).toEqual(["3,1,-1: 1"]);
    const [neutral, scalar] = [text("U-spin", state(0, 2, 0)), text("U-spin", state(0, 0, 0))];
    expect(neutral.map((line) => line.replace("-", ""))).toEqual(["0,2,0: 1/2", "0,0,0: sqrt(3/4)"]);
    expect(scalar.map((line) => line.replace("-", ""))).toEqual(["0,2,0: sqrt(3/4)", "0,0,0: 1/2"]);
    // The doublet of positive charge: Sigma+ and p.
    expect(text("U-spin", state(-3, 1, 1)).map((line) => line.replace("-", ""))).toEqual(["3,1,1: 1"]);
    expect(text("U-spin", state(-3, 1, -1)).map((line) => line.replace("-", ""))).toEqual(["0,2,2: 1"]);
  });

  test("give I- and U+ (I+ and V+) the positive matrix elements that I+ and V+ have in the isospin chain", () => {
    const roles = {
      isospin: ["I+", "V+"],
      "U-spin": ["U+", "I-"],
      "V-spin": ["V+", "I+"],
    } as const;
    for (const chain of chains) {
      for (const irrep of irreps) {
        const basis = rationalBasis(irrep);
        const matrix = matrixOf(chain, irrep);
        const own = matrixOf("isospin", irrep);
        roles[chain].forEach((ladder, role) => {
          const elements = transformed(basis, ladder, matrix);
          expect(elements.flat().every(({ sign }) => sign >= 0)).toBe(true);
          expect(elements).toEqual(transformed(basis, (["I+", "V+"] as const)[role]!, own));
        });
      }
    }
  });

  test("leave all coupling coefficients as they are", () => {
    const [three, octet, six] = ["3", "8", "6"].map(parseIrrep) as [
      State["irrep"],
      State["irrep"],
      State["irrep"],
    ];
    for (const chain of ["U-spin", "V-spin"] as const) {
      const table = isoscalarTable(three, octet, { into: six.p === 2 ? { p: 0, q: 2 } : six });
      const into = table.series[0]!.irrep;
      const [a, b, s] = [matrixOf(chain, three), matrixOf(chain, octet), matrixOf(chain, into)];
      const [as, bs, ss] = [states(three), states(octet), states(into)];
      for (const [i, row] of a.entries()) {
        for (const [j, other] of b.entries()) {
          for (const [k, product] of s.entries()) {
            const terms = row.flatMap((x, i2) =>
              other.flatMap((y, j2) =>
                product.map((z, k2) =>
                  [x, y, z].some(({ sign }) => sign === 0)
                    ? ZERO_ROOT
                    : [x, y, z].reduce(multiplyRoots, su3ClebschGordan(as[i2]!, bs[j2]!, ss[k2]!, 1, table)),
                ),
              ),
            );
            expect(sumOfRoots(terms)).toEqual(su3ClebschGordan(as[i]!, bs[j]!, ss[k]!, 1, table));
          }
        }
      }
    }
  });
});

/** <row i| ladder |row j> between normalised states of a chain. */
function transformed(
  basis: ReturnType<typeof rationalBasis>,
  ladder: (typeof LADDERS)[number],
  matrix: SignedRoot[][],
): SignedRoot[][] {
  const elements = basis.states.map((_, j) => {
    const image = basis.apply(ladder, new Map([[j, rational(1)]]));
    const norm = basis.norms[j]!;
    return basis.states.map((__, i) => {
      const c = image.get(i);
      if (c === undefined) return ZERO_ROOT;
      return multiplyRoots(scaledRoot(c, basis.norms[i]!), rootOfInverse(norm));
    });
  });
  return matrix.map((bra) =>
    matrix.map((ket) =>
      sumOfRoots(
        ket.flatMap((y, j) =>
          y.sign === 0
            ? []
            : bra.map((x, i) =>
                x.sign === 0 ? ZERO_ROOT : multiplyRoots(multiplyRoots(x, y), elements[j]![i]!),
              ),
        ),
      ),
    ),
  );
}

function rootOfInverse({ num, den }: { num: bigint; den: bigint }): SignedRoot {
  return { sign: 1, num: den, den: num };
}
