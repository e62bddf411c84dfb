import { describe, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { formatRational } from "../../src/exact/rational.js";
import { formatRoot, multiplyRoots, signedRoot } from "../../src/exact/signed-root.js";
import { CasimirCoupling, casimirEigenvalue } from "../../src/su3/casimir-coupling.js";
import { type Irrep, irrepName, isospinMultiplets, parseIrrep } from "../../src/su3/irrep.js";
import { isoscalarTable } from "../../src/su3/isoscalar-factors.js";
import { irrepsUpTo } from "../support/irreps-up-to.js";
import { scalarProductOfRoots } from "../support/sum-of-roots.js";

const products: [Irrep, Irrep][] = irrepsUpTo(2).flatMap((a) =>
  irrepsUpTo(2).map((b) => [a, b] as [Irrep, Irrep]),
);
products.push([parseIrrep("10"), parseIrrep("8")], [parseIrrep("27"), parseIrrep("8")]);

describe("T1.T2", () => {
  test("has the eigenvalues of the literature", () => {
    const text = (a: string, b: string, r: string) =>
      formatRational(casimirEigenvalue(parseIrrep(a), parseIrrep(b), parseIrrep(r)));
    // Colour factors of quark-antiquark and quark-quark, and of two octets.
    expect([
      text("3", "3bar", "1"),
      text("3", "3bar", "8"),
      text("3", "3", "3bar"),
      text("3", "3", "6"),
    ]).toEqual(["-4/3", "1/6", "-2/3", "1/3"]);
    expect(["1", "8", "10", "27"].map((r) => text("8", "8", r))).toEqual(["-3", "-3/2", "0", "1"]);
  });

  test("made of generators alone has the isoscalar factors as eigenvectors, exactly", () => {
    let checked = 0;
    for (const [left, right] of products) {
      const table = isoscalarTable(left, right);
      const operator = new CasimirCoupling(left, right);
      const places = new Map(
        table.series
          .flatMap(({ irrep }) => isospinMultiplets(irrep))
          .map((place) => [`${place.threeY},${place.twoI}`, place]),
      );
      for (const place of places.values()) {
        const channels = table.channels(place);
        const matrix = operator.betweenChannels(place, channels);
        for (const { irrep, multiplicity } of table.series) {
          if (
            !isospinMultiplets(irrep).some(
              ({ threeY, twoI }) => threeY === place.threeY && twoI === place.twoI,
            )
          )
            continue;
          const { num, den } = casimirEigenvalue(left, right, irrep);
          const eigenvalue = signedRoot(num, num * num, den * den);
          for (let copy = 1; copy <= multiplicity; copy++) {
            const vector = channels.map((channel) => table.factor(irrep, copy, place, channel));
            matrix.forEach((row, c) => {
              const image = scalarProductOfRoots(row, vector);
              expect(image, `${irrepName(left)} x ${irrepName(right)} -> ${irrepName(irrep)}`).toEqual(
                multiplyRoots(eigenvalue, vector[c]!),
              );
              checked++;
            });
          }
        }
      }
    }
    expect(checked).toBeGreaterThan(900);
  });

  test("between channels is symmetric, and between charge states of u and dbar exchanges them", () => {
    const [quark, antiquark] = [parseIrrep("3"), parseIrrep("3bar")];
    const operator = new CasimirCoupling(quark, antiquark);
    const u = { irrep: quark, threeY: 1, twoI: 1, twoI3: 1 };
    const s = { irrep: quark, threeY: -2, twoI: 0, twoI3: 0 };
    const ubar = { irrep: antiquark, threeY: -1, twoI: 1, twoI3: -1 };
    const sbar = { irrep: antiquark, threeY: 2, twoI: 0, twoI3: 0 };
    expect(formatRoot(operator.betweenStates([u, ubar], [u, ubar]))).toBe("-1/3");
    expect(formatRoot(operator.betweenStates([s, sbar], [u, ubar]))).toBe("1/2");
    expect(formatRoot(operator.betweenStates([u, ubar], [s, sbar]))).toBe("1/2");
    expect(() => operator.betweenStates([u, ubar], [u, { ...ubar, twoI3: 3 }])).toThrow(InputError);
  });
});
