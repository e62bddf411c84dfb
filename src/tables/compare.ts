import { InputError } from "../errors.js";
import { canonicalJson } from "./canonical-json.js";
import { factorItems } from "./compare-factors.js";
import { couplingItems, decayItems, ITEM_KINDS, type Item, type ItemKind } from "./compare-items.js";
import { fieldOf, type Leaf } from "./compare-leaves.js";
import { decodeCouplings } from "./decode-couplings.js";
import { decodeDecays } from "./decode-decays.js";
import { factorsOfAnyRule } from "./decode-factors.js";
import { checkSeal, type TableKind } from "./sealed-bytes.js";

/** From which size on a change counts; a size that is not given never counts, and at least one is given. */
export interface Thresholds {
  readonly percent?: number;
  readonly sigma?: number;
}

/** The thresholds where none is given. */
export const DEFAULT_THRESHOLDS: Thresholds = { percent: 1, sigma: 1 };

/** A changed value of an item. */
export interface Change {
  readonly path: string;
  readonly from: Leaf | undefined;
  readonly to: Leaf | undefined;
  /** Relative to the first table's value; of a list, the largest of its points. Infinite from 0. */
  readonly percent?: number;
  /** In standard deviations of both tables together; absent where neither has an error. */
  readonly sigma?: number;
  /** Whether it is beyond a threshold; changed texts always are, unless they only describe. */
  readonly counts: boolean;
}

/** What became of an item. */
export interface ItemChange {
  readonly kind: ItemKind;
  readonly name: string;
  readonly status: "new" | "vanished" | "changed";
  /** Empty for a new or vanished item. */
  readonly changes: readonly Change[];
}

/** The differences between two tables, how they were made first. */
export interface Comparison {
  readonly kind: TableKind;
  readonly items: readonly ItemChange[];
  /** Lines of the study that only the first, or only the second table has. */
  readonly studyLines: { readonly vanished: readonly string[]; readonly added: readonly string[] };
  /** How many values changed in all, and how many of these count; a new or vanished item is one. */
  readonly changed: number;
  readonly counted: number;
}

/** Changes below this part of the largest value of the same kind are noise of computation; lists are single precision. */
const NOISE = { number: 1e-9, list: 1e-6 };

/** In units of standard deviations, a change below this is noise. */
const SIGMA_NOISE = 1e-6;

/** Fields that describe, or say how well a fit describes its data; they are told and never count. */
const DESCRIPTIONS = ["title", "producer", "cautions", "notes", "warnings", "sources", "source"];
const QUALITIES = ["pull", "chi2", "probability", "fitted"];

/**
 * Compares two tables of one kind, item by item, whatever the order they stand in: every field of both, the digest apart.
 *
 * Factor tables are compared exactly, and may be of any phase convention or multiplicity rule: a change of these is told.
 * @param thresholds - from where on a change counts; one of an exact coefficient always does
 * @throws InputError if the tables are of different kinds, or factors of different products; as the decoders do
 */
export function compareTables(
  first: { readonly bytes: Uint8Array; readonly file: string },
  second: { readonly bytes: Uint8Array; readonly file: string },
  thresholds: Thresholds = DEFAULT_THRESHOLDS,
): Comparison {
  const kinds = [first, second].map(({ bytes, file }) => checkSeal(bytes, file));
  const [kind] = kinds as [TableKind, TableKind];
  if (kind !== kinds[1]) {
    throw new InputError(`${second.file}: expected two tables of one kind, got ${kinds.join(" and ")}.`);
  }
  if (kind === "couplet.v1.FactorTable") {
    const [a, b] = [first, second].map(({ bytes, file }) => factorsOfAnyRule(bytes, file));
    const items = compareItems(...factorItems(a!, b!, second.file), thresholds);
    return { kind, items, studyLines: { vanished: [], added: [] }, ...counts(items) };
  }
  const [decode, itemsOf] =
    kind === "couplet.v1.DecayTables" ? [decodeDecays, decayItems] : [decodeCouplings, couplingItems];
  const [a, b] = [first, second].map(
    ({ bytes, file }) => canonicalJson(kind, decode(bytes, file)) as Record<string, unknown>,
  );
  const items = compareItems(itemsOf(a!), itemsOf(b!), thresholds);
  return { kind, items, studyLines: studyLines(a!, b!), ...counts(items) };
}

function counts(items: readonly ItemChange[]): { changed: number; counted: number } {
  const whole = items.filter(({ status }) => status !== "changed").length;
  const changes = items.flatMap((item) => item.changes);
  return { changed: whole + changes.length, counted: whole + changes.filter((c) => c.counts).length };
}

function compareItems(first: readonly Item[], second: readonly Item[], thresholds: Thresholds): ItemChange[] {
  const key = ({ kind, name }: Item) => `${kind}\n${name}`;
  const after = new Map(second.map((item) => [key(item), item]));
  const before = new Set(first.map(key));
  const scales = new Scales([...first, ...second]);
  const changed = first.flatMap((item): ItemChange[] => {
    const { kind, name } = item;
    const other = after.get(key(item));
    if (other === undefined) return [{ kind, name, status: "vanished", changes: [] }];
    const changes = compareLeaves(item, other, scales, thresholds);
    return changes.length === 0 ? [] : [{ kind, name, status: "changed", changes }];
  });
  const added = second
    .filter((item) => !before.has(key(item)))
    .map(({ kind, name }): ItemChange => ({ kind, name, status: "new", changes: [] }));
  const rank = ({ kind }: ItemChange) => ITEM_KINDS.indexOf(kind);
  return [...changed, ...added].sort((x, y) => rank(x) - rank(y));
}

