import { EigenvalueDecomposition, Matrix } from "ml-matrix";
import { describe, expect, test } from "vitest";
import type { FormMaker } from "../../src/couplings/form.js";
import { MASS_BREAKING } from "../../src/couplings/operator.js";
import { addRoots } from "../../src/exact/root-sum.js";
import {
  divideRoots,
  formatRoot,
  multiplyRoots,
  parseRoot,
  rootToNumber,
  type SignedRoot,
} from "../../src/exact/signed-root.js";
import { type IsospinMultiplet, isospinMultiplets } from "../../src/su3/irrep.js";
import { BARYONS, DECUPLET, MESONS, makerOf, placeOfMember } from "./schemes.js";

/** Rows: isospin channels; columns: symmetric couplings, then those of first-order breaking. */
function channelMatrix(from: string, to: string[]): number[][] {
  const makers = [makerOf(from, to), makerOf(from, to, MASS_BREAKING)];
  const channels = isospinMultiplets(makers[0]!.scheme.from.irrep).flatMap((initial) =>
    makers[1]!.isospinForms(initial).map(({ finals }) => ({ initial, finals })),
  );
  return channels.map(({ initial, finals }) => makers.flatMap((maker) => rowOf(maker, initial, finals)));
}

function rowOf(
  maker: FormMaker,
  initial: IsospinMultiplet,
  finals: readonly [IsospinMultiplet, IsospinMultiplet],
): number[] {
  const { terms } = maker.isospinForm(initial, finals);
  return maker.reduced.map((_, index) => {
    return terms.filter(({ reduced }) => reduced === index).reduce((sum, { c }) => sum + rootToNumber(c), 0);
  });
}

function rank(rows: number[][]): number {
  const matrix = new Matrix(rows);
  const { realEigenvalues } = new EigenvalueDecomposition(matrix.transpose().mmul(matrix), {
    assumeSymmetric: true,
  });
  return realEigenvalues.filter((value) => value > 1e-10).length;
}

describe("first-order breaking by the strange quark's mass", () => {
  test.each([
    // Counts: M. Muraskin and S. L. Glashow, Phys. Rev. 132 (1963) 482; V. Gupta and V. Singh, Phys. Rev. 135 (1964)
    // B1442; C. Becchi, E. Eberle and G. Morpurgo, Phys. Rev. 136 (1964) B808; provenance: memory.
    ["8", ["8", "8"], 10, 17],
    ["10", ["8", "8"], 5, 12],
    ["1", ["8", "8"], 3, 4],
  ])("%s -> %j has %i independent amplitudes for %i isospin channels", (from, to, independent, channels) => {
    const rows = channelMatrix(from, to);
    expect([rows.length, rank(rows)]).toEqual([channels, independent]);
  });

  test("one sum rule of the open decuplet decays survives: 2 (r_Delta + r_Xi) = 3 r_Lambda + r_Sigma", () => {
    // C. Becchi, E. Eberle and G. Morpurgo, Phys. Rev. 136 (1964) B808; provenance: memory. r is an amplitude in units of
    // its symmetric value.
    const [symmetric, broken] = [makerOf("10", ["8", "8"]), makerOf("10", ["8", "8"], MASS_BREAKING)];
    const pion = placeOfMember(MESONS, "pi");
    const channels: [string, string, string][] = [
      ["Delta(1232)", "N", "2"],
      ["Xi(1530)", "Xi", "2"],
      ["Sigma(1385)", "Lambda", "-3"],
      ["Sigma(1385)", "Sigma", "-1"],
    ];
    const weighted = (maker: FormMaker, index: number): SignedRoot[] =>
      channels.flatMap(([parent, baryon, weight]) => {
        const place = placeOfMember(DECUPLET, parent);
        const finals = [placeOfMember(BARYONS, baryon), pion] as const;
        const unit = symmetric.isospinForm(place, finals).terms[0]!.c;
        const terms = maker.isospinForm(place, finals).terms.filter(({ reduced }) => reduced === index);
        return terms.map(({ c }) => multiplyRoots(parseRoot(weight), divideRoots(c, unit)));
      });
    expect(addRoots(weighted(symmetric, 0)).map(formatRoot)).toEqual([]);
    for (const index of broken.reduced.keys()) {
      const roots = weighted(broken, index);
      expect(roots.length).toBeGreaterThan(1);
      expect(addRoots(roots).map(formatRoot)).toEqual([]);
    }
  });
});
