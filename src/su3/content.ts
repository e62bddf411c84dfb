import { LimitError } from "../errors.js";
import { addRoots } from "../exact/root-sum.js";
import { formatRoot, multiplyRoots, ONE_ROOT, type SignedRoot, signedRoot } from "../exact/signed-root.js";
import { refuse, requireIdentity } from "../require.js";
import { su3ClebschGordan } from "./clebsch-gordan.js";
import { type Irrep, irrepName, sameIrrep } from "./irrep.js";
import { isoscalarTable } from "./isoscalar-factors.js";
import { type CouplingPath, couplingPaths } from "./product.js";
import { conjugateState, type State, states } from "./state.js";

/**
 * One product of basis states in a superposition: for each factor the index 0, 1, 2 of the quark (u, d, s in flavour),
 * or of the quark whose antiquark it is where the factor is a 3bar; and its exact coefficient, never 0.
 */
export interface ContentTerm {
  readonly quarks: readonly number[];
  readonly value: SignedRoot;
}

/** A state of a product as a normalised superposition of products of quarks and antiquarks, in the order of indices. */
export interface StateContent {
  readonly state: State;
  readonly terms: readonly ContentTerm[];
}

/** All states of one irrep of a product, reached along one path. */
export interface PathContent {
  readonly path: CouplingPath;
  readonly states: readonly StateContent[];
}

const LARGEST_FACTOR_COUNT = 7;

/**
 * The states of a product of quarks and antiquarks, exactly, in convention `deswart-v1` coupled from left to right.
 *
 * Antiquarks are the conjugates of the quarks: the states of the 3bar are (dbar, -ubar; sbar), and signs say so. The
 * same algebra serves flavour and colour. Paths in the order of `couplingPaths`, states in the order of `states`.
 * @param factors - each 3 or 3bar
 * @param into - only this irrep
 * @throws InputError for another factor, or an irrep the product does not have; LimitError above 7 factors
 * @example productContent([triplet, antitriplet])[1].states[2] // pi+: [{ quarks: [0, 1], value: 1 }]
 */
export function productContent(factors: readonly Irrep[], into?: Irrep): PathContent[] {
  for (const factor of factors) requireTriplet(factor);
  if (factors.length > LARGEST_FACTOR_COUNT) {
    throw new LimitError(
      `productContent: expected at most ${LARGEST_FACTOR_COUNT} factors, got ${factors.length}. Write the content of fewer quarks.`,
    );
  }
  const paths = couplingPaths(factors);
  const wanted = into === undefined ? paths : paths.filter(({ irrep }) => sameIrrep(irrep, into));
  if (wanted.length === 0) {
    const there = [...new Set(paths.map(({ irrep }) => irrepName(irrep)))].join(", ");
    refuse("productContent: into", `an irrep of the product (${there})`, irrepName(into!));
  }
  const reached = new Map<string, readonly StateContent[]>();
  return wanted.map((path) => ({ path, states: contentAlong(factors, path.path, reached) }));
}

/** The content after the last of some steps; content after fewer steps is kept, since paths share their beginnings. */
function contentAlong(
  factors: readonly Irrep[],
  steps: CouplingPath["path"],
  reached: Map<string, readonly StateContent[]>,
): readonly StateContent[] {
  const key = JSON.stringify(steps);
  const known = reached.get(key);
  if (known !== undefined) return known;
  const step = steps.at(-1);
  const content =
    step === undefined
      ? tripletContent(factors[0]!)
      : coupled(contentAlong(factors, steps.slice(0, -1), reached), factors[steps.length]!, step);
  reached.set(key, content);
  return content;
}

/** The states of a 3, or of a 3bar as the conjugates of the quarks. */
function tripletContent(irrep: Irrep): StateContent[] {
  const quarks = states({ p: 1, q: 0 });
  return states(irrep).map((state) => {
    if (irrep.p === 1) {
      const index = quarks.findIndex(({ twoI, twoI3 }) => twoI === state.twoI && twoI3 === state.twoI3);
      return { state, terms: [{ quarks: [index], value: ONE_ROOT }] };
    }
    const { phase, state: quark } = conjugateState(state);
    const index = quarks.findIndex(({ twoI, twoI3 }) => twoI === quark.twoI && twoI3 === quark.twoI3);
    return { state, terms: [{ quarks: [index], value: signedRoot(phase, 1) }] };
  });
}

/** Content of one copy of an irrep, from the content of the left factor and one more quark or antiquark. */
function coupled(
  left: readonly StateContent[],
  factor: Irrep,
  { irrep, copy }: CouplingPath["path"][number],
): StateContent[] {
  const table = isoscalarTable(left[0]!.state.irrep, factor, { into: irrep });
  const right = tripletContent(factor);
  return states(irrep).map((state) => {
    const roots = new Map<string, { quarks: readonly number[]; values: SignedRoot[] }>();
    for (const one of left) {
      for (const other of right) {
        if (one.state.threeY + other.state.threeY !== state.threeY) continue;
        if (one.state.twoI3 + other.state.twoI3 !== state.twoI3) continue;
        const coefficient = su3ClebschGordan(one.state, other.state, state, copy, table);
        for (const a of one.terms) {
          for (const b of other.terms) {
            const quarks = [...a.quarks, ...b.quarks];
            const entry = roots.get(quarks.join()) ?? { quarks, values: [] };
            entry.values.push(multiplyRoots(coefficient, multiplyRoots(a.value, b.value)));
            roots.set(quarks.join(), entry);
          }
        }
      }
    }
    return { state, terms: summed([...roots.values()]) };
  });
}

/** Terms in the order of their indices. All coefficients of a state are rational multiples of one root. */
function summed(
  entries: readonly { quarks: readonly number[]; values: readonly SignedRoot[] }[],
): ContentTerm[] {
  const terms = entries.flatMap(({ quarks, values }) => {
    const sum = addRoots(values);
    requireIdentity(
      "productContent",
      sum.length <= 1,
      () => `coefficient of ${quarks.join()} is ${sum.map(formatRoot).join(" + ")}`,
    );
    return sum.map((value) => ({ quarks, value }));
  });
  return terms.sort((a, b) => lexicographic(a.quarks, b.quarks));
}

function lexicographic(a: readonly number[], b: readonly number[]): number {
  const k = a.findIndex((index, position) => index !== b[position]);
  return k < 0 ? 0 : a[k]! - b[k]!;
}

function requireTriplet(irrep: Irrep): void {
  if (irrep.p + irrep.q === 1) return;
  refuse(
    "productContent: factor",
    "3 or 3bar, a quark or an antiquark",
    irrepName(irrep),
    "Write other irreps as products of quarks: a 6 is in 3 3, an 8 in 3 3bar.",
  );
}
