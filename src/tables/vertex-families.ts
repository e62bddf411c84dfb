import { couplet } from "../gen/couplet.js";

import v1 = couplet.v1;

/** Rows of couplings that share reduced couplings in one partial wave. */
export interface VertexFamilyRows {
  /** `octet -> baryon-octet pseudoscalar-octet`; several where hadrons mix. */
  readonly families: readonly string[];
  /** In the order given; at least one. */
  readonly rows: readonly v1.Coupling.$Properties[];
}

/**
 * Couplings by vertex family and wave, in the order of their first rows. A mixed hadron couples in several families;
 * these are then one group.
 */
export function byVertexFamily(rows: readonly v1.Coupling.$Properties[]): VertexFamilyRows[] {
  let groups: { readonly keys: readonly string[]; readonly at: readonly number[] }[] = [];
  for (const [index, row] of rows.entries()) {
    const keys = familiesOf(row).map((family) => `${row.twoL} ${row.twoS} ${family}`);
    const shared = groups.filter((group) => group.keys.some((key) => keys.includes(key)));
    const joined = {
      keys: [...new Set([...shared.flatMap((group) => group.keys), ...keys])],
      at: [...shared.flatMap(({ at }) => at), index],
    };
    groups = [...groups.filter((group) => !shared.includes(group)), joined];
  }
  return groups
    .map(({ at }) => [...at].sort((a, b) => a - b))
    .sort(([a], [b]) => a! - b!)
    .map((at) => at.map((index) => rows[index]!))
    .map((own) => ({ families: [...new Set(own.flatMap(familiesOf))], rows: own }));
}

function familiesOf({ components }: v1.Coupling.$Properties): string[] {
  return (components ?? []).map(({ states }) => {
    const [from, ...to] = (states ?? []).map(({ multiplet }) => multiplet ?? "");
    return `${from} -> ${to.join(" ")}`;
  });
}