/** The largest value of each field within the rows of a parent: what a change in one row is small against. */
class Scales {
  readonly #largest = new Map<string, number>();

  constructor(items: readonly Item[]) {
    for (const { kind, group, leaves } of items) {
      if (group === "") continue;
      for (const [path, leaf] of leaves) {
        const key = this.#key(kind, group, path);
        this.#largest.set(key, Math.max(this.#largest.get(key) ?? 0, sizeOf(leaf)));
      }
    }
  }

  of({ kind, group }: Item, path: string): number {
    return this.#largest.get(this.#key(kind, group, path)) ?? 0;
  }

  #key(kind: string, group: string, path: string): string {
    return `${kind}\n${group}\n${path}`;
  }
}

function sizeOf(leaf: Leaf | undefined): number {
  if (leaf?.kind === "number") return Math.abs(leaf.value);
  return leaf?.kind === "list" ? leaf.values.reduce((size, x) => Math.max(size, Math.abs(x)), 0) : 0;
}

function compareLeaves(first: Item, second: Item, scales: Scales, thresholds: Thresholds): Change[] {
  const paths = new Set([...first.leaves.keys(), ...second.leaves.keys()]);
  return [...paths].sort().flatMap((path): Change[] => {
    const [from, to] = [first.leaves.get(path), second.leaves.get(path)];
    if (from?.kind === "number" && to?.kind === "number") {
      return compareNumbers(path, from, to, scales.of(first, path), thresholds);
    }
    if (from?.kind === "list" && to?.kind === "list" && from.values.length === to.values.length) {
      return compareLists(path, from, to, scales.of(first, path), thresholds);
    }
    if (from?.kind === "text" && to?.kind === "text" && from.text === to.text) return [];
    // Grids choose their points; a different number of them is no change of its own.
    const describes = from?.kind === "list" || to?.kind === "list" || DESCRIPTIONS.includes(fieldOf(path));
    return [{ path, from, to, counts: !describes }];
  });
}

type NumberLeaf = Extract<Leaf, { kind: "number" }>;
type ListLeaf = Extract<Leaf, { kind: "list" }>;

function compareNumbers(
  path: string,
  from: NumberLeaf,
  to: NumberLeaf,
  scale: number,
  thresholds: Thresholds,
): Change[] {
  const difference = to.value - from.value;
  const isQuality = QUALITIES.includes(fieldOf(path));
  const noise = Math.max(
    NOISE.number * Math.max(sizeOf(from), sizeOf(to), scale),
    SIGMA_NOISE * (isQuality ? 1 : Math.min(from.plus, from.minus, to.plus, to.minus)),
  );
  if (Math.abs(difference) <= noise) return compareErrors(path, from, to, thresholds);
  const percent = (100 * difference) / Math.abs(from.value);
  // The errors on the sides that face each other.
  const error = difference > 0 ? Math.hypot(from.plus, to.minus) : Math.hypot(from.minus, to.plus);
  const sigma = error > 0 ? { sigma: difference / error } : {};
  const counts = !isQuality && isBeyond({ percent, ...sigma }, thresholds);
  return [{ path, from, to, percent, ...sigma, counts }];
}

/** Errors of a value that did not change, as a change of their own. */
function compareErrors(path: string, from: NumberLeaf, to: NumberLeaf, thresholds: Thresholds): Change[] {
  const sides = (["plus", "minus"] as const).map((side) => ({
    difference: to[side] - from[side],
    percent: (100 * (to[side] - from[side])) / from[side],
    noise: NOISE.number * Math.max(from[side], to[side], sizeOf(from)),
  }));
  const changed = sides.filter(({ difference, noise }) => Math.abs(difference) > noise);
  if (changed.length === 0) return [];
  const percent = changed.map((side) => side.percent).sort((x, y) => Math.abs(y) - Math.abs(x))[0]!;
  return [{ path: `error of ${path}`, from, to, percent, counts: isBeyond({ percent }, thresholds) }];
}

function compareLists(
  path: string,
  from: ListLeaf,
  to: ListLeaf,
  scale: number,
  thresholds: Thresholds,
): Change[] {
  const noise = NOISE.list * Math.max(sizeOf(from), sizeOf(to), scale);
  const percents = from.values.flatMap((x, k) => {
    const difference = to.values[k]! - x;
    return Math.abs(difference) > noise ? [(100 * difference) / Math.abs(x)] : [];
  });
  if (percents.length === 0) return [];
  const percent = percents.reduce((most, x) => (Math.abs(x) > Math.abs(most) ? x : most));
  return [{ path, from, to, percent, counts: isBeyond({ percent }, thresholds) }];
}

function isBeyond(change: { percent: number; sigma?: number }, { percent, sigma }: Thresholds): boolean {
  return (
    Math.abs(change.percent) > (percent ?? Number.POSITIVE_INFINITY) ||
    Math.abs(change.sigma ?? 0) > (sigma ?? Number.POSITIVE_INFINITY)
  );
}

/** Lines that one of two studies has and the other has not, or not as often. */
function studyLines(first: Record<string, unknown>, second: Record<string, unknown>) {
  const [a, b] = [first, second].map(({ header }) =>
    String((header as Record<string, unknown> | undefined)?.["studyText"] ?? "").split(/\r?\n/),
  );
  return { vanished: without(a!, b!), added: without(b!, a!) };
}

function without(lines: readonly string[], others: readonly string[]): string[] {
  const left = new Map<string, number>();
  for (const line of others) left.set(line, (left.get(line) ?? 0) + 1);
  return lines.filter((line) => {
    const count = left.get(line) ?? 0;
    left.set(line, count - 1);
    return count <= 0 && line.trim() !== "";
  });
}
