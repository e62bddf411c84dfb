import { gcd } from "../../exact/integer.js";
import { requireIdentity } from "../../require.js";
import type { Irrep } from "../irrep.js";
import type { Block, ProductBlocks } from "./blocks.js";
import { nullSpace, primitive } from "./elimination.js";
import { patternNumber, raiseK, raiseL } from "./patterns.js";

/**
 * The leading multiplet of an irrep in a product: largest isospin, I = (P+Q)/2 and Y = (P-Q)/3.
 *
 * It is extremal: raising and lowering Y towards a larger isospin both annul it. Each of these equations joins at most
 * four channels, so that the channels with the first factor in its own leading multiplet, one row of different I2,
 * determine all others; only the far ends of the two chains of equations constrain them.
 */
export interface LeadingMultiplet {
  readonly block: Block;
  /** The places of the row that determines the rest, I2 descending. */
  readonly row: readonly number[];
  /** The places of the first independent channels of that row, one a copy. */
  readonly free: readonly number[];
  /** One primitive integer vector a copy; vector i is zero at every free place but the i-th. */
  readonly basis: readonly bigint[][];
}

/** Sum of coefficients[i] · y[places[i]] = 0. */
interface Equation {
  readonly places: number[];
  readonly coefficients: bigint[];
}

/** The channels of one left pattern, and the equation that gives each from rows before. */
interface Row {
  readonly onEdge: boolean;
  readonly equations: { readonly place: number; readonly equation: Equation }[];
}

/** The leading multiplets of an irrep that occurs `multiplicity` times. */
export function leadingMultiplet(
  product: ProductBlocks,
  irrep: Irrep,
  multiplicity: number,
): LeadingMultiplet {
  const twoI = irrep.p + irrep.q;
  const block = product.at(irrep.p - irrep.q, twoI)!;
  const { left, right } = product;
  const { p, q } = left.irrep;
  const first = patternNumber(left, p + q, 0);
  const row = right.printed
    .filter((b) => left.threeY[first]! + right.threeY[b]! === block.threeY)
    .map((b) => product.place(first, b, twoI))
    .filter((place) => place >= 0);
  const rows = remainingRows(product, block);
  const edge = rows.filter((entry) => entry.onEdge);
  const unknowns = row.map((_, i) => row.map((_, j) => (i === j ? 1n : 0n)));
  const forms = propagated(block.size, row, unknowns, edge);
  const ends = [
    ...equationsAt(product, block, "W", patternNumber(left, p + q, q)),
    ...equationsAt(product, block, "T", patternNumber(left, q, 0)),
  ];
  const constraints = ends.map(({ equation }) => forms.map((form) => sumOfTerms(equation, form)));
  const { basis, free } = nullSpace(constraints, row.length);
  requireIdentity("leadingMultiplet", basis.length === multiplicity, () => {
    return `(${irrep.p},${irrep.q}) occurs ${multiplicity} times but ${basis.length} extremal states were found`;
  });
  return {
    block,
    row,
    free: free.map((column) => row[column]!),
    basis: propagated(block.size, row, basis, rows).map(primitive),
  };
}

/** The rows after the first, each after the rows its equations use. */
function remainingRows(product: ProductBlocks, block: Block): Row[] {
  const { p, q } = product.left.irrep;
  const rows: Row[] = [];
  for (let l = 0; l <= q; l++) {
    for (let k = p + q; k >= q; k--) {
      if (l === 0 && k === p + q) continue;
      const [step, from] =
        l === 0
          ? (["T", patternNumber(product.left, k + 1, 0)] as const)
          : (["W", patternNumber(product.left, k, l - 1)] as const);
      const solved = patternNumber(product.left, k, l);
      const equations = equationsAt(product, block, step, from).flatMap(({ right, equation }) => {
        const place = product.place(solved, right, block.twoI);
        return place < 0 ? [] : [{ place, equation }];
      });
      rows.push({ onEdge: l === 0 || k === p + q, equations });
    }
  }
  return rows;
}

/** The equations whose target channels, at I + 1/2, have the left pattern `a`: one for each right pattern. */
function equationsAt(
  product: ProductBlocks,
  block: Block,
  step: "T" | "W",
  a: number,
): { right: number; equation: Equation }[] {
  const { left, right } = product;
  const threeY2 = block.threeY + (step === "T" ? 3 : -3) - left.threeY[a]!;
  const found = [];
  for (let b = 0; b < right.count; b++) {
    if (right.threeY[b] !== threeY2 || product.place(a, b, block.twoI + 1) < 0) continue;
    found.push({ right: b, equation: (step === "T" ? raising : lowering)(product, block.twoI, a, b) });
  }
  return found;
}

