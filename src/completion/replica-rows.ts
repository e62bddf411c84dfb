import type { Parent } from "../model/model.js";
import { otherRows } from "./other-rows.js";
import type { Predictions } from "./predictions.js";
import { leadingWaveOf, type World } from "./replicas.js";
import type { ParentTable, Replica } from "./tables.js";
import type { Completed, Entry } from "./total-width.js";

/** Replicas of tables, parent by parent: what each does to every row, and how many rows it cannot reach. */
export class ReplicaRows {
  readonly #unreachable: number[];

  constructor(
    private readonly predictions: Predictions,
    private readonly worlds: readonly World[],
  ) {
    this.#unreachable = worlds.map(() => 0);
  }

  /** The replicas, after all parents have been through `withRatios`. */
  replicas(): Replica[] {
    return this.worlds.map(({ replica }, k) => ({ ...replica, unreachableRows: this.#unreachable[k]! }));
  }

  /**
   * A parent's table whose rows have, for every replica, the ratio of the replica's partial width to the row's.
   *
   * A row that is closed at nominal masses has the ratio of its squared amplitudes in place of it; with another width
   * model that has no meaning, and the ratio is 1.
   * @param entries - of the completed parent, from which the table was made
   */
  withRatios(
    table: ParentTable,
    parentIndex: number,
    entries: readonly Entry[],
    completed: Completed,
  ): ParentTable {
    if (this.worlds.length === 0) return table;
    const { parent } = table;
    const byReplica = this.worlds.map((world, replica) => {
      const ratios = worldRatios(this.predictions, world, parent, parentIndex, entries, completed);
      this.#unreachable[replica]! += ratios.filter((ratio) => ratio === undefined).length;
      return ratios.map((ratio) => Math.fround(ratio ?? 1));
    });
    const rows = table.rows.map((row, k) => {
      // All rows that share a remainder have its ratio.
      const ratios = byReplica.map((ofRows) => ofRows[Math.min(k, ofRows.length - 1)]!);
      return ratios.every((ratio) => ratio === 1) ? row : { ...row, replicaRatios: ratios };
    });
    return { ...table, rows };
  }
}

/**
 * By entry of a parent, then the remainder if there is one: its width in another world over its own, or the ratio of the
 * squared amplitudes where it is closed; undefined where it has a width there and none here.
 */
export function worldRatios(
  predictions: Predictions,
  world: World,
  parent: Parent,
  parentIndex: number,
  entries: readonly Entry[],
  completed: Completed,
): (number | undefined)[] {
  const theirs = world.entries(parent, parentIndex, entries);
  const { widthsMeV } = otherRows(parent, theirs, world.totalMeV(parent), completed);
  const own = [...completed.estimates, ...(completed.remainder === undefined ? [] : [completed.remainder])];
  return own.map(({ widthMeV }, k) => {
    const [size, otherSize] =
      widthMeV.value === 0 && widthsMeV[k] === 0
        ? closedSizes(predictions, world, parent.channels[k], entries[k])
        : [widthMeV.value, widthsMeV[k]!];
    if (size > 0) return otherSize / size;
    return otherSize > 0 ? undefined : 1;
  });
}

function closedSizes(
  predictions: Predictions,
  world: World,
  channel: number | undefined,
  entry: Entry | undefined,
): [number, number] {
  if (entry?.kind !== "predicted" || channel === undefined) return [0, 0];
  const square = world.closedSquare(channel);
  if (square === undefined) return [0, 0];
  return [predictions.channels[channel]!.amplitudes[leadingWaveOf(predictions, channel)]! ** 2, square];
}
