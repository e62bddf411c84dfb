import { addRoots } from "../exact/root-sum.js";
import { formatRoot, multiplyRoots, type SignedRoot } from "../exact/signed-root.js";
import type { Leg } from "../hadrons/hadron.js";
import { refuse, requireIdentity } from "../require.js";
import { type Irrep, type IsospinMultiplet, isospinMultiplets, sameIrrep } from "../su3/irrep.js";
import type { CouplingStep } from "../su3/product.js";
import { requireState, type State, sameState, states } from "../su3/state.js";
import { type ReachedState, StateCoupler } from "./coupled-states.js";
import type { DecayScheme, Reduced } from "./reduced-coupling.js";

/**
 * One term of a form: the index of a reduced coupling in its list, and its exact coefficient, never 0.
 *
 * Each coupling has at most one term, also where several intermediate isospins lead to one charge channel: their roots
 * have rational ratios, since the norm of every intermediate state enters twice, so they add up to a single root.
 */
export interface FormTerm {
  readonly reduced: number;
  readonly c: SignedRoot;
}

/**
 * The flavour amplitude of one charge channel between pure states, exact and linear in the reduced couplings:
 * A = sum over terms of c times the coupling. No terms if SU(3) forbids the channel.
 */
export interface Form {
  readonly initial: Leg;
  readonly operatorPart: State;
  readonly finals: readonly Leg[];
  readonly terms: readonly FormTerm[];
}

/** The same for one isospin channel; the square of its amplitude is the sum of squares over its charge channels. */
export interface IsospinForm {
  readonly initial: IsospinMultiplet;
  readonly finals: readonly [IsospinMultiplet, IsospinMultiplet];
  readonly terms: readonly FormTerm[];
}

/**
 * Maker of the exact forms of one decay scheme; it keeps the tables it has computed.
 *
 * Any irreps, any number of finals (coupled from left to right), any operator. Phases: convention `deswart-v1`, initial
 * state before operator, first final before second; so the baryon comes before the meson.
 * Source: J. J. de Swart, Rev. Mod. Phys. 35 (1963) 916, Wigner-Eckart theorem for SU(3) (provenance: memory).
 */
export class FormMaker {
  readonly #coupler = new StateCoupler();

  /** @param reduced - what `reducedCouplings` gives for this scheme; terms of forms count in this list */
  constructor(
    readonly scheme: DecayScheme,
    readonly reduced: readonly Reduced[],
  ) {}

