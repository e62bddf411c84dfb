import { complete } from "../../src/completion/complete.js";
import type { ParentTable, Row, Tables } from "../../src/completion/tables.js";
import { fitOf } from "./coupling-studies.js";

/** A study of an invented octet with more lines at its end, such as modes and policies. */
export function octetStudy(more: string, members = ""): string {
  return `couplet: 1
title: an invented octet
multiplets:
  r:
    irrep: 8
    spinParity: 5/2-
    members:
      - { name: N(1675), place: N, mass: 1675 MeV, width: 145 +- 15 MeV }
      - { name: Sigma(1775), place: Sigma, mass: 1775 MeV, width: 120 +- 10 MeV }
${members}decays:
  - { from: r, to: [baryon-octet, pseudoscalar-octet], L: 2, model: a }
fit: { mirrors: best }
measurements:
  - { width: N(1675) -> N pi, value: 58 +- 3 MeV, source: invented }
  - { width: Sigma(1775) -> N Kbar, value: 48 +- 4 MeV, source: invented }
  - { width: Sigma(1775) -> Lambda pi, value: 20 +- 4 MeV, source: invented }
  - { width: Sigma(1775) -> Sigma pi, value: 4 +- 2 MeV, source: invented }
${more}`;
}

/** The tables of a study's text, at its best minimum. */
export function tablesOf(text: string): Tables {
  return complete(fitOf(text), 0);
}

/** The table of a parent by its name. */
export function parentOf(tables: Tables, name: string): ParentTable {
  const found = tables.parents.find(({ parent }) => parent.hadron.name === name);
  if (found === undefined) throw new Error(`no parent ${name}`);
  return found;
}

/** A row by its id. */
export function rowOf(tables: Tables, id: string): Row {
  const found = tables.parents.flatMap(({ rows }) => rows).find((row) => row.id === id);
  if (found === undefined) throw new Error(`no row ${id}`);
  return found;
}
