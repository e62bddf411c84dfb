import { partsPerBillion, WHOLE } from "../completion/parts-per-billion.js";
import { InputError } from "../errors.js";
import type { couplet } from "../gen/couplet.js";
import { decayLine, infoLine, massLine, modeLine } from "./export-accord-lines.js";
import { type FinalState, FinalStateFinder, type FinalStates } from "./export-accord-modes.js";
import { HadronNumbers, type OwnNumbers } from "./export-numbers.js";

type Parent = couplet.v1.Parent.$Properties;

/** How tables become text of the accord. */
export interface AccordOptions {
  /** Numbers for hadrons that have none in the published scheme. */
  readonly numbers: OwnNumbers;
  /** Scale the modes of a parent up to 1 where a part of its width has no final state; otherwise that is refused. */
  readonly rescale: boolean;
}

const GEV_PER_MEV = 1e-3;

/**
 * Decay tables as text of the open Les Houches accord: blocks DCINFO and MASS, and a DECAY block for each parent.
 *
 * Fractions are those at the nominal mass, in parts per 10^9, so that the printed digits add up to exactly 1. Modes are
 * sorted by fraction, daughters by |number|. An antiparticle has no block of its own, since the accord takes it from
 * the particle's. What is not written is named in a comment.
 *
 * Source: P. Skands et al., JHEP 07 (2004) 036, arXiv:hep-ph/0311123, section 3 (provenance: memory).
 * @param file - the file's name, for messages
 * @throws InputError naming hadrons without a number, or parents with a part of their width that has no final state
 */
export function exportAccord(tables: couplet.v1.DecayTables, file: string, options: AccordOptions): string {
  const hadrons = [...tables.parents.map(({ hadron }) => hadron!), ...tables.externals];
  const numbers = new HadronNumbers(hadrons, options.numbers);
  const finder = new FinalStateFinder(tables.parents, numbers);
  const found = tables.parents.map((parent) => ({ parent, ...finder.of(parent) }));
  const written = found.filter(({ states }) => states.length > 0);
  const names = written.flatMap(({ parent, states }) => [
    parent.hadron!.name!,
    ...states.flatMap(({ daughters }) => daughters),
  ]);
  numbers.requireAll(names, file);
  if (!options.rescale) requireWhole(written, file);
  const lines = [
    ...headLines(tables),
    ...massLines(names, numbers),
    ...found.flatMap((each) => parentLines(each, tables.parents, numbers)),
  ];
  return `${lines.map(ascii).join("\n")}\n`;
}

/** Only what a column of the accord may hold: no line breaks, no letters beyond ASCII. */
function ascii(line: string): string {
  return line.replace(/[^\x20-\x7e]/g, "?");
}

function headLines({ header }: couplet.v1.DecayTables): string[] {
  const [program, ...version] = (header?.producer ?? "").split(" ");
  return [
    `# ${header?.title}`,
    "# Widths in GeV, fractions at nominal masses. Waves, errors and line shapes are in the file this was made from.",
    "BLOCK DCINFO   # the program the tables are from",
    infoLine(1, program ?? ""),
    infoLine(2, version.join(" ")),
    ...(header?.cautions ?? []).map((caution) => infoLine(3, caution)),
  ];
}

/** One entry for each particle; an antiparticle has the mass of its particle. */
function massLines(names: readonly string[], numbers: HadronNumbers): string[] {
  const entries = new Map<number, string>();
  // Particles last, so that theirs is the mass that stays.
  const byNumber = [...new Set(names)].sort((a, b) => numbers.of(a)! - numbers.of(b)!);
  for (const name of byNumber) {
    const id = Math.abs(numbers.of(name)!);
    const particle = numbers.of(name)! < 0 ? numbers.conjugateName(name) : name;
    entries.set(id, massLine(id, numbers.massMeV(name) * GEV_PER_MEV, particle));
  }
  const sorted = [...entries].sort(([a], [b]) => a - b).map(([, line]) => line);
  return ["BLOCK MASS   # in GeV", ...sorted];
}

function parentLines(
  { parent, states, leftOut }: FinalStates & { readonly parent: Parent },
  parents: readonly Parent[],
  numbers: HadronNumbers,
): string[] {
  const { name, antiparticle } = parent.hadron!;
  const id = numbers.of(name!);
  const notWritten = leftOut.map(({ row, reason }) => `# not written: ${row} (${reason})`);
  if (states.length === 0) return ["#", `# ${name}: no table, since no mode is left`, ...notWritten];
  const hasParticle = parents.some(({ hadron }) => hadron?.name === antiparticle);
  if (id! < 0 && hasParticle) return ["#", `# ${name} (${id}): by conjugation from ${antiparticle}`];
  const missing = WHOLE - states.reduce((sum, { parts }) => sum + parts, 0);
  const scaled =
    missing < 0.5
      ? []
      : [`# scaled up to 1 from ${((WHOLE - missing) / WHOLE).toFixed(9)}: the rest has no final state`];
  return [
    "#",
    ...scaled,
    decayLine(id!, (parent.totalWidth ?? 0) * GEV_PER_MEV, name!),
    "#          BR         NDA      ID1       ID2",
    ...modeLines(states, numbers),
    ...notWritten,
  ];
}

/** Modes with fractions that add up to exactly 1, equal sets of daughters taken together. */
function modeLines(states: readonly FinalState[], numbers: HadronNumbers): string[] {
  const modes = new Map<string, { ids: number[]; parts: number; comment: string }>();
  for (const { parts, daughters, comment } of states) {
    const ids = daughters.map((name) => numbers.of(name)!).sort(byDecreasingSize);
    const known = modes.get(ids.join());
    modes.set(ids.join(), {
      ids,
      parts: parts + (known?.parts ?? 0),
      comment: known === undefined ? comment : `${known.comment}; ${comment}`,
    });
  }
  const list = [...modes.values()];
  const total = list.reduce((sum, { parts }) => sum + parts, 0);
  const largest = list.reduce((best, { parts }, k) => (parts > list[best]!.parts ? k : best), 0);
  const whole = partsPerBillion(
    list.map(({ parts }) => parts / total),
    largest,
  );
  return list
    .map((mode, k) => ({ ...mode, whole: whole[k]! }))
    .filter((mode) => mode.whole > 0)
    .sort((a, b) => b.whole - a.whole)
    .map((mode) => modeLine(mode.whole / WHOLE, mode.ids, mode.comment));
}

/** By decreasing |id|, a particle before its antiparticle. */
function byDecreasingSize(a: number, b: number): number {
  return Math.abs(b) - Math.abs(a) || b - a;
}

function requireWhole(found: readonly (FinalStates & { readonly parent: Parent })[], file: string): void {
  const lines = found.flatMap(({ parent, leftOut }) => {
    const rows = leftOut.filter(({ parts }) => parts > 0.5);
    if (rows.length === 0) return [];
    const percent = (100 * rows.reduce((sum, { parts }) => sum + parts, 0)) / WHOLE;
    const listed = rows.map(({ row, reason }) => `${row} (${reason})`).join(", ");
    return [`  ${parent.hadron?.name}: ${percent.toFixed(2)} % in ${listed}`];
  });
  if (lines.length === 0) return;
  throw new InputError(
    [
      `${file}: expected final states for the whole width of every parent, since the accord's fractions add up to 1; got a part without any for`,
      ...lines,
      "  Complete the study, or give --rescale to scale the other modes up to 1.",
    ].join("\n"),
  );
}
