import { InputError } from "../errors.js";
import { formatRational, rational } from "../exact/rational.js";
import { couplet } from "../gen/couplet.js";
import { irrepName } from "../su3/irrep.js";
import type { Item, ItemKind } from "./compare-items.js";
import { leavesOf } from "./compare-leaves.js";
import { formatExact } from "./exact-message.js";

import v1 = couplet.v1;

type Maybe<T> = T | null | undefined;

/**
 * The items of two factor tables of one product, without the coefficients that are equal.
 *
 * Tables leave zeros out: a coefficient that only one of them has is 0 in the other, unless the other has nothing of that
 * copy of the irrep at all, which is then new or vanished as a whole.
 * @param file - of the second table, for messages
 * @throws InputError for tables of different products
 */
export function factorItems(first: v1.FactorTable, second: v1.FactorTable, file: string): [Item[], Item[]] {
  requireSameProduct(first, second, file);
  const [before, after] = [first, second].map(({ factors }) => new Set(factors.map(copyKey)));
  const shared = new Set([...before!].filter((key) => after!.has(key)));
  const severalCopies = new Set(
    [...first.factors, ...second.factors]
      .filter(({ copy }) => copy! > 1)
      .map((factor) => irrepKey(factor.irrep)),
  );
  const copyName = (irrep: Maybe<v1.Irrep.$Properties>, copy: Maybe<number>) =>
    `${irrepText(irrep)}${severalCopies.has(irrepKey(irrep)) ? `_${copy}` : ""}`;

  const factors = changed("factor", first.factors, second.factors, {
    isShared: (factor) => shared.has(copyKey(factor)),
    key: ({ irrep, copy, threeY, twoI, threeY1, twoI1, threeY2, twoI2 }) =>
      [irrepKey(irrep), copy, threeY, twoI, threeY1, twoI1, threeY2, twoI2].join(),
    name: ({ irrep, copy, threeY, twoI, threeY1, twoI1, threeY2, twoI2 }) =>
      `<${placeText(threeY1, twoI1, 1)}; ${placeText(threeY2, twoI2, 2)} | ${copyName(irrep, copy)} ${placeText(threeY, twoI)}>`,
  });
  const bothHaveStates = first.states.length > 0 && second.states.length > 0;
  const coefficients = changed("state coefficient", first.states, second.states, {
    isShared: ({ product, copy }) => bothHaveStates && shared.has(`${irrepKey(product?.irrep)},${copy}`),
    key: ({ product, copy, left, right }) =>
      [irrepKey(product?.irrep), copy, ...[product, left, right].map(stateKey)].join(),
    name: ({ product, copy, left, right }) =>
      `<${stateText(left, 1)}; ${stateText(right, 2)} | ${copyName(product?.irrep, copy)} ${stateText(product)}>`,
  });
  const [a, b] = [first, second].map((table, k) => [
    header(table),
    ...[...(k === 0 ? before! : after!)].map((key) => copyItem(key, copyName)),
    ...(table.states.length === 0 ? [] : [named("coefficients between states", "all")]),
    ...factors[k]!,
    ...coefficients[k]!,
  ]);
  return [a!, b!];
}

interface Coefficient {
  readonly value?: Maybe<v1.Exact.$Properties>;
}

/** The coefficients of two lists that are not equal, each in both tables' items. */
function changed<T extends Coefficient>(
  kind: ItemKind,
  first: readonly T[],
  second: readonly T[],
  of: {
    readonly isShared: (entry: T) => boolean;
    readonly key: (entry: T) => string;
    readonly name: (entry: T) => string;
  },
): [Item[], Item[]] {
  const items: [Item[], Item[]] = [[], []];
  const note = (entry: T, from: Coefficient["value"], to: Coefficient["value"]) => {
    if (!of.isShared(entry) || rawText(from) === rawText(to)) return;
    const name = of.name(entry);
    for (const [k, exact] of [from, to].entries()) {
      const leaves = new Map([["value", { kind: "text" as const, text: formatExact(exact) }]]);
      items[k]!.push({ ...named(kind, name), leaves });
    }
  };
  const before = new Map(first.map((entry) => [of.key(entry), entry]));
  for (const entry of second) {
    const key = of.key(entry);
    note(entry, before.get(key)?.value, entry.value);
    before.delete(key);
  }
  for (const entry of before.values()) note(entry, entry.value, undefined);
  return items;
}

/** An exact number as it stands in the file: where this is equal, no arithmetic is needed. */
function rawText(exact: Coefficient["value"]): string {
  return `${exact?.sign ?? 0} ${exact?.numerator ?? ""}/${exact?.denominator ?? ""}`;
}

function header({ schemaMinor, producer, convention, multiplicityRule }: v1.FactorTable): Item {
  const leaves = leavesOf({ schemaMinor, producer, convention, multiplicityRule });
  return { ...named("header", "header"), leaves };
}

function copyItem(key: string, copyName: (irrep: v1.Irrep.$Properties, copy: number) => string): Item {
  const [p, q, copy] = key.split(",").map(Number);
  return named("irrep", copyName({ p: p!, q: q! }, copy!));
}

function named(kind: ItemKind, name: string): Item {
  return { kind, name, group: "", leaves: new Map() };
}

function requireSameProduct(first: v1.FactorTable, second: v1.FactorTable, file: string): void {
  const [a, b] = [first, second].map(({ left, right }) => `${irrepText(left)} x ${irrepText(right)}`);
  if (a === b) return;
  throw new InputError(
    `${file}: expected factors of ${a} as in the first table, got those of ${b}. Compare tables of one product, with its factors in one order.`,
  );
}

function irrepText(irrep: Maybe<v1.Irrep.$Properties>): string {
  return irrepName({ p: irrep?.p ?? 0, q: irrep?.q ?? 0 });
}

function irrepKey(irrep: Maybe<v1.Irrep.$Properties>): string {
  return `${irrep?.p},${irrep?.q}`;
}

function copyKey({ irrep, copy }: v1.IsoscalarFactor.$Properties): string {
  return `${irrepKey(irrep)},${copy}`;
}

function stateKey(state: Maybe<v1.State.$Properties>): string {
  return `${state?.threeY},${state?.twoI},${state?.twoI3}`;
}

/** `Y1=1 I1=1/2`, or without the index in the product. */
function placeText(threeY: Maybe<number>, twoI: Maybe<number>, index: 1 | 2 | "" = ""): string {
  return `Y${index}=${formatRational(rational(threeY ?? 0, 3))} I${index}=${formatRational(rational(twoI ?? 0, 2))}`;
}

/** `Y1=1 I1=1/2 m1=-1/2`. */
function stateText(state: Maybe<v1.State.$Properties>, index: 1 | 2 | "" = ""): string {
  return `${placeText(state?.threeY, state?.twoI, index)} m${index}=${formatRational(rational(state?.twoI3 ?? 0, 2))}`;
}
