import {
  addRational,
  divideRational,
  multiplyRational,
  type Rational,
  rational,
} from "../../src/exact/rational.js";
import { formatRoot, signedRoot } from "../../src/exact/signed-root.js";
import type { Irrep } from "../../src/su3/irrep.js";
import {
  highestWeights,
  type IrrepSpace,
  irrepSpace,
  type LadderState,
  plus,
  productSpace,
  type Space,
  scalarProduct,
  statesBelow,
  type Vector,
} from "./ladder-space.js";

/** The isoscalar factors of one copy, by labels: `3Y,2I|3Y1,2I1,3Y2,2I2` to text such as `-sqrt(3/20)`; no zeros. */
export type LadderCopy = ReadonlyMap<string, string>;

/** A product with everything the slow way needs. */
interface Product {
  readonly left: IrrepSpace;
  readonly right: IrrepSpace;
  readonly space: Space;
  readonly equalFactors: boolean;
}

/** The product of two irreps on full product states. */
export function ladderProduct(left: Irrep, right: Irrep): Product {
  const [a, b] = [irrepSpace(left), irrepSpace(right)];
  return {
    left: a,
    right: b,
    space: productSpace(a, b),
    equalFactors: left.p === right.p && left.q === right.q,
  };
}

/**
 * The copies of an irrep in a product, resolved and signed by the documented rule applied word for word: symmetric
 * copies first for equal factors, then projections of the channels of the leading multiplet in the order of I1, I2.
 */
export function ladderCopies(product: Product, irrep: Irrep): LadderCopy[] {
  const { space, equalFactors } = product;
  const highest = highestWeights(space, irrep.p + 2 * irrep.q, irrep.p);
  const classes = equalFactors ? [1, -1].map((sign) => symmetrised(product, highest, sign)) : [highest];
  return classes.flatMap((vectors) =>
    resolved(product, irrep, vectors).map((vector) => factorsOf(product, statesBelow(space, irrep, vector))),
  );
}

/** Independent vectors among v + sign · (v with its factors exchanged). */
function symmetrised({ left, space }: Product, vectors: readonly Vector[], sign: number): Vector[] {
  const swap = (vector: Vector): Vector =>
    new Map(
      [...vector].map(([i, value]) => [(i % left.size) * left.size + Math.floor(i / left.size), value]),
    );
  const independent: Vector[] = [];
  for (const vector of vectors) {
    const candidate = plus(vector, swap(vector), rational(sign));
    const rest = orthogonalTo(space, candidate, independent);
    if (rest.size > 0) independent.push(rest);
  }
  return independent;
}

function orthogonalTo(space: Space, vector: Vector, others: readonly Vector[]): Vector {
  return others.reduce((rest, other) => {
    const part = divideRational(scalarProduct(space, rest, other), scalarProduct(space, other, other));
    return plus(rest, other, multiplyRational(rational(-1), part));
  }, vector);
}

/** Highest-weight vectors, each the projection of the next channel of the leading multiplet within the complement. */
function resolved(product: Product, irrep: Irrep, vectors: readonly Vector[]): Vector[] {
  const { space } = product;
  const basis: Vector[] = [];
  for (const vector of vectors) basis.push(orthogonalTo(space, vector, basis));
  const leading = basis.map((vector) => leadingState(product, irrep, vector));
  const norms = leading.map(({ vector }) => scalarProduct(space, vector, vector));
  const chosen: Rational[][] = [];
  for (const component of leadingComponents(product, leading[0])) {
    if (chosen.length === basis.length) break;
    // The projection of this channel, by its coordinates along the orthogonal basis.
    let coordinates = leading.map(({ vector }, i) =>
      divideRational(vector.get(component) ?? rational(0), norms[i]!),
    );
    for (const other of chosen) {
      const overlap = weightedSum(coordinates, other, norms);
      const part = divideRational(overlap, weightedSum(other, other, norms));
      coordinates = coordinates.map((value, i) =>
        addRational(value, multiplyRational(rational(-1), multiplyRational(part, other[i]!))),
      );
    }
    if (coordinates.some((value) => value.num !== 0n)) chosen.push(coordinates);
  }
  return chosen.map((coordinates) =>
    coordinates.reduce((sum: Vector, value, i) => plus(sum, basis[i]!, value), new Map()),
  );
}

function weightedSum(a: readonly Rational[], b: readonly Rational[], weights: readonly Rational[]): Rational {
  return a.reduce(
    (sum, value, i) => addRational(sum, multiplyRational(multiplyRational(value, b[i]!), weights[i]!)),
    rational(0),
  );
}

function leadingState({ space }: Product, irrep: Irrep, highest: Vector): LadderState {
  const leading = statesBelow(space, irrep, highest).find((state) => state.twoI === irrep.p + irrep.q);
  return leading!;
}

/**
 * The product states |I1,I1>|I2,I-I1> of the channels of the leading multiplet, I1 descending, then I2.
 *
 * The SU(2) coefficient is positive there, so that the component has the sign of the isoscalar factor.
 */
function leadingComponents({ left, right }: Product, leading: LadderState | undefined): number[] {
  if (leading === undefined) return [];
  const found: { twoI1: number; twoI2: number; component: number }[] = [];
  for (let a = 0; a < left.size; a++) {
    for (let b = 0; b < right.size; b++) {
      const [twoI1, twoI2] = [left.twoI[a]!, right.twoI[b]!];
      if (left.twoI3[a] !== twoI1 || right.twoI3[b] !== leading.twoI - twoI1) continue;
      if (left.threeY[a]! + right.threeY[b]! !== leading.threeY || twoI1 + twoI2 < leading.twoI) continue;
      found.push({ twoI1, twoI2, component: a * right.size + b });
    }
  }
  found.sort((x, y) => y.twoI1 - x.twoI1 || y.twoI2 - x.twoI2);
  return found.map(({ component }) => component);
}

/** The factors of a copy from its states with I3 = I: squares add up over I3, the sign stands at I3 of 1 = I1. */
function factorsOf({ left, right, space }: Product, states: readonly LadderState[]): LadderCopy {
  const factors = new Map<string, string>();
  for (const { threeY, twoI, twoI3, vector } of states) {
    if (twoI3 !== twoI) continue;
    const norm = scalarProduct(space, vector, vector);
    const channels = new Map<string, { square: Rational; sign: number }>();
    for (const [i, value] of vector) {
      const [a, b] = [Math.floor(i / right.size), i % right.size];
      const labels = `${threeY},${twoI}|${left.threeY[a]},${left.twoI[a]},${right.threeY[b]},${right.twoI[b]}`;
      const { square, sign } = channels.get(labels) ?? { square: rational(0), sign: 0 };
      const part = divideRational(multiplyRational(multiplyRational(value, value), space.norms[i]!), norm);
      const isHighest = left.twoI3[a] === left.twoI[a];
      channels.set(labels, {
        square: addRational(square, part),
        sign: isHighest ? (value.num < 0n ? -1 : 1) : sign,
      });
    }
    for (const [labels, { square, sign }] of channels)
      factors.set(labels, formatRoot(signedRoot(sign, square.num, square.den)));
  }
  return factors;
}
