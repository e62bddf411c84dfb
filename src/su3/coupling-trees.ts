import { LimitError } from "../errors.js";
import { addRational, multiplyRational, type Rational, rational } from "../exact/rational.js";
import {
  divideRoots,
  multiplyRoots,
  ONE_ROOT,
  rootToRational,
  type SignedRoot,
  signedRoot,
} from "../exact/signed-root.js";
import { refuse, requireIdentity, requireInteger } from "../require.js";
import { su3ClebschGordan } from "./clebsch-gordan.js";
import { type Irrep, irrepDimension, irrepName, sameIrrep } from "./irrep.js";
import { isoscalarTable } from "./isoscalar-factors.js";
import { type CouplingStep, decomposeProduct, irrepMultiplicities } from "./product.js";
import { type RationalBasis, rationalBasis, scaledRoot } from "./rational-basis.js";
import type { State } from "./state.js";

/** An order of coupling: the number of a factor, from 0, or two trees whose results are coupled, the left one first. */
export type CouplingTree = number | readonly [CouplingTree, CouplingTree];

/** One way through a tree: the irrep and copy at each coupling; those of the left tree, of the right one, then its own. */
export type TreePath = readonly CouplingStep[];

/** The states of one irrep in two coupling orders: `matrix[i][j]` = <rows[i] | columns[j]>, the same for every state. */
export interface TreeTransformation {
  readonly rows: readonly TreePath[];
  readonly columns: readonly TreePath[];
  readonly matrix: readonly (readonly SignedRoot[])[];
}

/** One product of factor states in a superposition; `factors[i]` is a state of factor i. */
export interface TreeTerm {
  readonly factors: readonly State[];
  readonly value: SignedRoot;
}

const LARGEST_PRODUCT = 20_000;

/**
 * Every way to couple irreps to one irrep in a given order, e.g. `[[0, 1], [2, 3]]` for pairs coupled first.
 *
 * @throws InputError if the tree does not hold each factor once
 * @example treePaths([octet, octet, octet], [0, [1, 2]], singlet) // 8 x 8 -> 8_1, 8_2, each with 8 to 1
 */
export function treePaths(irreps: readonly Irrep[], tree: CouplingTree, into: Irrep): TreePath[] {
  requireTree("treePaths", irreps, tree);
  return pathsOf(irreps, tree)
    .filter(({ irrep }) => sameIrrep(irrep, into))
    .map(({ path }) => path);
}

/**
 * The states of an irrep along one path, as superpositions of products of factor states; in the order of `states`.
 *
 * @throws InputError for a wrong tree, or a path it does not have; LimitError above 20000 product states
 */
export function treeStates(irreps: readonly Irrep[], tree: CouplingTree, path: TreePath): TreeTerm[][] {
  requireTree("treeStates", irreps, tree);
  requireSmall("treeStates", irreps);
  const into = path.at(-1)?.irrep;
  const known = into === undefined ? [] : treePaths(irreps, tree, into);
  if (!known.some((other) => JSON.stringify(other) === JSON.stringify(path)))
    refuse("treeStates: path", "a path of this tree, as treePaths gives it", path);
  const vectors = new TreeVectors(irreps);
  const { scale, vectors: expansion } = vectors.along(tree, path);
  const { norms } = vectors.basis(into!);
  return expansion.map((vector, s) =>
    [...vector].map(([key, c]) => {
      const factors = vectors.statesOf(key);
      const norm = multiplyRational(vectors.normOf(key), { num: norms[s]!.den, den: norms[s]!.num });
      return { factors, value: multiplyRoots(scale, scaledRoot(c, norm)) };
    }),
  );
}

/**
 * The orthogonal transformation between two orders of coupling the same factors, for one irrep of the product.
 *
 * For three factors these are the recoupling coefficients of SU(3), with copies. Computed on product states.
 * @throws InputError for wrong trees, or an irrep that is not in the product; LimitError above 20000 product states
 */
