import type { Hadron } from "../hadrons/hadron.js";
import { channelName } from "../model/channel-names.js";
import { conjugateState } from "../su3/state.js";
import type { ParentTable, Row } from "./tables.js";

/**
 * The tables with a table of its own for every antiparticle that has none, each after the particle's.
 *
 * Charge conjugation keeps widths, and in every wave the amplitude up to one sign for all waves of a parent: spins and
 * orbital motion are not touched. So a conjugate row has the same numbers.
 */
export function withAntiparticles(tables: readonly ParentTable[]): ParentTable[] {
  const known = new Set(tables.map(({ parent }) => parent.hadron.name));
  return tables.flatMap((table) => {
    const { antiparticle } = table.parent.hadron;
    return antiparticle === null || known.has(antiparticle) ? [table] : [table, conjugateTable(table)];
  });
}

function conjugateTable(table: ParentTable): ParentTable {
  const hadron = antihadron(table.parent.hadron);
  const { name } = table.parent.hadron;
  return {
    ...table,
    parent: { ...table.parent, hadron },
    rows: table.rows.map((row) => conjugateRow(hadron.name, row)),
    warnings: table.warnings.map((text) => text.replaceAll(name, hadron.name)),
  };
}

function conjugateRow(parent: string, row: Row): Row {
  const { isospin: _, ...rest } = row;
  const daughters = row.daughters.map(antihadron);
  const names = daughters.map(({ name }) => name);
  return { ...rest, daughters, id: channelName(parent, names.length === 0 ? ["(remainder)"] : names) };
}

/**
 * The antiparticle of a hadron, or the hadron if it is its own.
 *
 * Its flavour content is that of the conjugate states, in the phases of `conjugateState`.
 */
export function antihadron(hadron: Hadron): Hadron {
  const { antiparticle, name, mcNumber, mcAliases, parity, baryonNumber, twoJ, content } = hadron;
  if (antiparticle === null) return hadron;
  const opposite = (n: number) => (n === 0 ? 0 : -n);
  return {
    ...hadron,
    name: antiparticle,
    antiparticle: name,
    mcNumber: mcNumber === null ? null : -mcNumber,
    mcAliases: mcAliases.map((alias) => -alias),
    parity: twoJ % 2 === 0 ? parity : (-parity as 1 | -1),
    charge: opposite(hadron.charge),
    baryonNumber: opposite(baryonNumber),
    strangeness: opposite(hadron.strangeness),
    charm: opposite(hadron.charm),
    content: content.map(({ leg, weight }) => {
      const { state, phase } = conjugateState(leg.state);
      const multiplet = baryonNumber === 0 && hadron.charm === 0 ? leg.multiplet : `anti-${leg.multiplet}`;
      return { leg: { multiplet, state }, weight: phase * weight };
    }),
  };
}
