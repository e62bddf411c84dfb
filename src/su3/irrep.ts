import { LimitError } from "../errors.js";
import { type Rational, rational } from "../exact/rational.js";
import { refuse, requireInteger } from "../require.js";

/** An irreducible representation of SU(3): p quark and q antiquark indices. The octet is { p: 1, q: 1 }. */
export interface Irrep {
  readonly p: number;
  readonly q: number;
}

/** The labels of an isospin multiplet inside an irrep, as integers: 3Y and 2I. */
export interface IsospinMultiplet {
  readonly threeY: number;
  readonly twoI: number;
}

/** Up to this p + q every dimension is an integer below 2^53. */
const LARGEST_LABEL_SUM = 100_000;

/**
 * Checks the labels of an irrep.
 *
 * @param where - the function and argument, for the message
 * @throws InputError unless p and q are integers >= 0; LimitError above p + q = 100000
 */
export function requireIrrep(where: string, irrep: Irrep): void {
  const mend = "Label irreps by (p, q); the octet is (1, 1).";
  requireInteger(`${where}: p`, irrep.p, 0, mend);
  requireInteger(`${where}: q`, irrep.q, 0, mend);
  if (irrep.p + irrep.q <= LARGEST_LABEL_SUM) return;
  throw new LimitError(
    `${where}: expected p + q <= ${LARGEST_LABEL_SUM}, got (${irrep.p}, ${irrep.q}). Dimensions beyond are not exact.`,
  );
}

/** The dimension (p+1)(q+1)(p+q+2)/2. */
export function irrepDimension(irrep: Irrep): number {
  requireIrrep("irrepDimension", irrep);
  return dimension(irrep.p, irrep.q);
}

/** The conjugate irrep (q, p). */
export function conjugate(irrep: Irrep): Irrep {
  return { p: irrep.q, q: irrep.p };
}

/** The triality (p - q) mod 3: 0 for hadrons, additive modulo 3 in products. */
export function triality(irrep: Irrep): 0 | 1 | 2 {
  requireIrrep("triality", irrep);
  return ((irrep.p + 2 * irrep.q) % 3) as 0 | 1 | 2;
}

/** The quadratic Casimir invariant (p^2 + q^2 + pq)/3 + p + q: 4/3 for the triplet, 3 for the octet. */
export function casimir(irrep: Irrep): Rational {
  requireIrrep("casimir", irrep);
  const { p, q } = irrep;
  return rational(p * p + q * q + p * q + 3 * p + 3 * q, 3);
}

/** Whether a and b are the same irrep. */
export function sameIrrep(a: Irrep, b: Irrep): boolean {
  return a.p === b.p && a.q === b.q;
}

/**
 * The isospin multiplets of an irrep in printed order: Y descending, then I descending. Length (p+1)(q+1).
 *
 * Labelled by k = q..p+q and l = 0..q, the second row of a Gelfand-Tsetlin pattern: 2I = k - l and
 * 3Y = 3(k + l) - 2(p + 2q). No two multiplets of one irrep have the same (Y, I).
 */
export function isospinMultiplets(irrep: Irrep): IsospinMultiplet[] {
  requireIrrep("isospinMultiplets", irrep);
  const { p, q } = irrep;
  const multiplets: IsospinMultiplet[] = [];
  for (let sum = p + 2 * q; sum >= q; sum--) {
    for (let l = Math.max(0, sum - p - q); l <= Math.min(q, sum - q); l++) {
      multiplets.push({ threeY: 3 * sum - 2 * (p + 2 * q), twoI: sum - 2 * l });
    }
  }
  return multiplets;
}

/** Whether an irrep holds an isospin multiplet of these labels. */
export function hasMultiplet(irrep: Irrep, { threeY, twoI }: IsospinMultiplet): boolean {
  const { p, q } = irrep;
  const sum = (threeY + 2 * (p + 2 * q)) / 3;
  const k = (sum + twoI) / 2;
  const l = (sum - twoI) / 2;
  return Number.isInteger(k) && Number.isInteger(l) && k >= q && k <= p + q && l >= 0 && l <= q;
}

