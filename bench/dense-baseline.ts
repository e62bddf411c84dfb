import { commonRoot } from "../src/exact/common-root.js";
import { gcd } from "../src/exact/integer.js";
import { type Rational, rational } from "../src/exact/rational.js";
import { divideRoots, type SignedRoot, signedRoot } from "../src/exact/signed-root.js";
import { su3ClebschGordan } from "../src/su3/clebsch-gordan.js";
import { type Irrep, irrepName } from "../src/su3/irrep.js";
import type { IsoscalarTable } from "../src/su3/isoscalar-factors.js";
import { decomposeProduct } from "../src/su3/product.js";
import type { State } from "../src/su3/state.js";
import { type Generator, type IrrepSpace, irrepSpace } from "../test/support/ladder-space.js";

/**
 * What a general program would do: on all product states, the null space of I+ and U+ at each highest weight by
 * elimination without fractions (E.H. Bareiss, Math. Comp. 22 (1968) 565; provenance: memory), then lowering to the
 * top state of every isospin multiplet. BigInt throughout. Copies of one irrep stay as the null space gives them, and signs are not read off.
 */
export interface DenseProduct {
  readonly left: IrrepSpace;
  readonly right: IrrepSpace;
  /** Basis vector a · right.size + b: its place among those of its weight. */
  readonly place: Int32Array;
  readonly weights: ReadonlyMap<string, Int32Array>;
  /** Squared lengths of the basis vectors, as integers over a common denominator. */
  readonly norms: readonly bigint[];
  readonly images: Readonly<Record<Generator, readonly (readonly [number, bigint])[][]>>;
}

/** The top state (I3 = I) of one multiplet of one copy, unnormalised: its components among the states of its weight. */
export interface DenseState {
  readonly irrep: Irrep;
  readonly threeY: number;
  readonly twoI: number;
  readonly vector: readonly bigint[];
}

const STEPS: readonly Generator[] = ["I+", "I-", "U+", "U-", "V-"];

/** The product states with the generators as integers; not part of the measured time. */
export function denseProduct(leftIrrep: Irrep, rightIrrep: Irrep): DenseProduct {
  const [left, right] = [irrepSpace(leftIrrep), irrepSpace(rightIrrep)];
  const place = new Int32Array(left.size * right.size);
  const lists = new Map<string, number[]>();
  for (let i = 0; i < place.length; i++) {
    const [a, b] = [Math.floor(i / right.size), i % right.size];
    const key = weightKey(left.threeY[a]! + right.threeY[b]!, left.twoI3[a]! + right.twoI3[b]!);
    const list = lists.get(key) ?? [];
    place[i] = list.length;
    list.push(i);
    lists.set(key, list);
  }
  const weights = new Map([...lists].map(([key, list]) => [key, Int32Array.from(list)]));
  const images = Object.fromEntries(STEPS.map((step) => [step, productImages(left, right, step)]));
  const norms = Array.from(place, (_, i) => {
    const [a, b] = [left.norms[Math.floor(i / right.size)]!, right.norms[i % right.size]!];
    return rational(a.num * b.num, a.den * b.den);
  });
  const scale = norms.reduce((lcm, { den }) => (lcm * den) / gcd(lcm, den), 1n);
  return {
    left,
    right,
    place,
    weights,
    norms: norms.map(({ num, den }) => (num * scale) / den),
    images: images as unknown as DenseProduct["images"],
  };
}

/** Every copy of every irrep, one state for each isospin multiplet. */
export function denseStates(product: DenseProduct, leftIrrep: Irrep, rightIrrep: Irrep): DenseState[] {
  return decomposeProduct(leftIrrep, rightIrrep).flatMap(({ irrep }) =>
    highestWeights(product, irrep).flatMap((highest) => topStates(product, irrep, highest)),
  );
}

/** Squares of the isoscalar factors of a state, in lowest terms, by channel `3Y1,2I1,3Y2,2I2`. */
export function denseSquares(
  product: DenseProduct,
  { threeY, twoI, vector }: DenseState,
): Map<string, Rational> {
  const { left, right, weights, norms } = product;
  const sums = new Map<string, bigint>();
  let total = 0n;
  weights.get(weightKey(threeY, twoI))!.forEach((i, component) => {
    const value = vector[component]!;
    if (value === 0n) return;
    const square = value * value * norms[i]!;
    const [a, b] = [Math.floor(i / right.size), i % right.size];
    const channel = `${left.threeY[a]},${left.twoI[a]},${right.threeY[b]},${right.twoI[b]}`;
    sums.set(channel, (sums.get(channel) ?? 0n) + square);
    total += square;
  });
  return new Map([...sums].map(([channel, sum]) => [channel, rational(sum, total)]));
}

