import { InputError, TableError } from "../errors.js";
import { couplet } from "../gen/couplet.js";
import { nearestNames } from "../hadrons/nearest-names.js";
import { requireIdentity } from "../require.js";
import { closedFormEvaluator } from "./closed-form-evaluator.js";
import type { ParentEvaluator } from "./parent-evaluator.js";

import v1 = couplet.v1;

/** A table being served. */
export interface ServedTable {
  /** Where it came from: a path, or `built in`. */
  readonly file: string;
  /** 32 bytes. */
  readonly sha256: Uint8Array;
  readonly message: v1.DecayTables;
}

/** A parent being served, with all that its calls need made ready. */
export interface ServedParent {
  readonly table: ServedTable;
  readonly name: string;
  readonly message: v1.Parent;
  readonly daughters: readonly v1.Hadron.$Properties[];
  readonly evaluator: ParentEvaluator;
  /** Sums of parts per 10^9 up to and with each row. */
  readonly cumulativeParts: Float64Array;
}

/**
 * The tables of one moment, never changed: a call takes them once and keeps them, while a replacement makes new ones.
 */
export class Served {
  readonly #byName = new Map<string, ServedParent[]>();
  readonly #byNumber = new Map<number, ServedParent[]>();

  constructor(readonly tables: readonly ServedTable[]) {
    for (const parent of tables.flatMap(parentsOf)) {
      append(this.#byName, parent.name, parent);
      const number = parent.message.hadron.mcNumber;
      if (number != null) append(this.#byNumber, number, parent);
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

  #found(key: v1.ParentKey.$Properties | null | undefined): readonly ServedParent[] {
    if (key?.name != null) return this.#byName.get(key.name) ?? [];
    if (key?.mcNumber != null) return this.#byNumber.get(key.mcNumber) ?? [];
    return [];
  }

  #refusal(
    key: v1.ParentKey.$Properties | null | undefined,
    digest: Uint8Array,
    found: readonly ServedParent[],
  ): Error {
    const served = this.tables.map((table) => `${hex(table.sha256)} (${table.file})`).join(", ");
    if (digest.length > 0 && !this.tables.some((table) => sameBytes(table.sha256, digest))) {
      return new TableError(
        `parent.table_sha256: expected the digest of a served table, got ${hex(digest)}. Served: ${served}. Tables may have been replaced; list them again.`,
      );
    }
    if (key?.name == null && key?.mcNumber == null) {
      return new InputError(
        "parent: expected a name or a Monte Carlo number, got neither. Set one of the two.",
      );
    }
    const label = key.name != null ? JSON.stringify(key.name) : String(key.mcNumber);
    if (found.length > 1 && digest.length === 0) {
      return new InputError(
        `parent: expected a parent of one table, got ${label}, which ${found.length} tables have. Set table_sha256 to one of: ${served}.`,
      );
    }
    const near = nearestNames(key.name ?? "", [...this.#byName.keys()]);
    const mend = near.length > 0 ? `Nearest: ${near.join(", ")}.` : "List the tables for their parents.";
    return new InputError(`parent: expected a parent of the tables served, got ${label}. ${mend}`);
  }
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

function parentsOf(table: ServedTable): ServedParent[] {
  const { parents, externals } = table.message;
  const hadrons = new Map(
    [...externals, ...parents.map(({ hadron }) => hadron)].map((hadron) => [hadron.name ?? "", hadron]),
  );
  return parents.map((message) => {
    const evaluator = closedFormEvaluator(message, hadrons);
    requireIdentity("served parent", evaluator.rowCount === message.rows.length, () => "rows do not match");
    const names = new Set(message.rows.flatMap((row) => (row.daughters ?? []).map(({ name }) => name ?? "")));
    let sum = 0;
    return {
      table,
      name: message.hadron.name ?? "",
      message,
      daughters: [...names].flatMap((name) => hadrons.get(name) ?? []),
      evaluator,
      cumulativeParts: Float64Array.from(message.rows, (row) => {
        sum += row.partsPerBillion ?? 0;
        return sum;
      }),
    };
  });
}