export function treeTransformation(
  irreps: readonly Irrep[],
  from: CouplingTree,
  to: CouplingTree,
  into: Irrep,
): TreeTransformation {
  for (const tree of [from, to]) requireTree("treeTransformation", irreps, tree);
  requireSmall("treeTransformation", irreps);
  const series = irrepMultiplicities(irreps);
  if (!series.some(({ irrep }) => sameIrrep(irrep, into))) {
    const there = series.map(({ irrep }) => irrepName(irrep)).join(", ");
    refuse("treeTransformation: into", `one of ${there}`, irrepName(into));
  }
  const vectors = new TreeVectors(irreps);
  // The overlap is the same for every state; the first is the highest weight.
  const highest = (tree: CouplingTree, path: TreePath) => {
    const { scale, vectors: expansion } = vectors.along(tree, path);
    return { scale, vector: expansion[0]! };
  };
  const [rows, columns] = [treePaths(irreps, from, into), treePaths(irreps, to, into)];
  const kets = columns.map((path) => highest(to, path));
  const { norms } = vectors.basis(into);
  const matrix = rows.map((path) => {
    const bra = highest(from, path);
    return kets.map((ket) => {
      let sum = rational(0);
      for (const [key, c] of bra.vector) {
        const other = ket.vector.get(key);
        if (other === undefined) continue;
        sum = addRational(sum, multiplyRational(multiplyRational(c, other), vectors.normOf(key)));
      }
      const overlap = multiplyRational(sum, { num: norms[0]!.den, den: norms[0]!.num });
      return multiplyRoots(multiplyRoots(bra.scale, ket.scale), scaledRoot(overlap, rational(1)));
    });
  });
  return { rows, columns, matrix };
}

/** A vector over products of factor basis vectors; a key is the list of their numbers, by factor. */
type ProductVector = ReadonlyMap<string, Rational>;

/** All states of a coupled irrep in rational bases: each is `scale` times its vector. */
interface Expansion {
  readonly irrep: Irrep;
  readonly scale: SignedRoot;
  readonly vectors: readonly ProductVector[];
}

/** Coupling coefficients between rational bases: `root` times a rational, by state of the product. */
interface RationalCoupling {
  readonly root: SignedRoot;
  readonly terms: readonly (readonly [left: number, right: number, c: Rational][])[];
}

/** Makes expansions along paths; bases and couplings are kept, since paths share them. */
class TreeVectors {
  readonly #bases = new Map<string, RationalBasis>();
  readonly #couplings = new Map<string, RationalCoupling>();

  constructor(readonly irreps: readonly Irrep[]) {}

  basis(irrep: Irrep): RationalBasis {
    const name = `${irrep.p},${irrep.q}`;
    const basis = this.#bases.get(name) ?? rationalBasis(irrep);
    this.#bases.set(name, basis);
    return basis;
  }

  statesOf(key: string): State[] {
    return key.split(",").map((i, factor) => this.basis(this.irreps[factor]!).states[Number(i)]!);
  }

  normOf(key: string): Rational {
    return key
      .split(",")
      .map((i, factor) => this.basis(this.irreps[factor]!).norms[Number(i)]!)
      .reduce(multiplyRational);
  }

  along(tree: CouplingTree, path: TreePath): Expansion {
    if (typeof tree === "number") return this.#factor(tree);
    const size = couplings(tree[0]);
    const left = this.along(tree[0], path.slice(0, size));
    const right = this.along(tree[1], path.slice(size, -1));
    const step = path.at(-1)!;
    const { root, terms } = this.#coupling(left.irrep, right.irrep, step);
    const vectors = terms.map((list) => {
      const sum = new Map<string, Rational>();
      for (const [a, b, c] of list) {
        for (const [key1, c1] of left.vectors[a]!) {
          for (const [key2, c2] of right.vectors[b]!) {
            const key = merged(key1, key2);
            const term = multiplyRational(c, multiplyRational(c1, c2));
            const before = sum.get(key);
            const total = before === undefined ? term : addRational(before, term);
            if (total.num === 0n) sum.delete(key);
            else sum.set(key, total);
          }
        }
      }
      return sum;
    });
    return { irrep: step.irrep, scale: [left.scale, right.scale].reduce(multiplyRoots, root), vectors };
  }