/**
 * The name readers know: `8`, `10`, `10bar`, `27`; where a dimension belongs to several irreps, with the labels:
 * `15(2,1)`, `15bar(1,2)`. Unbarred means p >= q. `parseIrrep` reads every name back.
 */
export function irrepName(irrep: Irrep): string {
  const n = irrepDimension(irrep);
  const bare = irrep.p >= irrep.q ? `${n}` : `${n}bar`;
  return unbarredOfDimension(n).length === 1 ? bare : `${bare}(${irrep.p},${irrep.q})`;
}

/**
 * Reads an irrep: a name such as `8`, `10bar` or `15(2,1)`, or the labels `p,q` or `(p,q)`.
 *
 * A bare dimension is the irrep with p >= q, its `bar` the conjugate.
 * @throws InputError for a dimension no irrep has (naming the nearest), one that several have (naming them), a bar on a
 * self-conjugate irrep, labels that contradict the dimension, or text of another form
 */
export function parseIrrep(text: string): Irrep {
  const match = /^(?:(\d{1,9})(bar)?)?(?:\((\d{1,6}),(\d{1,6})\))?$|^(\d{1,6}),(\d{1,6})$/.exec(
    text.replaceAll(" ", ""),
  );
  if (match === null || text.trim() === "") {
    refuse("parseIrrep", "a dimension such as 8, 10 or 10bar, or labels p,q", text);
  }
  const dimensionText = match[1];
  const labels = match[3] === undefined && match[5] === undefined ? undefined : labelled(match);
  if (dimensionText === undefined) return labels!;
  const barred = match[2] !== undefined;
  if (labels === undefined) return irrepOfName(text, Number(dimensionText), barred);
  const named = irrepDimension(labels) === Number(dimensionText) && barred === labels.p < labels.q;
  if (!named) refuse("parseIrrep", `${irrepName(labels)} for (${labels.p}, ${labels.q})`, text);
  return labels;
}

function labelled(match: RegExpExecArray): Irrep {
  const irrep = { p: Number(match[3] ?? match[5]), q: Number(match[4] ?? match[6]) };
  requireIrrep("parseIrrep", irrep);
  return irrep;
}

function irrepOfName(text: string, n: number, barred: boolean): Irrep {
  const candidates = unbarredOfDimension(n).map((irrep) => (barred ? conjugate(irrep) : irrep));
  if (candidates.length === 0) {
    refuse(
      "parseIrrep",
      `the dimension of an irrep (the nearest are ${nearestDimensions(n).join(" and ")})`,
      text,
    );
  }
  if (candidates.length > 1) {
    const choices = candidates.map(irrepName).join(" or ");
    refuse("parseIrrep", choices, text, `Dimension ${n} belongs to several irreps; write the labels.`);
  }
  const [irrep] = candidates as [Irrep];
  if (barred && irrep.p === irrep.q) refuse("parseIrrep", `${n}, which is its own conjugate`, text);
  return irrep;
}

function dimension(p: number, q: number): number {
  return ((p + 1) * (q + 1) * (p + q + 2)) / 2;
}

/** The irreps with p >= q of dimension n, by falling q. */
function unbarredOfDimension(n: number): Irrep[] {
  const found: Irrep[] = [];
  for (let q = 0; dimension(q, q) <= n; q++) {
    const p = largestP(n, q);
    if (dimension(p, q) === n) found.unshift({ p, q });
  }
  return found;
}

/** The largest p >= q with dimension(p, q) <= n, from the root of a quadratic in p, mended for its rounding. */
function largestP(n: number, q: number): number {
  const b = q + 3;
  let p = Math.max(q, Math.floor((Math.sqrt(b * b - 4 * (q + 2 - (2 * n) / (q + 1))) - b) / 2) - 1);
  while (dimension(p + 1, q) <= n) p++;
  return p;
}

function nearestDimensions(n: number): number[] {
  const has = (m: number) => unbarredOfDimension(m).length > 0;
  let below = n - 1;
  while (below >= 1 && !has(below)) below--;
  let above = n + 1;
  while (!has(above)) above++;
  return below >= 1 ? [below, above] : [above];
}
