import { LimitError } from "../errors.js";
import { refuse } from "../require.js";
import { type Irrep, irrepDimension, requireIrrep, sameIrrep } from "./irrep.js";

/** An irrep in a product, and how often it occurs there. */
export interface SeriesEntry {
  readonly irrep: Irrep;
  readonly multiplicity: number;
}

/** One step of a coupling chain: the irrep reached, and which of its copies (1-based). */
export interface CouplingStep {
  readonly irrep: Irrep;
  readonly copy: number;
}

/** One occurrence of an irrep in a product of several, told apart by the irreps it passes through. */
export interface CouplingPath {
  readonly irrep: Irrep;
  readonly path: readonly CouplingStep[];
}

const LARGEST_LABEL_SUM = 300;
const LARGEST_PATH_LIST = 200_000;

/**
 * The irreps in left ⊗ right with their multiplicities, by rising dimension, then falling p (10 before 10bar).
 *
 * Source: S. Coleman, J. Math. Phys. 5 (1964) 1343 (provenance: memory; checked against weights and dimensions).
 * @throws LimitError if p + q of a factor exceeds 300
 */
export function decomposeProduct(left: Irrep, right: Irrep): SeriesEntry[] {
  requireFactor("decomposeProduct: left", left);
  requireFactor("decomposeProduct: right", right);
  const found: Irrep[] = [];
  for (let i = 0; i <= Math.min(left.p, right.q); i++) {
    for (let j = 0; j <= Math.min(left.q, right.p); j++) {
      found.push(...withoutTraces(left.p - i, right.p - j, left.q - j, right.q - i));
    }
  }
  return collected(found.map((irrep) => ({ irrep, multiplicity: 1 })));
}

/** The irreps in a product of one or more irreps, with their total multiplicities, in the order of `decomposeProduct`. */
export function irrepMultiplicities(irreps: readonly Irrep[]): SeriesEntry[] {
  const [first, ...others] = requireFactors("irrepMultiplicities", irreps);
  return others.reduce(
    (series, factor) =>
      collected(
        series.flatMap(({ irrep, multiplicity }) =>
          decomposeProduct(irrep, factor).map((entry) => ({
            irrep: entry.irrep,
            multiplicity: entry.multiplicity * multiplicity,
          })),
        ),
      ),
    [{ irrep: first, multiplicity: 1 }] as SeriesEntry[],
  );
}

/**
 * Every way to couple irreps from left to right, with the irrep and copy reached after each step.
 *
 * A path has one step less than there are factors; its last step is the irrep itself. Sorted by that irrep in the
 * order of `decomposeProduct`, then by the steps in their order. In 3 ⊗ 3 ⊗ 3 the two octets pass through 3bar and 6.
 * @throws InputError without factors; LimitError above 200000 paths
 */
export function couplingPaths(irreps: readonly Irrep[]): CouplingPath[] {
  const [first, ...others] = requireFactors("couplingPaths", irreps);
  const count = irrepMultiplicities(irreps).reduce((sum, entry) => sum + entry.multiplicity, 0);
  if (count > LARGEST_PATH_LIST) {
    throw new LimitError(
      `couplingPaths: expected at most ${LARGEST_PATH_LIST} paths, got ${count}. Couple fewer irreps.`,
    );
  }
  let paths: CouplingPath[] = [{ irrep: first, path: [] }];
  for (const factor of others) paths = paths.flatMap((path) => extended(path, factor));
  return paths.sort((a, b) => bySize(a.irrep, b.irrep));
}

function extended({ irrep, path }: CouplingPath, factor: Irrep): CouplingPath[] {
  return decomposeProduct(irrep, factor).flatMap((entry) =>
    Array.from({ length: entry.multiplicity }, (_, index) => ({
      irrep: entry.irrep,
      path: [...path, { irrep: entry.irrep, copy: index + 1 }],
    })),
  );
}

/** The irreps of a tensor with symmetric upper indices n, n' and symmetric lower ones m, m', with no mixed trace left. */
function withoutTraces(n: number, n2: number, m: number, m2: number): Irrep[] {
  const found = [{ p: n + n2, q: m + m2 }];
  for (let k = 1; k <= Math.min(n, n2); k++) found.push({ p: n + n2 - 2 * k, q: m + m2 + k });
  for (let k = 1; k <= Math.min(m, m2); k++) found.push({ p: n + n2 + k, q: m + m2 - 2 * k });
  return found;
}

function collected(entries: readonly SeriesEntry[]): SeriesEntry[] {
  const sorted = [...entries].sort((a, b) => bySize(a.irrep, b.irrep));
  const series: SeriesEntry[] = [];
  for (const entry of sorted) {
    const last = series.at(-1);
    if (last === undefined || !sameIrrep(last.irrep, entry.irrep)) series.push(entry);
    else series.splice(-1, 1, { irrep: last.irrep, multiplicity: last.multiplicity + entry.multiplicity });
  }
  return series;
}

function bySize(a: Irrep, b: Irrep): number {
  return irrepDimension(a) - irrepDimension(b) || b.p - a.p;
}

function requireFactors(where: string, irreps: readonly Irrep[]): readonly [Irrep, ...Irrep[]] {
  const [first, ...others] = irreps;
  if (first === undefined) refuse(`${where}: irreps`, "one irrep or more", irreps);
  for (const irrep of irreps) requireFactor(where, irrep);
  return [first, ...others];
}

function requireFactor(where: string, irrep: Irrep): void {
  requireIrrep(where, irrep);
  if (irrep.p + irrep.q <= LARGEST_LABEL_SUM) return;
  throw new LimitError(
    `${where}: expected p + q <= ${LARGEST_LABEL_SUM}, got (${irrep.p}, ${irrep.q}). Choose a smaller irrep.`,
  );
}