/** Throws unless the states of every multiplet span the same space as those made of the table's coefficients. */
export function checkDense(product: DenseProduct, found: readonly DenseState[], table: IsoscalarTable): void {
  for (const { irrep, multiplicity } of table.series) {
    const states = found.filter((state) => state.irrep.p === irrep.p && state.irrep.q === irrep.q);
    for (const key of new Set(states.map(({ threeY, twoI }) => weightKey(threeY, twoI)))) {
      const dense = states.filter(({ threeY, twoI }) => weightKey(threeY, twoI) === key);
      const { threeY, twoI } = dense[0]!;
      const engine = Array.from({ length: multiplicity }, (_, i) =>
        engineVector(product, table, { irrep, threeY, twoI, twoI3: twoI }, i + 1),
      );
      const both = [...dense.map(({ vector }) => [...vector]), ...engine];
      const sameSpace = dense.length === multiplicity && rank(both) === multiplicity;
      if (sameSpace && (multiplicity > 1 || sameSquares(product, dense[0]!, table))) continue;
      throw new Error(
        `${irrepName(irrep)}, 3Y = ${threeY}, 2I = ${twoI}: the dense states differ from the table's`,
      );
    }
  }
}

function sameSquares(product: DenseProduct, state: DenseState, table: IsoscalarTable): boolean {
  const squares = denseSquares(product, state);
  return table.channels(state).every((channel) => {
    const { threeY1, twoI1, threeY2, twoI2 } = channel;
    const { num, den } = table.factor(state.irrep, 1, state, channel);
    const square = squares.get(`${threeY1},${twoI1},${threeY2},${twoI2}`) ?? rational(0);
    return square.num === num && square.den === den;
  });
}

function weightKey(threeY: number, twoI3: number): string {
  return `${threeY},${twoI3}`;
}

function productImages(left: IrrepSpace, right: IrrepSpace, step: Generator): [number, bigint][][] {
  const entries = [...left.images[step], ...right.images[step]].flatMap((image) => [...image.values()]);
  const scale = entries.reduce((lcm, { den }) => (lcm * den) / gcd(lcm, den), 1n);
  const images: [number, bigint][][] = [];
  for (let a = 0; a < left.size; a++) {
    for (let b = 0; b < right.size; b++) {
      images.push([
        ...[...left.images[step][a]!].map(
          ([a2, { num, den }]) => [a2 * right.size + b, (num * scale) / den] as [number, bigint],
        ),
        ...[...right.images[step][b]!].map(
          ([b2, { num, den }]) => [a * right.size + b2, (num * scale) / den] as [number, bigint],
        ),
      ]);
    }
  }
  return images;
}

function highestWeights(product: DenseProduct, { p, q }: Irrep): bigint[][] {
  const [threeY, twoI3] = [p + 2 * q, p];
  const members = product.weights.get(weightKey(threeY, twoI3))!;
  const rows = (["I+", "U+"] as const).flatMap((step) => {
    const [upY, upI3] = step === "I+" ? [0, 2] : [3, -1];
    const targets = product.weights.get(weightKey(threeY + upY, twoI3 + upI3))?.length ?? 0;
    const matrix = Array.from({ length: targets }, () => new Array<bigint>(members.length).fill(0n));
    members.forEach((i, column) => {
      for (const [j, value] of product.images[step][i]!) matrix[product.place[j]!]![column] = value;
    });
    return matrix;
  });
  return nullSpace(rows, members.length);
}

/** Eliminates in place without fractions; returns the pivot columns of the rows that are left, upper triangular. */
function eliminate(matrix: bigint[][], width: number): number[] {
  const pivots: number[] = [];
  let previous = 1n;
  for (let column = 0; column < width && pivots.length < matrix.length; column++) {
    const done = pivots.length;
    const index = matrix.findIndex((row, i) => i >= done && row[column] !== 0n);
    if (index < 0) continue;
    [matrix[done], matrix[index]] = [matrix[index]!, matrix[done]!];
    const pivot = matrix[done]!;
    for (let i = done + 1; i < matrix.length; i++) {
      const row = matrix[i]!;
      const factor = row[column]!;
      for (let j = column; j < width; j++) {
        row[j] = (row[j]! * pivot[column]! - factor * pivot[j]!) / previous;
      }
    }
    previous = pivot[column]!;
    pivots.push(column);
  }
  return pivots;
}