  /**
   * The form of one charge channel, for one component of the operator (the first, unless told otherwise).
   *
   * @param finals - one state for each multiplet of `scheme.to`, in that order
   * @throws InputError for states that do not belong to the irreps of the scheme
   */
  chargeForm(initial: State, finals: readonly State[], operatorPart: State = this.#firstPart()): Form {
    this.#requireStates(initial, finals);
    requireState("chargeForm: operatorPart", operatorPart);
    const { from, to } = this.scheme;
    const terms = this.#terms(operatorPart, ({ entry, path }) => {
      const left = this.#alongPath(finals, path);
      return this.#coupler
        .couple(initial, operatorPart, entry)
        .flatMap((entered) =>
          left
            .filter(({ state }) => sameState(state, entered.state))
            .map(({ value }) => multiplyRoots(entered.value, value)),
        );
    });
    return {
      initial: { multiplet: from.id, state: initial },
      operatorPart,
      finals: finals.map((state, k) => ({ multiplet: to[k]!.id, state })),
      terms,
    };
  }

  /** The forms of every charge channel of an initial state that SU(3) permits, finals in the order of `states`. */
  chargeForms(initial: State, operatorPart: State = this.#firstPart()): Form[] {
    const threeY = initial.threeY + operatorPart.threeY;
    const twoI3 = initial.twoI3 + operatorPart.twoI3;
    return combinations(this.scheme.to.map(({ irrep }) => states(irrep)))
      .filter((finals) => total(finals, "threeY") === threeY && total(finals, "twoI3") === twoI3)
      .map((finals) => this.chargeForm(initial, finals, operatorPart))
      .filter(({ terms }) => terms.length > 0);
  }

  /**
   * The form of one isospin channel of a two-body decay: products of isoscalar factors alone.
   *
   * The form of each charge channel is this one times the SU(2) coefficient <I1 m1; I2 m2 | I m>, first final first.
   * @throws InputError for other than two finals, or a component of the operator that has isospin
   */
  isospinForm(
    initial: IsospinMultiplet,
    finals: readonly [IsospinMultiplet, IsospinMultiplet],
    operatorPart: State = this.#firstPart(),
  ): IsospinForm {
    const [first, second] = this.#requireTwoBody(operatorPart);
    const reached = { threeY: initial.threeY + operatorPart.threeY, twoI: initial.twoI };
    const terms = this.#terms(operatorPart, ({ entry, path }) => {
      const parent = { ...initial, irrep: this.scheme.from.irrep };
      const left = { ...finals[0], irrep: first };
      const right = { ...finals[1], irrep: second };
      const entering = this.#coupler.isoscalarFactor(parent, operatorPart, entry, reached);
      return [multiplyRoots(entering, this.#coupler.isoscalarFactor(left, right, path[0]!, reached))];
    });
    return { initial, finals, terms };
  }

  /** The forms of every isospin channel of an isospin multiplet that SU(3) permits; see `isospinForm`. */
  isospinForms(initial: IsospinMultiplet, operatorPart: State = this.#firstPart()): IsospinForm[] {
    const [first, second] = this.#requireTwoBody(operatorPart);
    const threeY = initial.threeY + operatorPart.threeY;
    return combinations([isospinMultiplets(first), isospinMultiplets(second)])
      .map((finals) => finals as [IsospinMultiplet, IsospinMultiplet])
      .filter(([one, two]) => one.threeY + two.threeY === threeY && addsUp(one.twoI, two.twoI, initial.twoI))
      .map((finals) => this.isospinForm(initial, finals, operatorPart))
      .filter(({ terms }) => terms.length > 0);
  }

  /** Terms of every coupling that this component of the operator enters, from the roots that add up to each. */
  #terms(operatorPart: State, roots: (coupling: Reduced) => readonly SignedRoot[]): FormTerm[] {
    return this.reduced.flatMap((coupling, reduced) => {
      if (!sameIrrep(coupling.operatorIrrep, operatorPart.irrep)) return [];
      const sum = addRoots(roots(coupling));
      requireIdentity(
        "form",
        sum.length <= 1,
        () => `coefficient of ${coupling.name} is ${sum.map(formatRoot).join(" + ")}`,
      );
      return sum.map((c) => ({ reduced, c }));
    });
  }

  /** The states that finals couple to from left to right along a path; one isospin may be reached in several ways. */
  #alongPath(finals: readonly State[], path: readonly CouplingStep[]): ReachedState[] {
    const [first, second, ...others] = finals as readonly [State, State, ...State[]];
    const start = this.#coupler.couple(first, second, path[0]!);
    return others.reduce(
      (reached, next, k) =>
        reached.flatMap(({ state, value }) =>
          this.#coupler
            .couple(state, next, path[k + 1]!)
            .map((step) => ({ state: step.state, value: multiplyRoots(value, step.value) })),
        ),
      start,
    );
  }

  #firstPart(): State {
    return this.scheme.operator.parts[0]!.state;
  }

  #requireStates(initial: State, finals: readonly State[]): void {
    const { from, to } = this.scheme;
    if (finals.length !== to.length) refuse("chargeForm: finals", `${to.length} states`, finals.length);
    [initial, ...finals].forEach((state, k) => {
      const { id, irrep } = [from, ...to][k]!;
      requireState(`chargeForm: state of ${id}`, state);
      if (!sameIrrep(state.irrep, irrep))
        refuse(`chargeForm: irrep of the state of ${id}`, JSON.stringify(irrep), state.irrep);
    });
  }

  #requireTwoBody(operatorPart: State): readonly [Irrep, Irrep] {
    const irreps = this.scheme.to.map(({ irrep }) => irrep);
    const mend = "Use the forms of its charge channels.";
    if (irreps.length !== 2) refuse("isospinForm: finals of the decay", "two", irreps.length, mend);
    if (operatorPart.twoI !== 0) refuse("isospinForm: twoI of the operator", "0", operatorPart.twoI, mend);
    return irreps as [Irrep, Irrep];
  }
}

function addsUp(twoI1: number, twoI2: number, twoI: number): boolean {
  return twoI >= Math.abs(twoI1 - twoI2) && twoI <= twoI1 + twoI2 && (twoI1 + twoI2 + twoI) % 2 === 0;
}

function total(finals: readonly State[], label: "threeY" | "twoI3"): number {
  return finals.reduce((sum, state) => sum + state[label], 0);
}

/** One element of each list, in every combination; the last list runs fastest. */
function combinations<T>(lists: readonly (readonly T[])[]): T[][] {
  return lists.reduce<T[][]>(
    (heads, list) => heads.flatMap((head) => list.map((item) => [...head, item])),
    [[]],
  );
}
