import { type Rational, rational } from "../exact/rational.js";
import { divideRoots, multiplyRoots, type SignedRoot, signedRoot } from "../exact/signed-root.js";
import { clebschGordan } from "../su2/clebsch-gordan.js";
import { casimir, type Irrep, type IsospinMultiplet } from "./irrep.js";
import type { Channel } from "./isoscalar-factors.js";
import { LADDERS, type Ladder, type RationalBasis, rationalBasis, scaledRoot } from "./rational-basis.js";
import { requireState, type State } from "./state.js";
import { singleRoot } from "./symmetries.js";

/** The eigenvalue (C(irrep) - C(left) - C(right)) / 2 of T1.T2: -3 for 8 x 8 -> 1, 1 for 8 x 8 -> 27. */
export function casimirEigenvalue(left: Irrep, right: Irrep, irrep: Irrep): Rational {
  const [total, a, b] = [casimir(irrep), casimir(left), casimir(right)];
  // All Casimir invariants are integers over 3.
  const thirds = ({ num, den }: Rational) => (num * 3n) / den;
  return rational(thirds(total) - thirds(a) - thirds(b), 6n);
}

/** Conjugate ladders. */
const CONJUGATES: Readonly<Record<Ladder, Ladder>> = {
  "I+": "I-",
  "I-": "I+",
  "U+": "U-",
  "U-": "U+",
  "V+": "V-",
  "V-": "V+",
};

/**
 * The operator T1.T2 = sum over generators of F_a(1) F_a(2), exactly, from the generators alone: no coupling
 * coefficients of SU(3) enter, so that it checks them.
 *
 * In a product of two irreps its eigenvalues are `casimirEigenvalue`, and its eigenvectors the coupled states. In
 * hadron physics it is the colour or flavour exchange between two constituents; (lambda1.lambda2) = 4 T1.T2.
 */
export class CasimirCoupling {
  readonly #left: RationalBasis;
  readonly #right: RationalBasis;

  /** @throws LimitError above 3000 states in a factor */
  constructor(left: Irrep, right: Irrep) {
    this.#left = rationalBasis(left);
    this.#right = rationalBasis(right);
  }

  /**
   * T1.T2 between product states: <left' right' | T1.T2 | left right>.
   *
   * @throws InputError if a state does not exist
   */
  betweenStates(to: readonly [State, State], from: readonly [State, State]): SignedRoot {
    for (const state of [...to, ...from]) requireState("CasimirCoupling", state);
    return singleRoot("CasimirCoupling", this.#terms(to, from));
  }

  /**
   * T1.T2 between isospin channels coupled to (Y,I), rows and columns in the order given: a symmetric matrix.
   *
   * @param channels - as `IsoscalarTable.channels` gives them
   */
  betweenChannels(place: IsospinMultiplet, channels: readonly Channel[]): SignedRoot[][] {
    const expanded = channels.map((channel) => this.#expanded(place, channel));
    return expanded.map((to) =>
      expanded.map((from) => {
        const terms = to.flatMap((bra) =>
          from.flatMap((ket) =>
            this.#terms(bra.states, ket.states).map((element) =>
              multiplyRoots(element, multiplyRoots(bra.value, ket.value)),
            ),
          ),
        );
        return singleRoot("CasimirCoupling", terms);
      }),
    );
  }

  /** The state with I3 = I of a channel, in product states. */
  #expanded({ twoI }: IsospinMultiplet, { threeY1, twoI1, threeY2, twoI2 }: Channel) {
    const terms: { states: readonly [State, State]; value: SignedRoot }[] = [];
    for (let twoM1 = twoI1; twoM1 >= -twoI1; twoM1 -= 2) {
      const twoM2 = twoI - twoM1;
      if (Math.abs(twoM2) > twoI2) continue;
      const value = clebschGordan(twoI1, twoM1, twoI2, twoM2, twoI, twoI);
      if (value.sign === 0) continue;
      const first = { irrep: this.#left.irrep, threeY: threeY1, twoI: twoI1, twoI3: twoM1 };
      const second = { irrep: this.#right.irrep, threeY: threeY2, twoI: twoI2, twoI3: twoM2 };
      terms.push({ states: [first, second], value });
    }
    return terms;
  }

  /** I3 I3' + (3/4) Y Y' on the diagonal, half of E_ij E_ji for each ladder beside it. */
  #terms([left2, right2]: readonly [State, State], [left, right]: readonly [State, State]): SignedRoot[] {
    const terms: SignedRoot[] = [];
    if (sameLabels(left, left2) && sameLabels(right, right2)) {
      // (2I3 2I3')/4 + (3/4)(3Y 3Y')/9 over 12.
      const diagonal = 3 * left.twoI3 * right.twoI3 + left.threeY * right.threeY;
      terms.push(signedRoot(diagonal, diagonal * diagonal, 144));
    }
    const half = signedRoot(1, 1, 4);
    for (const ladder of LADDERS) {
      const first = element(this.#left, ladder, left2, left);
      if (first === undefined) continue;
      const second = element(this.#right, CONJUGATES[ladder], right2, right);
      if (second !== undefined) terms.push(multiplyRoots(half, multiplyRoots(first, second)));
    }
    return terms;
  }
}

/** The matrix element of a ladder between normalised states; undefined where it is 0. */
function element(basis: RationalBasis, ladder: Ladder, to: State, from: State): SignedRoot | undefined {
  const i = basis.indexOf(from.threeY, from.twoI, from.twoI3);
  const j = basis.indexOf(to.threeY, to.twoI, to.twoI3);
  const c = basis.apply(ladder, new Map([[i, rational(1)]])).get(j);
  if (c === undefined) return undefined;
  const norm = basis.norms[i]!;
  return divideRoots(scaledRoot(c, basis.norms[j]!), signedRoot(1, norm.num, norm.den));
}

function sameLabels(a: State, b: State): boolean {
  return a.threeY === b.threeY && a.twoI === b.twoI && a.twoI3 === b.twoI3;
}
