import { LimitError } from "../errors.js";
import { addRational, multiplyRational, negateRational, type Rational, rational } from "../exact/rational.js";
import { multiplyRoots, type SignedRoot, signedRoot } from "../exact/signed-root.js";
import { raiseK, raiseL } from "./engine/patterns.js";
import { type Irrep, irrepDimension, irrepName } from "./irrep.js";
import { type State, states } from "./state.js";

/** The ladder operators E_ij that turn flavour j into flavour i: I+ = E_12, V+ = E_13, U+ = E_23 and their conjugates. */
export type Ladder = "I+" | "I-" | "U+" | "U-" | "V+" | "V-";

export const LADDERS: readonly Ladder[] = ["I+", "I-", "U+", "U-", "V+", "V-"];

/** A vector by its components along basis vectors, without zeros. */
export type RationalVector = ReadonlyMap<number, Rational>;

/**
 * The states of an irrep, scaled so that every generator has rational matrix elements.
 *
 * Basis vector i is the state `states[i]` of convention `deswart-v1`, in the order of `states()`, times sqrt(norms[i]).
 */
export interface RationalBasis {
  readonly irrep: Irrep;
  readonly states: readonly State[];
  readonly norms: readonly Rational[];
  /** The number of the basis vector of a state; -1 where there is none. */
  indexOf(threeY: number, twoI: number, twoI3: number): number;
  /** The image of a vector. */
  apply(ladder: Ladder, vector: RationalVector): RationalVector;
}

const LARGEST_DIMENSION = 3000;

/**
 * The rational basis of an irrep: with I = (k-l)/2 and d = 2I + 1, the scale
 *
 *     norm(k,l,m) = d (I+m)! (I-m)! a(q) ... a(k-1) b(0) ... b(l-1)
 *
 * turns I- into (I+m), and V+ into 1/(d+1) for k + 1 and (I-m)/(d-1) for l + 1; U+ = [I-, V+].
 * Source: follows from the matrix elements in `engine/patterns.ts`.
 * @throws LimitError above 3000 states
 */
export function rationalBasis(irrep: Irrep): RationalBasis {
  const count = irrepDimension(irrep);
  if (count > LARGEST_DIMENSION) {
    throw new LimitError(
      `rationalBasis: expected at most ${LARGEST_DIMENSION} states, got ${count} in ${irrepName(irrep)}. Choose a smaller irrep.`,
    );
  }
  const list = states(irrep);
  const indices = new Map(list.map(({ threeY, twoI, twoI3 }, i) => [key(threeY, twoI, twoI3), i]));
  const indexOf = (threeY: number, twoI: number, twoI3: number) =>
    indices.get(key(threeY, twoI, twoI3)) ?? -1;
  const images = new Map<Ladder, RationalVector[]>();
  const apply = (ladder: Ladder, vector: RationalVector) => {
    let image: RationalVector = new Map();
    for (const [i, value] of vector) image = plus(image, images.get(ladder)![i]!, value);
    return image;
  };
  for (const ladder of ["I+", "I-", "V+", "V-"] as const) {
    images.set(
      ladder,
      list.map((state) => new Map(elements(ladder, state, indexOf))),
    );
  }
  const one = (i: number): RationalVector => new Map([[i, rational(1)]]);
  const commutator = (a: Ladder, b: Ladder) =>
    list.map((_, i) => plus(apply(a, apply(b, one(i))), apply(b, apply(a, one(i))), rational(-1)));
  images.set("U+", commutator("I-", "V+"));
  images.set("U-", commutator("V-", "I+"));
  return { irrep, states: list, norms: list.map(normOf), indexOf, apply };
}

/** a + factor · b. */
export function plus(a: RationalVector, b: RationalVector, factor: Rational): RationalVector {
  const sum = new Map(a);
  for (const [i, value] of b) {
    const before = sum.get(i);
    const term = multiplyRational(value, factor);
    const total = before === undefined ? term : addRational(before, term);
    if (total.num === 0n) sum.delete(i);
    else sum.set(i, total);
  }
  return sum;
}

/** c · sqrt(norm) as a root: a component along a basis vector of that norm, measured in normalised states. */
export function scaledRoot(c: Rational, norm: Rational): SignedRoot {
  const size = c.num < 0n ? negateRational(c) : c;
  const square = multiplyRational(size, size);
  return multiplyRoots(
    signedRoot(c.num < 0n ? -1 : 1, square.num, square.den),
    signedRoot(1, norm.num, norm.den),
  );
}

function key(threeY: number, twoI: number, twoI3: number): string {
  return `${threeY},${twoI},${twoI3}`;
}

/** The pattern (k,l) of a state. */
function patternOf({ irrep: { p, q }, threeY, twoI }: State): { k: number; l: number } {
  const sum = (threeY + 2 * (p + 2 * q)) / 3;
  return { k: (sum + twoI) / 2, l: (sum - twoI) / 2 };
}

function normOf(state: State): Rational {
  const { irrep, twoI, twoI3 } = state;
  const { k, l } = patternOf(state);
  let norm = BigInt(twoI + 1) * factorial((twoI + twoI3) / 2) * factorial((twoI - twoI3) / 2);
  for (let i = irrep.q; i < k; i++) norm *= BigInt(raiseK(irrep, i));
  for (let i = 0; i < l; i++) norm *= BigInt(raiseL(irrep, i));
  return rational(norm);
}

/** The image of a basis vector under I+, I-, V+ or V-: places and coefficients. */
function elements(
  ladder: "I+" | "I-" | "V+" | "V-",
  state: State,
  indexOf: RationalBasis["indexOf"],
): [number, Rational][] {
  const { irrep, threeY, twoI, twoI3 } = state;
  const { k, l } = patternOf(state);
  const d = twoI + 1;
  const [up, down] = [(twoI + twoI3) / 2, (twoI - twoI3) / 2];
  const terms: [place: number, coefficient: Rational][] =
    ladder === "I+"
      ? [[indexOf(threeY, twoI, twoI3 + 2), rational(down)]]
      : ladder === "I-"
        ? [[indexOf(threeY, twoI, twoI3 - 2), rational(up)]]
        : ladder === "V+"
          ? [
              [indexOf(threeY + 3, twoI + 1, twoI3 + 1), rational(1, d + 1)],
              [indexOf(threeY + 3, twoI - 1, twoI3 + 1), d > 1 ? rational(down, d - 1) : rational(0)],
            ]
          : [
              [
                indexOf(threeY - 3, twoI - 1, twoI3 - 1),
                d > 1 ? rational(raiseK(irrep, k - 1) * up, d - 1) : rational(0),
              ],
              [indexOf(threeY - 3, twoI + 1, twoI3 - 1), rational(raiseL(irrep, l - 1), d + 1)],
            ];
  return terms.filter(([place, { num }]) => place >= 0 && num !== 0n);
}

function factorial(n: number): bigint {
  let value = 1n;
  for (let i = 2; i <= n; i++) value *= BigInt(i);
  return value;
}
