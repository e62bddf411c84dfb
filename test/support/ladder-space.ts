import {
  addRational,
  divideRational,
  multiplyRational,
  negateRational,
  type Rational,
  rational,
} from "../../src/exact/rational.js";
import type { Irrep } from "../../src/su3/irrep.js";

/**
 * SU(3) representations as spaces of explicit vectors with ladder operators, for checking the engine by another way.
 *
 * Nothing here uses the engine, its reduced matrix elements or a closed formula for coefficients: an irrep is the span
 * of polynomials in quarks and antiquarks reached from the highest weight by lowering.
 */

export type Generator = "I+" | "I-" | "U+" | "U-" | "V+" | "V-";

/** A vector by its components in an orthogonal basis; zeros are left out. */
export type Vector = ReadonlyMap<number, Rational>;

/** An orthogonal basis with rational norms, on which the generators act with rational coefficients. */
export interface Space {
  readonly size: number;
  readonly norms: readonly Rational[];
  /** 3Y and 2I3 of each basis vector. */
  readonly threeY: readonly number[];
  readonly twoI3: readonly number[];
  /** Image of each basis vector. */
  readonly images: Readonly<Record<Generator, readonly Vector[]>>;
}

/** The states of one irrep as a space, and 2I of each basis vector. */
export interface IrrepSpace extends Space {
  readonly twoI: readonly number[];
}

/** A state of an irrep found by lowering inside a space: its vector and labels. */
export interface LadderState {
  readonly threeY: number;
  readonly twoI: number;
  readonly twoI3: number;
  readonly vector: Vector;
}

const ZERO = rational(0);
const GENERATORS: readonly Generator[] = ["I+", "I-", "U+", "U-", "V+", "V-"];
/** E_ij turns flavour j into flavour i. */
const UNITS: Record<Generator, [number, number]> = {
  "I+": [0, 1],
  "I-": [1, 0],
  "U+": [1, 2],
  "U-": [2, 1],
  "V+": [0, 2],
  "V-": [2, 0],
};

/** a + factor · b. */
export function plus(a: Vector, b: Vector, factor: Rational): Vector {
  const sum = new Map(a);
  for (const [i, value] of b) {
    const total = addRational(sum.get(i) ?? ZERO, multiplyRational(value, factor));
    if (total.num === 0n) sum.delete(i);
    else sum.set(i, total);
  }
  return sum;
}

/** The scalar product of two vectors. */
export function scalarProduct(space: Space, a: Vector, b: Vector): Rational {
  let sum = ZERO;
  for (const [i, value] of a) {
    const other = b.get(i);
    if (other !== undefined)
      sum = addRational(sum, multiplyRational(multiplyRational(value, other), space.norms[i]!));
  }
  return sum;
}

/** The image of a vector under a generator. */
export function act(space: Space, generator: Generator, vector: Vector): Vector {
  let image: Vector = new Map();
  for (const [i, value] of vector) image = plus(image, space.images[generator][i]!, value);
  return image;
}

/**
 * The states of the irrep (p,q) whose highest-weight vector is given, with all matrix elements of I+ and V+ positive.
 *
 * -U- of a state |I,I> is a state |I+1/2,I+1/2>; V- of it, less its part with I + 1/2, is |I-1/2,I-1/2>.
 */
export function statesBelow(space: Space, { p, q }: Irrep, highest: Vector): LadderState[] {
  const found: LadderState[] = [];
  let column = highest;
  for (let l = q; l >= 0; l--) {
    let top = column;
    for (let k = p + q; k >= q; k--) {
      const labels = { threeY: 3 * (k + l) - 2 * (p + 2 * q), twoI: k - l };
      let state = top;
      for (let twoI3 = k - l; twoI3 >= l - k; twoI3 -= 2) {
        found.push({ ...labels, twoI3, vector: state });
        state = act(space, "I-", state);
      }
      const lowered = act(space, "V-", top);
      const larger = act(space, "I-", act(space, "I+", lowered));
      top = plus(lowered, larger, rational(-1, k - l + 1));
    }
    column = plus(new Map(), act(space, "U-", column), rational(-1));
  }
  return found;
}

/** The irrep (p,q) on its own states. */
export function irrepSpace(irrep: Irrep): IrrepSpace {
  const polynomials = polynomialSpace(irrep);
  const highest = new Map([[polynomials.highest, rational(1)]]);
  const states = statesBelow(polynomials, irrep, highest);
  const norms = states.map(({ vector }) => scalarProduct(polynomials, vector, vector));
  const imagesOf = (generator: Generator) =>
    states.map(({ vector }) => {
      const image = act(polynomials, generator, vector);
      const components = states.map((state, a) =>
        divideRational(scalarProduct(polynomials, state.vector, image), norms[a]!),
      );
      return new Map([...components.entries()].filter(([, value]) => value.num !== 0n));
    });
  return {
    size: states.length,
    norms,
    threeY: states.map((state) => state.threeY),
    twoI: states.map((state) => state.twoI),
    twoI3: states.map((state) => state.twoI3),
    images: recordOf(imagesOf),
  };
}

