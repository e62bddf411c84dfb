import { divideRational, multiplyRational, type Rational, rational } from "../exact/rational.js";
import { divideRoots, rootToRational, type SignedRoot, signedRoot } from "../exact/signed-root.js";
import { requireIdentity } from "../require.js";
import type { Irrep } from "./irrep.js";
import {
  LADDERS,
  type Ladder,
  plus,
  type RationalBasis,
  type RationalVector,
  rationalBasis,
  scaledRoot,
} from "./rational-basis.js";
import { requireState, type State } from "./state.js";

/**
 * The three chains SU(3) > SU(2) x U(1): which two flavours form the doublet.
 *
 * isospin (u, d) with Y; U-spin (d, s) with Y_U = -Q; V-spin (u, s) with Y_V = Q - Y. The labels of a state in another
 * chain are those of `State`, read as 3Y_U, 2U, 2U3 or 3Y_V, 2V, 2V3.
 */
export type FlavourChain = "isospin" | "U-spin" | "V-spin";

/** A state of the isospin chain in a superposition. */
export interface ChainTerm {
  readonly state: State;
  readonly value: SignedRoot;
}

/** Flavour i goes to images[i]; `odd` permutations come with a factor -1, which makes their determinant 1. */
const PERMUTATIONS: Readonly<Record<FlavourChain, { images: readonly number[]; odd: boolean }>> = {
  isospin: { images: [0, 1, 2], odd: false },
  "U-spin": { images: [1, 2, 0], odd: false },
  "V-spin": { images: [0, 2, 1], odd: true },
};

/** E_ij of each ladder. */
const UNITS: Readonly<Record<Ladder, readonly [number, number]>> = {
  "I+": [0, 1],
  "I-": [1, 0],
  "U+": [1, 2],
  "U-": [2, 1],
  "V+": [0, 2],
  "V-": [2, 0],
};

/**
 * The transformation from another chain to isospin, exactly, for every state of an irrep in the order of `states`.
 *
 * The states of the other chain are those of the isospin chain rotated by one element of SU(3), the permutation of
 * flavours u -> d -> s -> u for U-spin, minus the exchange of d and s for V-spin. So all coupling coefficients are the
 * same numbers in all chains, U+ and I- (V+ and I+) have positive elements there, and no phase is left open.
 * @returns for each state of the other chain its terms in the isospin chain, never 0
 * @throws LimitError above 3000 states
 */
export function chainTransformation(chain: FlavourChain, irrep: Irrep): ChainTerm[][] {
  const basis = rationalBasis(irrep);
  return rotatedBasis(chain, basis).map((vector, i) =>
    [...vector.entries()]
      .sort(([a], [b]) => a - b)
      .map(([j, c]) => ({
        state: basis.states[j]!,
        value: divideRoots(
          scaledRoot(c, basis.norms[j]!),
          signedRoot(1, basis.norms[i]!.num, basis.norms[i]!.den),
        ),
      })),
  );
}

/**
 * One state of another chain in the isospin chain; see `chainTransformation`.
 *
 * @param state - its labels are those of the other chain
 * @throws InputError if the irrep has no such state
 * @example chainState("U-spin", { irrep: octet, threeY: 0, twoI: 0, twoI3: 0 }) // of Sigma0 and Lambda
 */
export function chainState(chain: FlavourChain, state: State): ChainTerm[] {
  requireState("chainState", state);
  const basis = rationalBasis(state.irrep);
  return chainTransformation(chain, state.irrep)[basis.indexOf(state.threeY, state.twoI, state.twoI3)]!;
}

/** The images of all basis vectors, found from that of the highest weight by commuting ladders with the permutation. */
function rotatedBasis(chain: FlavourChain, basis: RationalBasis): RationalVector[] {
  const { images } = PERMUTATIONS[chain];
  const rotated = new Map<Ladder, Ladder>(
    LADDERS.map((ladder) => {
      const [i, j] = UNITS[ladder];
      return [ladder, LADDERS.find((other) => matches(other, images[i]!, images[j]!))!];
    }),
  );
  const found = new Array<RationalVector | undefined>(basis.states.length).fill(undefined);
  found[0] = rotatedHighest(chain, basis);
  for (let known = 1; known < found.length; ) {
    const before = known;
    for (const i of found.keys()) {
      if (found[i] === undefined) continue;
      for (const ladder of ["I-", "V-", "U-"] as const) {
        const image = basis.apply(ladder, new Map([[i, rational(1)]]));
        const open = [...image.keys()].filter((j) => found[j] === undefined);
        if (open.length !== 1) continue;
        let vector = basis.apply(rotated.get(ladder)!, found[i]!);
        for (const [j, c] of image) {
          if (j !== open[0]) vector = plus(vector, found[j]!, rational(-c.num, c.den));
        }
        found[open[0]!] = scaled(vector, image.get(open[0]!)!);
        known++;
      }
    }
    requireIdentity("chainTransformation", known > before, () => `${known} states reached by ladders`);
  }
  return found as RationalVector[];
}

/**
 * The image of the highest weight u^p sbar^q: the quarks and antiquarks permuted, which is one state times a sign.
 *
 * Ladders I and V are positive on quarks and on (dbar, -ubar; sbar), hence the sign (-1) for every ubar.
 */
function rotatedHighest(chain: FlavourChain, basis: RationalBasis): RationalVector {
  const { images, odd } = PERMUTATIONS[chain];
  const { p, q } = basis.irrep;
  const [quark, antiquark] = [images[0]!, images[2]!];
  const sign = (antiquark === 0 && q % 2 === 1 ? -1 : 1) * (odd && (p + q) % 2 === 1 ? -1 : 1);
  const weight = (flavour: number, of: readonly number[]) => of[flavour]!;
  const threeY = p * weight(quark, [1, 1, -2]) - q * weight(antiquark, [1, 1, -2]);
  const twoI3 = p * weight(quark, [1, -1, 0]) - q * weight(antiquark, [1, -1, 0]);
  const j = basis.states.findIndex((state) => state.threeY === threeY && state.twoI3 === twoI3);
  // The image has the length of the basis vector it comes from.
  const ratio = multiplyRational(basis.norms[0]!, {
    num: basis.norms[j]!.den,
    den: basis.norms[j]!.num,
  });
  return new Map([[j, rationalSquareRoot(ratio, sign)]]);
}

function rationalSquareRoot(square: Rational, sign: number): Rational {
  const root = rootToRational(signedRoot(sign, square.num, square.den));
  requireIdentity("chainTransformation", root !== undefined, () => "an extremal state of irrational length");
  return root!;
}

function scaled(vector: RationalVector, divisor: Rational): RationalVector {
  return new Map([...vector].map(([j, c]) => [j, divideRational(c, divisor)]));
}

function matches(ladder: Ladder, i: number, j: number): boolean {
  return UNITS[ladder][0] === i && UNITS[ladder][1] === j;
}
