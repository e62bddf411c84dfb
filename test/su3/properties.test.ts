import fc from "fast-check";
import { describe, test } from "vitest";
import { addRational, multiplyRational, rational } from "../../src/exact/rational.js";
import { formatRoot, multiplyRoots } from "../../src/exact/signed-root.js";
import {
  casimir,
  conjugate,
  hasMultiplet,
  type Irrep,
  irrepDimension,
  irrepName,
  isospinMultiplets,
  parseIrrep,
  sameIrrep,
  triality,
} from "../../src/su3/irrep.js";
import { isoscalarTable, valueAt } from "../../src/su3/isoscalar-factors.js";
import { decomposeProduct, irrepMultiplicities, type SeriesEntry } from "../../src/su3/product.js";
import { conjugateState, sameState, states, threeCharge } from "../../src/su3/state.js";
import { sumOfRoots } from "../support/sum-of-roots.js";

const SEED = 77_102;
const label = (max: number) => fc.nat({ max });
const irrep = (max: number): fc.Arbitrary<Irrep> => fc.record({ p: label(max), q: label(max) });
const options = (numRuns: number) => ({ seed: SEED, numRuns });

function seriesText(series: readonly SeriesEntry[]): string {
  return series.map(({ irrep: { p, q }, multiplicity }) => `${multiplicity}*(${p},${q})`).join(" ");
}

describe(`irreps and products obey their laws for random labels (seed ${SEED})`, () => {
  test("names read back as the irrep", () => {
    fc.assert(
      fc.property(
        irrep(60),
        (r) => sameIrrep(parseIrrep(irrepName(r)), r) && sameIrrep(parseIrrep(`${r.p},${r.q}`), r),
      ),
      options(500),
    );
  });

  test("isospin multiplets and states add up to the dimension, and have their labels", () => {
    fc.assert(
      fc.property(irrep(12), (r) => {
        const multiplets = isospinMultiplets(r);
        const total = multiplets.reduce((sum, { twoI }) => sum + twoI + 1, 0);
        const integral = states(r).every((s) => Number.isInteger(threeCharge(s)));
        return total === irrepDimension(r) && integral && multiplets.every((m) => hasMultiplet(r, m));
      }),
      options(100),
    );
  });

  test("conjugating twice gives every state back with phase 1, and reverses the charge once", () => {
    fc.assert(
      fc.property(irrep(6), (r) =>
        states(r).every((state) => {
          const once = conjugateState(state);
          const twice = conjugateState(once.state);
          const reversed = threeCharge(once.state) + threeCharge(state) === 0;
          return reversed && once.phase * twice.phase === 1 && sameState(twice.state, state);
        }),
      ),
      options(100),
    );
  });

  test("products keep dimension, triality and Casimir trace, and do not mind the order or conjugation", () => {
    fc.assert(
      fc.property(irrep(9), irrep(9), (a, b) => {
        const series = decomposeProduct(a, b);
        const total = series.reduce(
          (sum, { irrep: r, multiplicity }) => sum + multiplicity * irrepDimension(r),
          0,
        );
        const dimensions = irrepDimension(a) * irrepDimension(b);
        const trace = series
          .map(({ irrep: r, multiplicity }) =>
            multiplyRational(casimir(r), rational(multiplicity * irrepDimension(r))),
          )
          .reduce(addRational);
        const expected = multiplyRational(addRational(casimir(a), casimir(b)), rational(dimensions));
        const conjugated = decomposeProduct(conjugate(a), conjugate(b)).map(({ irrep: r, multiplicity }) => ({
          irrep: conjugate(r),
          multiplicity,
        }));
        const key = (list: readonly SeriesEntry[]) => seriesText(list).split(" ").sort().join(" ");
        return (
          total === dimensions &&
          trace.num === expected.num &&
          trace.den === expected.den &&
          series.every(({ irrep: r }) => triality(r) === (triality(a) + triality(b)) % 3) &&
          seriesText(series) === seriesText(decomposeProduct(b, a)) &&
          key(conjugated) === key(series)
        );
      }),
      options(200),
    );
  });

  test("the singlet appears once exactly in a product with the conjugate", () => {
    fc.assert(
      fc.property(irrep(5), irrep(5), (a, b) => {
        const count = decomposeProduct(a, b).find(({ irrep: { p, q } }) => p + q === 0)?.multiplicity ?? 0;
        return count === (sameIrrep(a, conjugate(b)) ? 1 : 0);
      }),
      options(300),
    );
  });

  test("products of three do not mind how they are bracketed", () => {
    fc.assert(
      fc.property(irrep(3), irrep(3), irrep(3), (a, b, c) => {
        const orders = [
          [a, b, c],
          [c, a, b],
          [b, c, a],
        ];
        return new Set(orders.map((order) => seriesText(irrepMultiplicities(order)))).size === 1;
      }),
      options(60),
    );
  });

  test("two copies in one block are orthogonal, and squares add up, for a random block of a random product", () => {
    fc.assert(
      fc.property(irrep(4), irrep(3), fc.nat(), (a, b, choice) => {
        const columns = isoscalarTable(a, b).columns();
        const chosen = columns.segments[choice % columns.segments.length]!;
        const block = columns.segments.filter(
          ({ threeY, twoI }) => threeY === chosen.threeY && twoI === chosen.twoI,
        );
        const row = (start: number) => chosen.channels.map((_, c) => valueAt(columns, start + c));
        const own = row(chosen.start);
        return block.every(({ start }) => {
          const other = row(start);
          const product = sumOfRoots(own.map((value, c) => multiplyRoots(value, other[c]!)));
          return formatRoot(product) === (start === chosen.start ? "1" : "0");
        });
      }),
      options(60),
    );
  });
});
