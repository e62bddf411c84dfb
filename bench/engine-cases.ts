import { gcd } from "../src/exact/integer.js";
import { addRational, rational } from "../src/exact/rational.js";
import { roundedSquareRoot } from "../src/exact/rounding.js";
import { clebschGordan } from "../src/su2/clebsch-gordan.js";
import { irrepDimension, parseIrrep } from "../src/su3/irrep.js";
import { type FactorColumns, isoscalarTable, valueAt } from "../src/su3/isoscalar-factors.js";
import { decomposeProduct } from "../src/su3/product.js";
import { encodeFactors } from "../src/tables/encode-factors.js";
import { seededIntegers } from "../test/support/seeded-integers.js";
import { type BenchCase, requireResult } from "./bench-case.js";

/** Products by name, and the number of their factors, structural zeros included. */
export const PRODUCTS = [
  { name: "8x8", left: "8", right: "8", factors: 86 },
  { name: "27x27", left: "27", right: "27", factors: 1801 },
  { name: "64x64", left: "64", right: "64", factors: 16_816 },
  { name: "125x125", left: "125", right: "125", factors: 97_225 },
] as const;

/** Cases of exact numbers, SU(2) and the engine. */
export const ENGINE_CASES: readonly BenchCase[] = [
  roundingCase(),
  isospinCase(),
  seriesCase(),
  ...PRODUCTS.map(finishedCase),
  oneIrrepCase(),
  doublesCase(),
  bytesCase(),
];

/** Throws unless the table has its number of places and the squares of every multiplet add up to exactly 1. */
export function checkFinished(name: string, columns: FactorColumns, factors: number): void {
  requireResult(name, columns.sign.length === factors, `${columns.sign.length} factors, not ${factors}`);
  for (const { start, channels, threeY, twoI } of columns.segments) {
    const sum = channels
      .map((_, c) => valueAt(columns, start + c))
      .map(({ num, den }) => rational(num, den))
      .reduce(addRational, rational(0));
    requireResult(name, sum.num === sum.den, `squares at 3Y = ${threeY}, 2I = ${twoI} do not add up to 1`);
  }
}

function finishedCase({ name, left, right, factors }: (typeof PRODUCTS)[number]): BenchCase {
  const full = `su3/finished-table/${name}`;
  return {
    name: full,
    make: () => ({
      run: () => isoscalarTable(parseIrrep(left), parseIrrep(right)).columns(),
      check: (columns: FactorColumns) => checkFinished(full, columns, factors),
    }),
  };
}

function oneIrrepCase(): BenchCase {
  const name = "su3/one-irrep/125-in-125x125";
  const irrep = parseIrrep("125");
  return {
    name,
    make: () => ({
      run: () => isoscalarTable(irrep, irrep, { into: irrep }).columns(),
      check: (columns: FactorColumns) => {
        const whole = isoscalarTable(irrep, irrep).columns().segments;
        const own = whole.filter((segment) => segment.irrep.p === 4 && segment.irrep.q === 4);
        checkFinished(
          name,
          columns,
          own.reduce((sum, { channels }) => sum + channels.length, 0),
        );
      },
    }),
  };
}

function doublesCase(): BenchCase {
  const name = "su3/doubles/64x64";
  return {
    name,
    make: () => {
      const table = isoscalarTable(parseIrrep("64"), parseIrrep("64"));
      return {
        run: () => table.doubles(),
        check: (doubles: Float64Array) => {
          const squares = doubles.reduce((sum, x) => sum + x * x, 0);
          const multiplets = table.columns().segments.length;
          requireResult(name, Math.abs(squares - multiplets) < 1e-9, `squares add up to ${squares}`);
        },
      };
    },
  };
}

function bytesCase(): BenchCase {
  const name = "tables/encode-factors/27x27";
  return {
    name,
    make: () => {
      const table = isoscalarTable(parseIrrep("27"), parseIrrep("27"));
      return {
        run: () => encodeFactors(table, { states: false }),
        check: (bytes: Uint8Array) => requireResult(name, bytes.length > 70_000, `${bytes.length} bytes`),
      };
    },
  };
}

function seriesCase(): BenchCase {
  const name = "su3/decompose-product/(9,7)x(8,6)";
  const [left, right] = [
    { p: 9, q: 7 },
    { p: 8, q: 6 },
  ];
  return {
    name,
    make: () => ({
      run: () => decomposeProduct(left, right),
      check: (series: ReturnType<typeof decomposeProduct>) => {
        const total = series.reduce(
          (sum, { irrep, multiplicity }) => sum + multiplicity * irrepDimension(irrep),
          0,
        );
        requireResult(name, total === irrepDimension(left) * irrepDimension(right), `${total} states`);
      },
    }),
  };
}

function isospinCase(): BenchCase {
  const name = "su2/clebsch-gordan/1000-seeded";
  return {
    name,
    make: () => {
      const random = seededIntegers(2001);
      const labels = Array.from({ length: 1000 }, () => {
        const [twoJ1, twoJ2] = [random.below(12), random.below(12)];
        const twoJ = Math.abs(twoJ1 - twoJ2) + 2 * random.below(Math.min(twoJ1, twoJ2) + 1);
        const twoM1 = twoJ1 - 2 * random.below(twoJ1 + 1);
        return [twoJ1, twoM1, twoJ2, twoJ] as const;
      });
      return {
        run: () =>
          labels.map(([twoJ1, twoM1, twoJ2, twoJ]) => {
            const twoM2 = Math.max(-twoJ2, Math.min(twoJ2, twoJ - twoM1));
            return clebschGordan(twoJ1, twoM1, twoJ2, twoM2, twoJ, Math.min(twoJ, twoM1 + twoM2));
          }),
        check: (values: { num: bigint; den: bigint }[]) =>
          requireResult(
            name,
            values.every(({ num, den }) => num <= den && gcd(num, den) === 1n),
            "above 1",
          ),
      };
    },
  };
}

function roundingCase(): BenchCase {
  const name = "exact/rounded-square-root/1000-seeded";
  return {
    name,
    make: () => {
      const random = seededIntegers(2002);
      const fractions = Array.from(
        { length: 1000 },
        () => [random.bigint(60) + 1n, random.bigint(60) + 1n] as const,
      );
      return {
        run: () => fractions.map(([num, den]) => roundedSquareRoot(num, den)),
        check: (roots: number[]) =>
          requireResult(
            name,
            roots.every((root, i) => {
              const [num, den] = fractions[i]!;
              return Math.abs(root / Math.sqrt(Number(num) / Number(den)) - 1) < 1e-15;
            }),
            "further than 1e-15 from Math.sqrt",
          ),
      };
    },
  };
}