/** The product of two spaces; basis vector a · right.size + b is a ⊗ b. */
export function productSpace(left: Space, right: Space): Space {
  const pairs = Array.from({ length: left.size * right.size }, (_, i) => [
    Math.floor(i / right.size),
    i % right.size,
  ]) as [number, number][];
  const imagesOf = (generator: Generator) =>
    pairs.map(([a, b]) => {
      const first = [...left.images[generator][a]!].map(
        ([a2, value]) => [a2 * right.size + b, value] as const,
      );
      const second = [...right.images[generator][b]!].map(
        ([b2, value]) => [a * right.size + b2, value] as const,
      );
      return plus(new Map(first), new Map(second), rational(1));
    });
  return {
    size: pairs.length,
    norms: pairs.map(([a, b]) => multiplyRational(left.norms[a]!, right.norms[b]!)),
    threeY: pairs.map(([a, b]) => left.threeY[a]! + right.threeY[b]!),
    twoI3: pairs.map(([a, b]) => left.twoI3[a]! + right.twoI3[b]!),
    images: recordOf(imagesOf),
  };
}

/** Basis of the vectors of weight (threeY, twoI3) that I+ and U+ annul. */
export function highestWeights(space: Space, threeY: number, twoI3: number): Vector[] {
  const members = Array.from({ length: space.size }, (_, i) => i).filter(
    (i) => space.threeY[i] === threeY && space.twoI3[i] === twoI3,
  );
  // Each basis vector carries its image; eliminating the images leaves the combinations that vanish.
  let rest = members.map((i) => ({
    vector: new Map([[i, rational(1)]]) as Vector,
    image: plus(shifted(space.images["I+"][i]!, 0), shifted(space.images["U+"][i]!, space.size), rational(1)),
  }));
  const annulled: Vector[] = [];
  while (rest.length > 0) {
    const [pivot, ...others] = rest as [(typeof rest)[0], ...typeof rest];
    const entry = pivot.image.entries().next().value;
    if (entry === undefined) {
      annulled.push(pivot.vector);
      rest = others;
      continue;
    }
    const [column, value] = entry;
    rest = others.map(({ vector, image }) => {
      const factor = negateRational(divideRational(image.get(column) ?? ZERO, value));
      return { vector: plus(vector, pivot.vector, factor), image: plus(image, pivot.image, factor) };
    });
  }
  return annulled;
}

function shifted(vector: Vector, offset: number): Vector {
  return new Map([...vector].map(([i, value]) => [i + offset, value]));
}

/** Monomials of degree p in quarks u, d, s and q in antiquarks, with norm a! b!; `highest` is u^p sbar^q. */
function polynomialSpace({ p, q }: Irrep): Space & { highest: number } {
  const monomials = powers(p).flatMap((quarks) => powers(q).map((antiquarks) => [...quarks, ...antiquarks]));
  const numberOf = new Map(monomials.map((monomial, i) => [monomial.join(), i]));
  const moved = (monomial: number[], from: number, to: number, sign: number): [number, Rational][] => {
    if (monomial[from] === 0) return [];
    const image = [...monomial];
    image[from]!--;
    image[to]!++;
    return [[numberOf.get(image.join())!, rational(sign * monomial[from]!)]];
  };
  const imagesOf = (generator: Generator) => {
    const [i, j] = UNITS[generator];
    return monomials.map((m) => new Map([...moved(m, j, i, 1), ...moved(m, 3 + i, 3 + j, -1)]));
  };
  return {
    size: monomials.length,
    norms: monomials.map((m) => rational(m.reduce((product, n) => product * factorial(n), 1))),
    threeY: monomials.map(([u, d, s, ubar, dbar, sbar]) => u! + d! - 2 * s! - ubar! - dbar! + 2 * sbar!),
    twoI3: monomials.map(([u, d, , ubar, dbar]) => u! - d! - ubar! + dbar!),
    images: recordOf(imagesOf),
    highest: numberOf.get([p, 0, 0, 0, 0, q].join())!,
  };
}

function powers(degree: number): number[][] {
  return Array.from({ length: degree + 1 }, (_, a) =>
    Array.from({ length: degree - a + 1 }, (_, b) => [a, b, degree - a - b]),
  ).flat();
}

function factorial(n: number): number {
  return n < 2 ? 1 : n * factorial(n - 1);
}

function recordOf<T>(make: (generator: Generator) => T): Record<Generator, T> {
  return Object.fromEntries(GENERATORS.map((generator) => [generator, make(generator)])) as Record<
    Generator,
    T
  >;
}
