import type { Parent } from "../model/model.js";
import { otherRows } from "./other-rows.js";
import type { Predictions } from "./predictions.js";
import { leadingWave, type World } from "./replicas.js";
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
    const own = [...completed.estimates, ...(completed.remainder === undefined ? [] : [completed.remainder])];
    const byReplica = this.worlds.map((world, replica) => {
      const theirs = world.entries(parent, parentIndex, entries);
      const { widthsMeV } = otherRows(parent, theirs, world.totalMeV(parent), completed);
      return own.map(({ widthMeV }, k) => {
        const [size, otherSize] =
          widthMeV.value === 0 && widthsMeV[k] === 0
            ? this.#closedSizes(world, parent, k, entries[k])
            : [widthMeV.value, widthsMeV[k]!];
        if (size > 0) return Math.fround(otherSize / size);
        if (otherSize > 0) this.#unreachable[replica]!++;
        return 1;
      });
    });
    const rows = table.rows.map((row, k) => {
      // All rows that share a remainder have its ratio.
      const ratios = byReplica.map((ofRows) => ofRows[Math.min(k, own.length - 1)]!);
      return ratios.every((ratio) => ratio === 1) ? row : { ...row, replicaRatios: ratios };
    });
    return { ...table, rows };
  }

  #closedSizes(world: World, parent: Parent, k: number, entry: Entry | undefined): [number, number] {
    if (entry?.kind !== "predicted") return [0, 0];
    const channel = parent.channels[k]!;
    const square = world.closedSquare(channel);
    if (square === undefined) return [0, 0];
    const wave = leadingWave(this.predictions, channel);
    return [this.predictions.channels[channel]!.amplitudes[wave]! ** 2, square];
  }
}
