import { TableError } from "../errors.js";
import { couplet } from "../gen/couplet.js";
import { refuse } from "../require.js";
import { type HadronsByName, rowsEvaluator } from "./evaluate-rows.js";

import v1 = couplet.v1;

/** Weights of one parent's decays, one for each replica of its tables. */
export interface ReplicaWeights {
  /**
   * The weights of a decay by one row, in the order of `DecayTables.replicas`: its fraction in each replica over that in the
   * table, >= 0.
   *
   * @param row - id of the row
   * @param massMeV - the parent's mass in this decay; the nominal one by default
   * @throws InputError for a row that the parent does not have, or a mass as `rowsEvaluator` does
   */
  of(row: string, massMeV?: number): number[];
}

/**
 * The weights that turn a simulation made with decay tables into one made with a replica of them, for one parent.
 *
 * With r the ratios of a replica and width_j(m) the partial widths at the parent's mass m, the weight of row i is
 * r_i total(m) / sum_j r_j width_j(m), and 0 where no width is left. An antiparticle without rows of its own takes those
 * of its particle.
 * @param replicas - how many the tables have
 * @param hadrons - of the tables, by `tableHadrons`
 * @throws TableError for a row whose ratios are not one for each replica, finite and >= 0, and as `rowsEvaluator` does
 */
export function replicaWeights(
  parent: v1.Parent.$Properties,
  hadrons: HadronsByName,
  replicas: number,
): ReplicaWeights {
  const rows = parent.rows ?? [];
  const evaluator = rowsEvaluator(parent, hadrons);
  const ratios = rows.map((row) => checkedRatios(row, replicas));
  const widths = new Array<number>(rows.length).fill(0);
  return {
    of(row, massMeV = parent.hadron?.mass ?? Number.NaN) {
      const index = rows.findIndex(({ id }) => id === row);
      if (index < 0) refuse("row", `the id of a row of ${parent.hadron?.name}`, row);
      const total = evaluator.widthsInto(massMeV, widths, 0);
      return Array.from({ length: replicas }, (_, k) => {
        const sum = widths.reduce((all, width, j) => all + (ratios[j]?.[k] ?? 1) * width, 0);
        return sum > 0 ? ((ratios[index]?.[k] ?? 1) * total) / sum : 0;
      });
    },
  };
}

/** The weights of a chain of decays, replica by replica: the products of those of its decays. */
export function chainWeights(decays: readonly (readonly number[])[]): number[] {
  const [first = [], ...others] = decays;
  return first.map((weight, k) => others.reduce((product, other) => product * other[k]!, weight));
}

function checkedRatios(
  { id, replicaRatios }: v1.Row.$Properties,
  replicas: number,
): readonly number[] | undefined {
  if (!replicaRatios?.length) return undefined;
  if (replicaRatios.length === replicas && replicaRatios.every((ratio) => ratio >= 0 && ratio < Infinity))
    return replicaRatios;
  throw new TableError(`${id}: expected one finite ratio >= 0 for each of ${replicas} replicas, got others`);
}
