import { InputError, TableError } from "../errors.js";
import { couplet } from "../gen/couplet.js";
import { nearestNames } from "../nearest-names.js";
import { type RowsEvaluator, rowsEvaluator, tableHadrons } from "../tables/evaluate-rows.js";

import v1 = couplet.v1;

/** A table being served. */
export interface ServedTable<Message> {
  /** Where it came from: a path, or `built in`. */
  readonly file: string;
  /** 32 bytes. */
  readonly sha256: Uint8Array;
  readonly message: Message;
}

/** A decay table being served. */
export type ServedDecays = ServedTable<v1.DecayTables>;

/** A coupling table being served. */
export type ServedCouplings = ServedTable<v1.CouplingTables>;

/** A parent being served, with all that its calls need made ready. */
export interface ServedParent {
  readonly table: ServedDecays;
  readonly name: string;
  readonly message: v1.Parent;
  readonly daughters: readonly v1.Hadron.$Properties[];
  /**
   * Widths of the rows at any mass, made ready at the first call.
   *
   * @throws TableError if the table has a row that this version cannot evaluate; the other calls serve it all the same
   */
  readonly evaluator: () => RowsEvaluator;
  /** Sums of parts per 10^9 up to and with each row. */
  readonly cumulativeParts: Float64Array;
}

/**
 * The tables of one moment, never changed: a call takes them once and keeps them, while a replacement makes new ones.
 */
export class Served {
  readonly #byName = new Map<string, ServedParent[]>();
  readonly #byNumber = new Map<number, ServedParent[]>();
  readonly #byAlias = new Map<number, ServedParent[]>();

  constructor(
    readonly decays: readonly ServedDecays[],
    readonly couplings: readonly ServedCouplings[],
  ) {
    for (const parent of decays.flatMap(parentsOf)) {
      append(this.#byName, parent.name, parent);
      const { mcNumber, mcAliases } = parent.message.hadron;
      if (mcNumber != null) append(this.#byNumber, mcNumber, parent);
      for (const alias of mcAliases ?? []) append(this.#byAlias, alias, parent);
    }
  }

  /**
   * The parent a request means.
   *
   * @throws TableError for a digest that is not served; InputError for an unknown parent, or one that several tables
   * have when the request names none
   */
  parent(key: v1.ParentKey.$Properties | null | undefined): ServedParent {
    const digest = key?.tableSha256 ?? new Uint8Array();
    const found = this.#found(key);
    if (digest.length === 0 && found.length === 1) return found[0]!;
    const pinned = found.find(({ table }) => sameBytes(table.sha256, digest));
    if (pinned !== undefined) return pinned;
    throw this.#refusal(key, digest, found);
  }

  /**
   * The coupling tables a request may mean: the one of a digest, or for an empty digest all of them.
   *
   * @throws TableError for a digest that is not served
   */
  couplingTables(digest: Uint8Array): readonly ServedCouplings[] {
    if (digest.length === 0) return this.couplings;
    const pinned = this.couplings.filter(({ sha256 }) => sameBytes(sha256, digest));
    if (pinned.length === 0) throw notServed("table_sha256", digest, this.couplings);
    return pinned;
  }

  #found(key: v1.ParentKey.$Properties | null | undefined): readonly ServedParent[] {
    if (key?.name != null) return this.#byName.get(key.name) ?? [];
    if (key?.mcNumber != null)
      return this.#byNumber.get(key.mcNumber) ?? this.#byAlias.get(key.mcNumber) ?? [];
    return [];
  }

  #refusal(
    key: v1.ParentKey.$Properties | null | undefined,
    digest: Uint8Array,
    found: readonly ServedParent[],
  ): Error {
    if (digest.length > 0 && !this.decays.some((table) => sameBytes(table.sha256, digest))) {
      return notServed("parent.table_sha256", digest, this.decays);
    }
    if (key?.name == null && key?.mcNumber == null) {
      return new InputError(
        "parent: expected a name or a Monte Carlo number, got neither. Set one of the two.",
      );
    }
    const label = key.name != null ? JSON.stringify(key.name) : String(key.mcNumber);
    if (found.length > 1 && digest.length === 0) {
      return new InputError(
        `parent: expected a parent of one table, got ${label}, which ${found.length} tables have. Set table_sha256 to one of: ${listed(found.map(({ table }) => table))}.`,
      );
    }
    const near = nearestNames(key.name ?? "", [...this.#byName.keys()]);
    const mend = near.length > 0 ? `Nearest: ${near.join(", ")}.` : "List the tables for their parents.";
    return new InputError(`parent: expected a parent of the tables served, got ${label}. ${mend}`);
  }
}

function notServed(where: string, digest: Uint8Array, tables: readonly ServedTable<unknown>[]): TableError {
  return new TableError(
    `${where}: expected the digest of a served table, got ${hex(digest)}. Served: ${listed(tables)}. Tables may have been replaced; list them again.`,
  );
}

function listed(tables: readonly ServedTable<unknown>[]): string {
  return tables.map((table) => `${hex(table.sha256)} (${table.file})`).join(", ") || "none";
}

/** Bytes in hexadecimal. */
export function hex(bytes: Uint8Array): string {
  return Buffer.from(bytes).toString("hex");
}

function sameBytes(a: Uint8Array, b: Uint8Array): boolean {
  return Buffer.compare(a, b) === 0;
}

function append<K>(map: Map<K, ServedParent[]>, key: K, parent: ServedParent): void {
  const list = map.get(key);
  if (list === undefined) map.set(key, [parent]);
  else list.push(parent);
}

function parentsOf(table: ServedDecays): ServedParent[] {
  const hadrons = tableHadrons(table.message);
  return table.message.parents.map((message) => {
    const names = new Set(message.rows.flatMap((row) => (row.daughters ?? []).map(({ name }) => name ?? "")));
    let evaluator: RowsEvaluator | undefined;
    let sum = 0;
    return {
      table,
      name: message.hadron.name ?? "",
      message,
      daughters: [...names].flatMap((name) => hadrons.get(name) ?? []),
      evaluator: () => {
        evaluator ??= rowsEvaluator(message, hadrons);
        return evaluator;
      },
      cumulativeParts: Float64Array.from(message.rows, (row) => {
        sum += row.partsPerBillion ?? 0;
        return sum;
      }),
    };
  });
}
