import { LimitError } from "../errors.js";
import type { SignedRoot } from "../exact/signed-root.js";
import { couplet } from "../gen/couplet.js";
import { su3ClebschGordan } from "../su3/clebsch-gordan.js";
import { type Irrep, irrepName } from "../su3/irrep.js";
import type { IsoscalarTable } from "../su3/isoscalar-factors.js";
import { type State, states } from "../su3/state.js";
import { producerName } from "../version.js";
import { exactMessage } from "./exact-message.js";
import { sealBytes } from "./sealed-bytes.js";

import v1 = couplet.v1;

/** Lowest minor version of the schema a reader of our factor tables must know. */
export const FACTORS_SCHEMA_MINOR = 0;

/** A full SU(3) coefficient between states. */
export interface StateCoefficient {
  readonly product: State;
  readonly copy: number;
  readonly left: State;
  readonly right: State;
  readonly value: SignedRoot;
}

/** Entries a piece of a table holds: some hundred kilobytes as bytes, about a megabyte as text. */
const PIECE = 2000;

/** So many coefficients take minutes to compute, and more than a gigabyte as a file. */
const LARGEST_STATE_TABLE = 5_000_000;

/**
 * Every nonzero full coefficient of a table, in the order of irreps, copies, product states, left states, right states.
 *
 * @throws LimitError above five million coefficients, counted before anything is computed
 */
export function* stateCoefficients(table: IsoscalarTable): Generator<StateCoefficient> {
  const lefts = states(table.left);
  const rightsOfWeight = statesByWeight(table.right);
  requireFewStates(table, lefts, rightsOfWeight);
  for (const { irrep, multiplicity } of table.series) {
    for (let copy = 1; copy <= multiplicity; copy++) {
      for (const product of states(irrep)) {
        for (const left of lefts) {
          const rest = weight(product.threeY - left.threeY, product.twoI3 - left.twoI3);
          for (const right of rightsOfWeight.get(rest) ?? []) {
            const value = su3ClebschGordan(left, right, product, copy, table);
            if (value.sign !== 0) yield { product, copy, left, right, value };
          }
        }
      }
    }
  }
}

/** A table as the bytes of a sealed `couplet.v1.FactorTable` file. The same table gives the same bytes. */
export function encodeFactors(table: IsoscalarTable, options: { readonly states: boolean }): Uint8Array {
  return sealBytes(Buffer.concat([...encodedPieces(table, options)]));
}

/** The bytes of a table without their seal, piece by piece; each piece by itself is a message too. */
export function* encodedPieces(
  table: IsoscalarTable,
  options: { readonly states: boolean },
): Generator<Uint8Array> {
  for (const piece of factorPieces(table, options)) yield v1.FactorTable.encode(piece).finish();
}

/** A table as a message, without the digest. */
export function factorsMessage(
  table: IsoscalarTable,
  options: { readonly states: boolean },
): v1.FactorTable.$Properties {
  const [head, ...pieces] = factorPieces(table, options);
  return {
    ...head,
    factors: pieces.flatMap(({ factors }) => factors ?? []),
    states: pieces.flatMap((piece) => piece.states ?? []),
  };
}

/**
 * A table as messages that together are the whole: first the fields before its lists, then at most 2000 entries of one
 * list in each. Their encodings one after another are the encoding of the whole.
 */
export function* factorPieces(
  table: IsoscalarTable,
  options: { readonly states: boolean },
): Generator<v1.FactorTable.$Properties> {
  yield {
    kind: "couplet.v1.FactorTable",
    schemaMinor: FACTORS_SCHEMA_MINOR,
    producer: producerName(),
    left: { ...table.left },
    right: { ...table.right },
    convention: table.convention,
    multiplicityRule: table.multiplicityRule,
  };
  for (const factors of batches(factorMessages(table))) yield { factors };
  if (!options.states) return;
  for (const coefficients of batches(stateCoefficients(table))) {
    yield { states: coefficients.map((c) => ({ ...c, value: exactMessage(c.value) })) };
  }
}

/** The factors other than 0 as messages, straight from the columns of the table. */
function* factorMessages(table: IsoscalarTable): Generator<v1.IsoscalarFactor.$Properties> {
  const { segments, sign, num, den, big } = table.columns();
  const doubles = table.doubles();
  for (const { irrep, copy, threeY, twoI, start, channels } of segments) {
    for (const [c, channel] of channels.entries()) {
      const place = start + c;
      if (sign[place] === 0) continue;
      const fraction = num[place] === 0 ? big.get(place)! : { num: num[place]!, den: den[place]! };
      const value = {
        sign: sign[place]!,
        numerator: String(fraction.num),
        denominator: String(fraction.den),
        value: doubles[place]!,
      };
      yield { irrep, copy, threeY, twoI, ...channel, value };
    }
  }
}

function* batches<T>(entries: Iterable<T>): Generator<T[]> {
  let batch: T[] = [];
  for (const entry of entries) {
    batch.push(entry);
    if (batch.length < PIECE) continue;
    yield batch;
    batch = [];
  }
  if (batch.length > 0) yield batch;
}

function weight(threeY: number, twoI3: number): string {
  return `${threeY},${twoI3}`;
}

function statesByWeight(irrep: Irrep): Map<string, State[]> {
  const found = new Map<string, State[]>();
  for (const state of states(irrep)) {
    const key = weight(state.threeY, state.twoI3);
    const list = found.get(key);
    if (list === undefined) found.set(key, [state]);
    else list.push(state);
  }
  return found;
}

/** Counts the pairs of states each product state couples to, zeros included. */
function requireFewStates(
  { left, right, series }: IsoscalarTable,
  lefts: readonly State[],
  rightsOfWeight: ReadonlyMap<string, readonly State[]>,
): void {
  const pairs = new Map<string, number>();
  for (const { threeY, twoI3 } of lefts) {
    for (const rights of rightsOfWeight.values()) {
      const key = weight(threeY + rights[0]!.threeY, twoI3 + rights[0]!.twoI3);
      pairs.set(key, (pairs.get(key) ?? 0) + rights.length);
    }
  }
  let count = 0;
  for (const { irrep, multiplicity } of series) {
    for (const [key, members] of statesByWeight(irrep)) {
      count += multiplicity * members.length * (pairs.get(key) ?? 0);
    }
  }
  if (count <= LARGEST_STATE_TABLE) return;
  throw new LimitError(
    `stateCoefficients: expected at most ${LARGEST_STATE_TABLE} coefficients between states, got ${count} in ` +
      `${irrepName(left)} x ${irrepName(right)}. Ask for isoscalar factors alone, or for one irrep.`,
  );
}
