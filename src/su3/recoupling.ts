import { LimitError } from "../errors.js";
import { multiplyRoots, type SignedRoot, signedRoot, ZERO_ROOT } from "../exact/signed-root.js";
import { refuse } from "../require.js";
import { isTriad, sixJ } from "../su2/six-j.js";
import {
  hasMultiplet,
  type Irrep,
  type IsospinMultiplet,
  irrepName,
  isospinMultiplets,
  sameIrrep,
} from "./irrep.js";
import { type IsoscalarTable, isoscalarTable } from "./isoscalar-factors.js";
import { type CouplingStep, decomposeProduct } from "./product.js";
import { singleRoot } from "./symmetries.js";

/** One way to couple three irreps to a fourth: the pair's irrep and copy, and the copy of the fourth in the last product. */
export interface PairPath {
  readonly pair: CouplingStep;
  readonly copy: number;
}

/** Recoupling of three irreps: `matrix[i][j]` = <((a b) pair c) d | (a (b c) pair) d> for rows[i] and columns[j]. */
export interface Recoupling {
  readonly rows: readonly PairPath[];
  readonly columns: readonly PairPath[];
  readonly matrix: readonly (readonly SignedRoot[])[];
}

const LARGEST_SUM = 20_000_000;

/**
 * The recoupling matrix from ((a b) c) to (a (b c)) inside d, with all copies: exact and orthogonal.
 *
 * Each element is a sum over isospin multiplets of four isoscalar factors and one SU(2) 6j symbol, at the multiplet of
 * d with the largest hypercharge; it is the same for every state of d.
 * Source: J.J. de Swart, Rev. Mod. Phys. 35 (1963) 916, crossing and recoupling (provenance: memory; checked against
 * products of states).
 * @throws InputError if d is not in the product; LimitError above 20 million terms
 * @example recouplingMatrix(quark, quark, quark, octet) // 2 x 2: by 3bar or 6 on either side
 */
export function recouplingMatrix(a: Irrep, b: Irrep, c: Irrep, d: Irrep): Recoupling {
  const rows = pairPaths(a, b, (e) => [e, c], d);
  const columns = pairPaths(b, c, (f) => [a, f], d);
  if (rows.length === 0) {
    refuse("recouplingMatrix: d", "an irrep of the product", irrepName(d), "Couple the first three to it.");
  }
  requireFewTerms([a, b, c], rows.length * columns.length);
  const tables = new Tables();
  const place = { threeY: d.p + 2 * d.q, twoI: d.p };
  const matrix = rows.map((row) =>
    columns.map((column) => element(tables, [a, b, c, d], row, column, place)),
  );
  return { rows, columns, matrix };
}

/** Refuses sums over too many isospin multiplets, by a bound on the number of their terms. */
function requireFewTerms(irreps: readonly Irrep[], elements: number): void {
  const count = irreps.reduce((product, { p, q }) => product * (p + 1) * (q + 1), elements);
  if (count <= LARGEST_SUM) return;
  throw new LimitError(
    `recouplingMatrix: expected at most ${LARGEST_SUM} terms, got up to ${count} for ${irreps.map(irrepName).join(" x ")}. Choose smaller irreps.`,
  );
}

/** Isoscalar tables, each made once. */
class Tables {
  readonly #made = new Map<string, IsoscalarTable>();

  factor(
    [left, first]: readonly [Irrep, IsospinMultiplet],
    [right, second]: readonly [Irrep, IsospinMultiplet],
    { irrep, copy }: CouplingStep,
    place: IsospinMultiplet,
  ): SignedRoot {
    const key = [left, right, irrep].map(({ p, q }) => `${p},${q}`).join();
    const table = this.#made.get(key) ?? isoscalarTable(left, right, { into: irrep });
    this.#made.set(key, table);
    const channel = { threeY1: first.threeY, twoI1: first.twoI, threeY2: second.threeY, twoI2: second.twoI };
    return table.factor(irrep, copy, place, channel);
  }
}

function element(
  tables: Tables,
  [a, b, c, d]: readonly [Irrep, Irrep, Irrep, Irrep],
  row: PairPath,
  column: PairPath,
  place: IsospinMultiplet,
): SignedRoot {
  const [e, f] = [row.pair.irrep, column.pair.irrep];
  const terms: SignedRoot[] = [];
  for (const inE of isospinMultiplets(e)) {
    for (const inC of withHypercharge(c, place.threeY - inE.threeY)) {
      if (!isTriad(inE.twoI, inC.twoI, place.twoI)) continue;
      const outer = tables.factor([e, inE], [c, inC], { irrep: d, copy: row.copy }, place);
      if (outer.sign === 0) continue;
      for (const inA of isospinMultiplets(a)) {
        for (const inB of withHypercharge(b, inE.threeY - inA.threeY)) {
          if (!isTriad(inA.twoI, inB.twoI, inE.twoI)) continue;
          const inner = tables.factor([a, inA], [b, inB], row.pair, inE);
          if (inner.sign === 0) continue;
          for (const inF of withHypercharge(f, inB.threeY + inC.threeY)) {
            const right = multiplyRoots(
              tables.factor([b, inB], [c, inC], column.pair, inF),
              tables.factor([a, inA], [f, inF], { irrep: d, copy: column.copy }, place),
            );
            if (right.sign === 0) continue;
            const isospin = isospinRecoupling(inA.twoI, inB.twoI, inC.twoI, place.twoI, inE.twoI, inF.twoI);
            terms.push(multiplyRoots(multiplyRoots(outer, inner), multiplyRoots(right, isospin)));
          }
        }
      }
    }
  }
  return terms.length === 0 ? ZERO_ROOT : singleRoot("recouplingMatrix", terms);
}

/** <((a b) e c) d | (a (b c) f) d> = (-1)^(a+b+c+d) sqrt((2e+1)(2f+1)) { a b e; c d f }, spins doubled. */
function isospinRecoupling(a: number, b: number, c: number, d: number, e: number, f: number): SignedRoot {
  const sign = ((a + b + c + d) / 2) % 2 === 0 ? 1 : -1;
  return multiplyRoots(signedRoot(sign, (e + 1) * (f + 1)), sixJ(a, b, e, c, d, f));
}

function withHypercharge(irrep: Irrep, threeY: number): IsospinMultiplet[] {
  return isospinMultiplets(irrep).filter(
    (multiplet) => multiplet.threeY === threeY && hasMultiplet(irrep, multiplet),
  );
}

function pairPaths(
  first: Irrep,
  second: Irrep,
  outer: (pair: Irrep) => readonly [Irrep, Irrep],
  d: Irrep,
): PairPath[] {
  return decomposeProduct(first, second).flatMap(({ irrep, multiplicity }) => {
    const [left, right] = outer(irrep);
    const last = decomposeProduct(left, right).find((entry) => sameIrrep(entry.irrep, d))?.multiplicity ?? 0;
    return Array.from({ length: multiplicity }, (_, i) =>
      Array.from({ length: last }, (__, j) => ({ pair: { irrep, copy: i + 1 }, copy: j + 1 })),
    ).flat();
  });
}
