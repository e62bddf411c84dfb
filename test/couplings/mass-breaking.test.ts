import { EigenvalueDecomposition, Matrix } from "ml-matrix";
import { describe, expect, test } from "vitest";
import type { FormMaker } from "../../src/couplings/form.js";
import { addRoots } from "../../src/exact/root-sum.js";
import {
  divideRoots,
  formatRoot,
  multiplyRoots,
  parseRoot,
  rootToNumber,
  type SignedRoot,
} from "../../src/exact/signed-root.js";
import { hasMultiplet, type IsospinMultiplet, isospinMultiplets, parseIrrep } from "../../src/su3/irrep.js";
import { isoscalarFactor } from "../../src/su3/isoscalar-factors.js";
import { BARYONS, DECUPLET, MASS_BREAKING, MESONS, makerOf, placeOfMember } from "./schemes.js";

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
    // Counted with characters: 1 + 4, 1 + 6, 1 + 4 and 1 + 4.
    ["10bar", ["8", "8"], 5, 12],
    ["27", ["8", "8"], 7, 24],
    ["8", ["10", "8"], 5, 12],
    ["10", ["10", "8"], 5, 13],
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

  test("the four open channels of the decuplet have rank 3 of 5 constants", () => {
    const makers = [makerOf("10", ["8", "8"]), makerOf("10", ["8", "8"], MASS_BREAKING)];
    const pion = placeOfMember(MESONS, "pi");
    const rows = [
      ["Delta(1232)", "N"],
      ["Sigma(1385)", "Lambda"],
      ["Sigma(1385)", "Sigma"],
      ["Xi(1530)", "Xi"],
    ].map(([parent, baryon]) =>
      makers.flatMap((maker) =>
        rowOf(maker, placeOfMember(DECUPLET, parent!), [placeOfMember(BARYONS, baryon!), pion]),
      ),
    );
    expect([rows[0]!.length, rank(rows)]).toEqual([5, 3]);
  });

  test("between members of one octet, 12 constants have 2 + 5 couplings: one amplitude serves both directions", () => {
    const makers = [makerOf("8", ["8", "8"]), makerOf("8", ["8", "8"], MASS_BREAKING)];
    const row = (parent: string, baryon: string, meson: string) =>
      makers.flatMap((maker) =>
        rowOf(maker, placeOfMember(BARYONS, parent), [
          placeOfMember(BARYONS, baryon),
          placeOfMember(MESONS, meson),
        ]),
      );
    // A hermitian vertex: in units of the symmetric amplitudes, R -> B m and B -> R mbar are equal.
    const both = [
      [row("Sigma", "Lambda", "pi"), row("Lambda", "Sigma", "pi")],
      [row("N", "Lambda", "K"), row("Lambda", "N", "Kbar")],
      [row("N", "Sigma", "K"), row("Sigma", "N", "Kbar")],
      [row("Xi", "Lambda", "Kbar"), row("Lambda", "Xi", "K")],
      [row("Xi", "Sigma", "Kbar"), row("Sigma", "Xi", "K")],
    ] as const;
    const constraints = both.map(([one, other]) => {
      const k = Math.abs(one[0]!) > 1e-12 ? 0 : 1;
      const ratio = one[k]! / other[k]!;
      return one.map((c, index) => c - ratio * other[index]!);
    });
    const all = channelMatrix("8", ["8", "8"]);
    expect(all.length - both.length).toBe(12);
    expect(rank(all) - rank(constraints)).toBe(7);
  });

  test("octets of the spurion: its factors are those of the tables, -1/8 for the singlet to 27/40 and 9/16 for the 27", () => {
    // Entries of the isoscalar tables, e.g. J.J. de Swart, Rev. Mod. Phys. 35 (1963) 916 (from memory): signed squares of
    // R' -> R x (Y = 0, I = 0), for N, Sigma, Lambda, Xi of an octet and Delta, Sigma, Xi, Omega of a decuplet.
    const octet = parseIrrep("8");
    const factor = (to: string, copy: number, from: string, threeY: number, twoI: number) => {
      const irrep = parseIrrep(to);
      if (!hasMultiplet(irrep, { threeY, twoI })) return undefined;
      const channel = { threeY1: threeY, twoI1: twoI, threeY2: 0, twoI2: 0 };
      return formatRoot(isoscalarFactor(parseIrrep(from), octet, irrep, copy, { threeY, twoI }, channel));
    };
    const places = {
      "8": [
        [3, 1],
        [0, 2],
        [0, 0],
        [-3, 1],
      ],
      "10": [
        [3, 3],
        [0, 2],
        [-3, 1],
        [-6, 0],
      ],
    } as const;
    const factors = (from: "8" | "10", to: string, copy = 1) =>
      places[from].map(([threeY, twoI]) => factor(to, copy, from, threeY, twoI));
    expect(factors("8", "1")).toEqual([undefined, undefined, "-sqrt(1/8)", undefined]);
    expect(factors("8", "8", 1)).toEqual(["-sqrt(1/20)", "sqrt(1/5)", "-sqrt(1/5)", "-sqrt(1/20)"]);
    expect(factors("8", "8", 2)).toEqual(["1/2", "0", "0", "-1/2"]);
    expect(factors("8", "10")).toEqual([undefined, "1/2", undefined, "1/2"]);
    expect(factors("8", "10bar")).toEqual(["1/2", "1/2", undefined, undefined]);
    expect(factors("8", "27")).toEqual(["sqrt(9/20)", "sqrt(3/10)", "sqrt(27/40)", "sqrt(9/20)"]);
    expect(factors("10", "8")).toEqual([undefined, "-sqrt(1/5)", "-sqrt(1/5)", undefined]);
    expect(factors("10", "10")).toEqual(["sqrt(1/8)", "0", "-sqrt(1/8)", "-sqrt(1/2)"]);
    expect(factors("10", "27")).toEqual(["3/4", "sqrt(3/10)", "sqrt(9/80)", undefined]);
  });
});