/** T to I + 1/2 gives zero at the target channel (a,b). */
function raising(product: ProductBlocks, twoI: number, a: number, b: number): Equation {
  const { left, right } = product;
  const k1 = left.k[a]!;
  const l1 = left.l[a]!;
  const k2 = right.k[b]!;
  const l2 = right.l[b]!;
  const { al, be, ga, si, d1, d2 } = triangle(product, twoI + 1, a, b);
  const at = (a1: number, b1: number) => product.place(a1, b1, twoI);
  return equation([
    [at(patternNumber(left, k1 - 1, l1), b), d2 * si * be * raiseK(left.irrep, k1 - 1)],
    [at(patternNumber(left, k1, l1 - 1), b), -d2 * (al + 1) * ga * raiseL(left.irrep, l1 - 1)],
    [at(a, patternNumber(right, k2 - 1, l2)), d1 * si * ga * raiseK(right.irrep, k2 - 1)],
    [at(a, patternNumber(right, k2, l2 - 1)), d1 * (al + 1) * be * raiseL(right.irrep, l2 - 1)],
  ]);
}

/** W to I + 1/2 gives zero at the target channel (a,b). */
function lowering(product: ProductBlocks, twoI: number, a: number, b: number): Equation {
  const { left, right } = product;
  const k1 = left.k[a]!;
  const l1 = left.l[a]!;
  const k2 = right.k[b]!;
  const l2 = right.l[b]!;
  const { al, be, ga, si, d1, d2 } = triangle(product, twoI + 1, a, b);
  const at = (a1: number, b1: number) => product.place(a1, b1, twoI);
  return equation([
    [at(patternNumber(left, k1 + 1, l1), b), d2 * ga * (al + 1)],
    [at(patternNumber(left, k1, l1 + 1), b), d2 * si * be],
    [at(a, patternNumber(right, k2 + 1, l2)), -d1 * be * (al + 1)],
    [at(a, patternNumber(right, k2, l2 + 1)), d1 * si * ga],
  ]);
}

function triangle({ left, right }: ProductBlocks, twoI: number, a: number, b: number) {
  const d1 = left.d[a]!;
  const d2 = right.d[b]!;
  const twoI1 = d1 - 1;
  const twoI2 = d2 - 1;
  return {
    al: (twoI1 + twoI2 - twoI) / 2,
    be: (twoI1 - twoI2 + twoI) / 2,
    ga: (twoI2 - twoI1 + twoI) / 2,
    si: (twoI1 + twoI2 + twoI) / 2 + 1,
    d1,
    d2,
  };
}

function equation(terms: [place: number, coefficient: number][]): Equation {
  const present = terms.filter(([place, coefficient]) => place >= 0 && coefficient !== 0);
  return { places: present.map(([place]) => place), coefficients: present.map(([, value]) => BigInt(value)) };
}

/** The sum of the equation's terms, leaving out the one at `solved`. */
function sumOfTerms({ places, coefficients }: Equation, vector: readonly bigint[], solved = -1): bigint {
  let sum = 0n;
  for (let i = 0; i < places.length; i++) {
    if (places[i] !== solved) sum += coefficients[i]! * vector[places[i]!]!;
  }
  return sum;
}

/**
 * Vectors continued from their first row over further rows; all are scaled together where a row brings denominators.
 *
 * @param seeds - one vector over the places of `row` for each result
 */
function propagated(
  size: number,
  row: readonly number[],
  seeds: readonly bigint[][],
  rows: readonly Row[],
): bigint[][] {
  const vectors = seeds.map((seed) => {
    const vector = new Array<bigint>(size).fill(0n);
    for (const [i, place] of row.entries()) vector[place] = seed[i]!;
    return vector;
  });
  for (const { equations } of rows) {
    const divisors = equations.map(
      ({ place, equation: { places, coefficients } }) => coefficients[places.indexOf(place)]!,
    );
    const sums = vectors.map((vector) =>
      equations.map(({ place, equation }) => -sumOfTerms(equation, vector, place)),
    );
    let scale = 1n;
    for (const [e, divisor] of divisors.entries()) {
      for (const sum of sums) scale *= remainingDivisor(sum[e]! * scale, divisor);
    }
    for (const [v, vector] of vectors.entries()) {
      if (scale !== 1n) for (let i = 0; i < size; i++) vector[i]! *= scale;
      for (const [e, { place }] of equations.entries()) vector[place] = (sums[v]![e]! * scale) / divisors[e]!;
    }
  }
  return vectors;
}

/** What is left of a divisor after cancelling against n, positive. */
function remainingDivisor(n: bigint, divisor: bigint): bigint {
  const rest = divisor / gcd(n, divisor);
  return rest < 0n ? -rest : rest;
}
