import type { couplet as generated } from "../gen/couplet.js";

/** What tells vertex families apart; reduced couplings and isospin Lagrangians carry it too. */
export interface FamilyKey {
  readonly from?: string | null;
  readonly to?: string[] | null;
  readonly twoL?: number | null;
  readonly twoS?: number | null;
}

/** The vertex families of a coupling table, in its order. */
export function familiesOf(tables: generated.v1.CouplingTables): generated.v1.VertexFamily.$Properties[] {
  const byName = new Map<string, generated.v1.VertexFamily.$Properties>();
  for (const { from, to, twoL, twoS } of tables.reduced) {
    const family = { from, to, twoL, twoS };
    if (!byName.has(familyName(family))) byName.set(familyName(family), family);
  }
  return [...byName.values()];
}

/** A family in words, e.g. `baryon-decuplet -> baryon-octet pseudoscalar-octet, 2L=2 2S=1`. */
export function familyName({ from, to, twoL, twoS }: FamilyKey): string {
  const wave = twoL == null && twoS == null ? "" : `, 2L=${twoL ?? "?"} 2S=${twoS ?? "?"}`;
  return `${from ?? "?"} -> ${(to ?? []).join(" ")}${wave}`;
}

/** Whether a vertex has a component between pure states of a family's multiplets, in its wave. */
export function isOfFamily(coupling: generated.v1.Coupling.$Properties, family: FamilyKey): boolean {
  if (coupling.twoL !== family.twoL || coupling.twoS !== family.twoS) return false;
  const wanted = [family.from, ...(family.to ?? [])].join();
  return (coupling.components ?? []).some(
    ({ states }) => (states ?? []).map(({ multiplet }) => multiplet).join() === wanted,
  );
}