  /** A factor by itself; the places of the others in a key are empty. */
  #factor(factor: number): Expansion {
    const irrep = this.irreps[factor]!;
    const vectors = this.basis(irrep).states.map((_, i) => {
      const key = this.irreps.map((__, other) => (other === factor ? String(i) : "")).join(",");
      return new Map([[key, rational(1)]]);
    });
    return { irrep, scale: ONE_ROOT, vectors };
  }

  #coupling(left: Irrep, right: Irrep, step: CouplingStep): RationalCoupling {
    const name = JSON.stringify([left, right, step]);
    const coupling = this.#couplings.get(name) ?? this.#made(left, right, step);
    this.#couplings.set(name, coupling);
    return coupling;
  }

  #made(left: Irrep, right: Irrep, { irrep, copy }: CouplingStep): RationalCoupling {
    const table = isoscalarTable(left, right, { into: irrep });
    const [a, b, product] = [this.basis(left), this.basis(right), this.basis(irrep)];
    let root: SignedRoot | undefined;
    const terms = product.states.map((state, s) => {
      const list: [number, number, Rational][] = [];
      for (const [i, first] of a.states.entries()) {
        for (const [j, second] of b.states.entries()) {
          if (first.threeY + second.threeY !== state.threeY) continue;
          if (first.twoI3 + second.twoI3 !== state.twoI3) continue;
          const value = su3ClebschGordan(first, second, state, copy, table);
          if (value.sign === 0) continue;
          const scaled = divideRoots(
            multiplyRoots(value, rootOf(product.norms[s]!)),
            multiplyRoots(rootOf(a.norms[i]!), rootOf(b.norms[j]!)),
          );
          root ??= scaled;
          const c = rootToRational(divideRoots(scaled, root));
          requireIdentity(
            "treeVectors",
            c !== undefined,
            () => "coefficients of one copy have irrational ratios",
          );
          list.push([i, j, c!]);
        }
      }
      return list;
    });
    return { root: root!, terms };
  }
}

function rootOf({ num, den }: Rational): SignedRoot {
  return signedRoot(1, num, den);
}

/** Two keys whose filled places do not meet, in one. */
function merged(a: string, b: string): string {
  const others = b.split(",");
  return a
    .split(",")
    .map((place, i) => place || others[i]!)
    .join(",");
}

/** The number of couplings in a tree. */
function couplings(tree: CouplingTree): number {
  return typeof tree === "number" ? 0 : couplings(tree[0]) + couplings(tree[1]) + 1;
}

function factorsOf(tree: CouplingTree): number[] {
  return typeof tree === "number" ? [tree] : [...factorsOf(tree[0]), ...factorsOf(tree[1])];
}

function pathsOf(irreps: readonly Irrep[], tree: CouplingTree): { irrep: Irrep; path: CouplingStep[] }[] {
  if (typeof tree === "number") return [{ irrep: irreps[tree]!, path: [] }];
  const rights = pathsOf(irreps, tree[1]);
  return pathsOf(irreps, tree[0]).flatMap((left) =>
    rights.flatMap((right) =>
      decomposeProduct(left.irrep, right.irrep).flatMap(({ irrep, multiplicity }) =>
        Array.from({ length: multiplicity }, (_, i) => ({
          irrep,
          path: [...left.path, ...right.path, { irrep, copy: i + 1 }],
        })),
      ),
    ),
  );
}

function requireTree(where: string, irreps: readonly Irrep[], tree: CouplingTree): void {
  const factors = factorsOf(tree);
  for (const factor of factors) requireInteger(`${where}: tree`, factor, 0, "", irreps.length - 1);
  if (factors.length === irreps.length && new Set(factors).size === irreps.length) return;
  refuse(`${where}: tree`, `each of the factors 0 to ${irreps.length - 1} once`, factors);
}

function requireSmall(where: string, irreps: readonly Irrep[]): void {
  const count = irreps.reduce((product, irrep) => product * irrepDimension(irrep), 1);
  if (count <= LARGEST_PRODUCT) return;
  throw new LimitError(
    `${where}: expected at most ${LARGEST_PRODUCT} product states, got ${count}. Couple fewer or smaller irreps.`,
  );
}