function nullSpace(matrix: bigint[][], width: number): bigint[][] {
  const pivots = eliminate(matrix, width);
  const free = Array.from({ length: width }, (_, j) => j).filter((j) => !pivots.includes(j));
  return free.map((column) => {
    const vector = new Array<bigint>(width).fill(0n);
    vector[column] = 1n;
    for (let i = pivots.length - 1; i >= 0; i--) {
      const row = matrix[i]!;
      const pivot = row[pivots[i]!]!;
      let sum = 0n;
      for (let j = pivots[i]! + 1; j < width; j++) sum += row[j]! * vector[j]!;
      const rest = pivot / gcd(sum, pivot);
      if (rest !== 1n) for (let j = 0; j < width; j++) vector[j]! *= rest;
      vector[pivots[i]!] = (-sum * rest) / pivot;
    }
    return primitive(vector);
  });
}

function rank(vectors: bigint[][]): number {
  return eliminate(vectors, vectors[0]!.length).length;
}

/** -U- of |I,I> is |I+1/2,I+1/2>; V- of it, less its part with I + 1/2, is |I-1/2,I-1/2>. */
function topStates(product: DenseProduct, irrep: Irrep, highest: bigint[]): DenseState[] {
  const { p, q } = irrep;
  const found: DenseState[] = [];
  let column = highest;
  for (let l = q; l >= 0; l--) {
    let top = column;
    for (let k = p + q; k >= q; k--) {
      const [threeY, twoI] = [3 * (k + l) - 2 * (p + 2 * q), k - l];
      found.push({ irrep, threeY, twoI, vector: top });
      if (k === q) break;
      const lowered = applied(product, "V-", top, threeY, twoI);
      const raised = applied(product, "I+", lowered, threeY - 3, twoI - 1);
      const back = applied(product, "I-", raised, threeY - 3, twoI + 1);
      top = primitive(lowered.map((value, i) => value * BigInt(twoI + 1) - (back[i] ?? 0n)));
    }
    if (l > 0)
      column = primitive(applied(product, "U-", column, 3 * (p + q + l) - 2 * (p + 2 * q), p + q - l));
  }
  return found;
}

const SHIFTS: Readonly<Record<string, readonly [number, number]>> = {
  "I+": [0, 2],
  "I-": [0, -2],
  "U-": [-3, 1],
  "V-": [-3, -1],
};

function applied(
  { weights, images, place }: DenseProduct,
  step: Generator,
  vector: readonly bigint[],
  threeY: number,
  twoI3: number,
): bigint[] {
  const [upY, upI3] = SHIFTS[step]!;
  const target = weights.get(weightKey(threeY + upY, twoI3 + upI3));
  const result = new Array<bigint>(target?.length ?? 0).fill(0n);
  weights.get(weightKey(threeY, twoI3))?.forEach((i, component) => {
    const value = vector[component]!;
    if (value === 0n) return;
    for (const [j, coefficient] of images[step][i]!) result[place[j]!]! += value * coefficient;
  });
  return result;
}

function primitive(vector: bigint[]): bigint[] {
  const content = vector.reduce(gcd, 0n);
  return content < 2n ? vector : vector.map((value) => value / content);
}

/** A state of the table in the same basis: coefficients over the square roots of the basis vectors' norms. */
function engineVector(
  { left, right, weights }: DenseProduct,
  table: IsoscalarTable,
  state: State,
  copy: number,
): bigint[] {
  const roots = Array.from(weights.get(weightKey(state.threeY, state.twoI3))!, (i): SignedRoot => {
    const [a, b] = [Math.floor(i / right.size), i % right.size];
    const value = su3ClebschGordan(
      basisState(left, table.left, a),
      basisState(right, table.right, b),
      state,
      copy,
      table,
    );
    const norm = [left.norms[a]!, right.norms[b]!] as const;
    return divideRoots(value, signedRoot(1, norm[0].num * norm[1].num, norm[0].den * norm[1].den));
  });
  const common = commonRoot(roots);
  if (common === undefined) throw new Error("the coefficients have no common root");
  return [...common.multiples];
}

function basisState({ threeY, twoI, twoI3 }: IrrepSpace, irrep: Irrep, i: number): State {
  return { irrep, threeY: threeY[i]!, twoI: twoI[i]!, twoI3: twoI3[i]! };
}
