import { addRational, divideRational, multiplyRational, type Rational, rational } from "../exact/rational.js";
import { multiplyRoots, type SignedRoot, signedRoot } from "../exact/signed-root.js";
import type { Irrep } from "./irrep.js";
import { type RationalBasis, rationalBasis, scaledRoot } from "./rational-basis.js";
import type { State } from "./state.js";

/**
 * One component of a tensor T with p upper (quark) and q lower (antiquark) indices, symmetric in each: how many of them
 * are u, d, s. All components with these numbers are equal.
 */
export interface TensorComponent {
  readonly quarks: readonly [u: number, d: number, s: number];
  readonly antiquarks: readonly [u: number, d: number, s: number];
  readonly value: SignedRoot;
}

/** A state of an irrep as a traceless tensor of length 1: the squares of all components, in every order, add up to 1. */
export interface TensorState {
  readonly state: State;
  readonly components: readonly TensorComponent[];
}

/**
 * The states of an irrep (p,q) as traceless symmetric tensors in the matrix convention (upper index quark, lower index
 * antiquark, no signs on antiquarks), in the phases of `deswart-v1`; in the order of `states`.
 *
 * For the octet T^i_j is the matrix with rows i and columns j; for the decuplet T^111 = 1 is Delta++, T^112 = 1/sqrt3
 * Delta+; for the 27 T has two upper and two lower indices.
 * @throws LimitError above 3000 states
 */
export function tensorStates(irrep: Irrep): TensorState[] {
  const basis = rationalBasis(irrep);
  const norm = basis.norms[0]!;
  // Basis vector 0 stands for sqrt(norm) times u^p sbar^q, which has the single component 1.
  return monomialVectors(basis).map((vector, i) => {
    const components = [...vector].map(([key, c]): TensorComponent => {
      const [u, d, s, ubar, dbar, sbar] = numbersOf(key);
      const square = { num: norm.num * basis.norms[i]!.den, den: norm.den * basis.norms[i]!.num };
      const occurrences = rational(arrangements([u, d, s]) * arrangements([ubar, dbar, sbar]));
      const value = scaledRoot(divideRational(c, occurrences), square);
      return { quarks: [u, d, s], antiquarks: [ubar, dbar, sbar], value };
    });
    return { state: basis.states[i]!, components };
  });
}

/**
 * The product of a tensor's components with a state's: the amplitude of that state in the tensor.
 *
 * The terms are returned one by one: for a tensor of one irrep with exact components they may have irrational ratios.
 * @param tensor - components as in `TensorState`, each number pattern at most once
 */
export function tensorOverlap(tensor: readonly TensorComponent[], state: TensorState): SignedRoot[] {
  return tensor.flatMap(({ quarks, antiquarks, value }) => {
    const own = state.components.find(
      (other) => sameNumbers(other.quarks, quarks) && sameNumbers(other.antiquarks, antiquarks),
    );
    if (own === undefined) return [];
    const occurrences = arrangements(quarks) * arrangements(antiquarks);
    const weight = signedRoot(1, occurrences * occurrences);
    return [multiplyRoots(weight, multiplyRoots(value, own.value))];
  });
}

/** A polynomial in u, d, s and the three antiquarks: coefficients by exponents. */
type Polynomial = ReadonlyMap<string, Rational>;

/** E_ij as the flavours it takes quarks from and to. */
const LOWERINGS = { "I-": [0, 1], "V-": [0, 2], "U-": [1, 2] } as const;

/** The basis vectors as polynomials, from u^p sbar^q down by commuting ladders. */
function monomialVectors(basis: RationalBasis): Polynomial[] {
  const { p, q } = basis.irrep;
  const found = new Array<Polynomial | undefined>(basis.states.length).fill(undefined);
  found[0] = new Map([[[p, 0, 0, 0, 0, q].join(), rational(1)]]);
  for (let known = 1; known < found.length; ) {
    for (const i of found.keys()) {
      if (found[i] === undefined) continue;
      for (const ladder of ["I-", "V-", "U-"] as const) {
        const image = basis.apply(ladder, new Map([[i, rational(1)]]));
        const open = [...image.keys()].filter((j) => found[j] === undefined);
        if (open.length !== 1) continue;
        let sum: Polynomial = lowered(found[i]!, LOWERINGS[ladder]);
        for (const [j, c] of image) {
          if (j !== open[0]) sum = added(sum, found[j]!, rational(-c.num, c.den));
        }
        const divisor = image.get(open[0]!)!;
        found[open[0]!] = new Map([...sum].map(([key, c]) => [key, divideRational(c, divisor)]));
        known++;
      }
    }
  }
  return found as Polynomial[];
}

/** A quark goes from one flavour to the other, an antiquark back with the opposite sign. */
function lowered(polynomial: Polynomial, [from, to]: readonly [number, number]): Polynomial {
  let sum: Polynomial = new Map();
  for (const [key, c] of polynomial) {
    const exponents = numbersOf(key);
    sum = added(sum, moved(exponents, from, to), c);
    sum = added(sum, moved(exponents, 3 + to, 3 + from), rational(-c.num, c.den));
  }
  return sum;
}

function moved(exponents: readonly number[], from: number, to: number): Polynomial {
  if (exponents[from] === 0) return new Map();
  const image = [...exponents];
  image[from]! -= 1;
  image[to]! += 1;
  return new Map([[image.join(), rational(exponents[from]!)]]);
}

function added(a: Polynomial, b: Polynomial, factor: Rational): Polynomial {
  const sum = new Map(a);
  for (const [key, value] of b) {
    const total = addRational(sum.get(key) ?? rational(0), multiplyRational(value, factor));
    if (total.num === 0n) sum.delete(key);
    else sum.set(key, total);
  }
  return sum;
}

function numbersOf(key: string): [number, number, number, number, number, number] {
  return key.split(",").map(Number) as [number, number, number, number, number, number];
}

/** In how many orders indices of three kinds can stand. */
function arrangements(counts: readonly number[]): number {
  const total = counts.reduce((sum, n) => sum + n, 0);
  return counts.reduce((value, n) => value / factorial(n), factorial(total));
}

function sameNumbers(a: readonly number[], b: readonly number[]): boolean {
  return a.every((value, i) => value === b[i]);
}

function factorial(n: number): number {
  return n < 2 ? 1 : n * factorial(n - 1);
}
