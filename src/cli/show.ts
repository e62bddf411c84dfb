import { InputError } from "../errors.js";
import { couplet } from "../gen/couplet.js";
import { nearestNames } from "../nearest-names.js";
import { canonicalJson } from "../tables/canonical-json.js";
import { decodeCouplings } from "../tables/decode-couplings.js";
import { decodeDecays } from "../tables/decode-decays.js";
import { decodeFactors } from "../tables/decode-factors.js";
import { readInput } from "../tables/read-input.js";
import { significant, withError } from "../tables/rounding.js";
import { checkSeal, digestOf, type TableKind } from "../tables/sealed-bytes.js";
import { describeCouplings } from "./describe-couplings.js";
import { describeRow, rowNamed } from "./describe-row.js";
import { counted, degreesText } from "./labels.js";
import { totalWidthText, totalWords, withErrors } from "./parent-words.js";
import { print, printJson } from "./print.js";
import { textTable } from "./text-table.js";

import v1 = couplet.v1;

/** Options of `couplet show` as the command line gives them. */
export interface ShowOptions {
  readonly parent?: string;
  readonly row?: string;
  readonly json?: true;
}

/** `couplet show`: what a table file holds. */
export function runShow(path: string, options: ShowOptions): void {
  const bytes = readInput(path);
  const kind = checkSeal(bytes, path);
  if (options.row !== undefined) {
    const found = rowNamed(decodeDecays(bytes, path), options.row, path);
    if (options.json) printJson(canonicalJson("couplet.v1.Row", found.row));
    else print(describeRow(found));
  } else if (options.parent !== undefined) {
    const tables = decodeDecays(bytes, path);
    const parent = parentNamed(tables, options.parent, path);
    if (options.json) printJson(canonicalJson("couplet.v1.Parent", parent));
    else print(describeHeader(tables, path, digestOf(bytes)) + describeParent(parent));
  } else if (options.json) {
    printJson(canonicalJson(kind, decoded(kind, bytes, path)));
  } else if (kind === "couplet.v1.DecayTables") {
    const tables = decodeDecays(bytes, path);
    print(describeHeader(tables, path, digestOf(bytes)) + tables.parents.map(describeParent).join(""));
  } else if (kind === "couplet.v1.CouplingTables") {
    const tables = decodeCouplings(bytes, path);
    print(`${describeCouplings(tables, path)}sha256 ${digestOf(bytes)}\n`);
  } else print(describeFactorFile(decodeFactors(bytes, path), path, digestOf(bytes)));
}

function decoded(kind: TableKind, bytes: Uint8Array, path: string): object {
  if (kind === "couplet.v1.DecayTables") return decodeDecays(bytes, path);
  if (kind === "couplet.v1.CouplingTables") return decodeCouplings(bytes, path);
  return decodeFactors(bytes, path);
}

function parentNamed({ parents }: v1.DecayTables, name: string, path: string): v1.Parent {
  const number = Number(name);
  const found =
    parents.find(({ hadron }) => hadron?.name === name || hadron?.mcNumber === number) ??
    parents.find(({ hadron }) => hadron?.mcAliases?.includes(number));
  if (found !== undefined) return found;
  const names = parents.map(({ hadron }) => hadron?.name ?? "");
  const near = nearestNames(name, names);
  const mend = near.length > 0 ? `Nearest: ${near.join(", ")}` : `There are: ${names.join(", ")}`;
  throw new InputError(`${path}: expected a parent of this table, got ${JSON.stringify(name)}. ${mend}.`);
}

function describeHeader(
  { header, fit, parents, externals, leftOpen, replicas }: v1.DecayTables,
  path: string,
  digest: string,
): string {
  const best = fit?.minima?.[fit.used ?? 0];
  const lines = [
    `${path}: ${header.title}`,
    `decay tables by ${header.producer}, schema 1.${header.schemaMinor}, sha256 ${digest.slice(0, 16)}..., masses and widths in ${header.unit}`,
    `convention ${header.convention}; ${counted(parents.length, "parent")}; daughters to be known elsewhere: ${externalNames(externals, parents)}`,
    closureText(leftOpen, parents),
    `fit: minimum ${(fit?.used ?? 0) + 1} of ${fit?.minima?.length ?? 0} (mirrors: ${fit?.mirrors}), chi2 ${best?.chi2?.toFixed(2)} with ${degreesText(best?.ndf)}`,
    ...(best?.parameters ?? []).map(
      ({ name, value, error, unit }) =>
        `  ${name}  ${withError(value ?? 0, error ?? 0)}${unit === "1" ? "" : ` ${unit}`}`,
    ),
    ...replicaLines(replicas),
    ERROR_WORDS,
    ...header.cautions.map((caution) => `caution: ${caution}`),
    ...header.notes.map((note) => `note: ${note}`),
  ];
  return `${lines.join("\n")}\n`;
}

/** Daughters that are no parents here, of rows that can happen: open ones, and those that the line shape opens. */
function externalNames(externals: readonly v1.Hadron.$Properties[], parents: readonly v1.Parent[]): string {
  const happening = parents.flatMap(({ rows }) =>
    rows.filter((row) => row.kinematics !== v1.Kinematics.KINEMATICS_CLOSED || row.integratedFraction),
  );
  const names = new Set(happening.flatMap(({ daughters }) => (daughters ?? []).map(({ name }) => name)));
  return externals.flatMap(({ name }) => (name != null && names.has(name) ? [name] : [])).join(", ");
}

/** What the errors in the parents' tables are. */
export const ERROR_WORDS =
  "errors of fractions, in percent of the total width, each another question: +- of the data; br. breaking of the symmetry; min. to another minimum; mod. between width models";

/** How many replicas of which kind there are; nothing for a table without. */
function replicaLines(replicas: readonly v1.Replica.$Properties[]): string[] {
  if (replicas.length === 0) return [];
  const { REPLICA_PART_DATA, REPLICA_PART_BREAKING, REPLICA_PART_BRANCH, REPLICA_PART_MODEL } =
    v1.ReplicaPart;
  const count = (wanted: v1.ReplicaPart) => replicas.filter(({ part }) => part === wanted).length;
  const unreachable = replicas.filter(({ unreachableRows }) => unreachableRows).length;
  const seed = replicas.find((replica) => replica.seed != null)?.seed;
  return [
    `${counted(replicas.length, "replica")}: ${count(REPLICA_PART_DATA)} of the data and ${count(REPLICA_PART_BREAKING)} of breaking (seed ${seed}), ${count(REPLICA_PART_BRANCH)} of other minima, ${count(REPLICA_PART_MODEL)} of other width models${unreachable === 0 ? "" : `; ${unreachable} of them open rows that have no width here, which no weight can bring in`}`,
  ];
}

/** What a generator must still decay by itself, and what it cannot decay. */
function closureText(leftOpen: readonly string[], parents: readonly v1.Parent[]): string {
  const open =
    leftOpen.length === 0
      ? "closed: every daughter has rows, lives long or is stable"
      : `left open, to be decayed by the generator: ${leftOpen.join(", ")}`;
  const undecayable = parents.filter(({ rows }) =>
    rows.some(({ flags }) => (flags ?? []).includes(v1.Flag.FLAG_UNDECAYABLE)),
  );
  const names = undecayable.map(({ hadron }) => hadron?.name).join(", ");
  return `cascades ${open}${names === "" ? "" : `; parents with a remainder that names no daughters: ${names}`}`;
}

const ORIGIN_WORDS = ["?", "measured", "predicted", "remainder"];
const FLAG_WORDS = [
  "?",
  "isospin split",
  "undecayable",
  "near threshold",
  "small amplitude",
  "folded",
  "adjusted",
  "weak",
];

function aliasText(aliases: readonly number[]): string {
  return aliases.length === 0 ? "" : ` (also ${aliases.join(", ")})`;
}

/**
 * One parent's table in words: fractions in percent with errors from data and, where there are any, from breaking (`br.`),
 * from the choice of the minimum (`min.`) and from that of the width model (`mod.`).
 */
export function describeParent(parent: v1.Parent): string {
  const { hadron } = parent;
  const mc =
    hadron?.mcNumber == null
      ? "no Monte Carlo number"
      : `Monte Carlo number ${hadron.mcNumber}${aliasText(hadron.mcAliases ?? [])}`;
  const head = `\n${hadron?.name}  mass ${significant(hadron?.mass ?? 0, 6)} MeV, width ${totalWidthText(parent)} MeV (${totalWords(parent)})${windowText(hadron)}, ${mc}\n`;
  const rows = parent.rows.map((row) => {
    const { fraction } = row;
    const closed = row.kinematics === v1.Kinematics.KINEMATICS_CLOSED;
    const parts = [
      ["br.", fraction?.breaking],
      ["min.", fraction?.branch],
      ["mod.", fraction?.model],
    ] as const;
    return [
      row.id,
      closed
        ? "closed"
        : withErrors(percent(fraction?.value), percent(fraction?.plus), percent(fraction?.minus)),
      parts
        .flatMap(([name, part]) => (closed || !part ? [] : [`${name} ${significant(percent(part), 2)}`]))
        .join("  "),
      integratedText(row),
      significant(withoutRoundingZero(fraction?.value ?? 0) === 0 ? 0 : (row.width?.value ?? 0), 4),
      String(row.partsPerBillion),
      ORIGIN_WORDS[row.origin ?? 0]!,
      (row.flags ?? []).map((flag) => FLAG_WORDS[flag]).join(", "),
    ];
  });
  const titles = [
    "channel",
    "percent",
    "its other errors",
    "over line shape",
    "MeV",
    "parts per 10^9",
    "origin",
    "",
  ];
  return (
    head +
    textTable([titles, ...rows], { indent: 2, right: [1, 3, 4, 5] }) +
    (parent.warnings ?? []).map((w) => `  WARNING: ${w}\n`).join("")
  );
}

/** The fraction over the line shape in percent, with its errors from data; empty for a parent without line shape. */
function integratedText({ integratedFraction: value, integrated }: v1.Row.$Properties): string {
  if (value == null) return "";
  if (integrated == null) return significant(percent(value), 3);
  return withErrors(percent(value), percent(integrated.plus), percent(integrated.minus));
}

function windowText(hadron: v1.Hadron.$Properties | null | undefined): string {
  const { low, high } = hadron?.lineShape ?? {};
  return low == null || high == null ? "" : `, line shape from ${low.toFixed(0)} to ${high.toFixed(0)} MeV`;
}

function percent(fraction: number | null | undefined): number {
  return 100 * withoutRoundingZero(fraction ?? 0);
}

/** Of the total width, what is no more than the rounding of a zero. */
const ROUNDING_ZERO = 1e-12;

function withoutRoundingZero(fraction: number): number {
  return Math.abs(fraction) < ROUNDING_ZERO ? 0 : fraction;
}

function describeFactorFile(table: v1.FactorTable, path: string, digest: string): string {
  const name = (irrep: v1.Irrep.$Properties | null | undefined) => `(${irrep?.p},${irrep?.q})`;
  return (
    `${path}: isoscalar factors of ${name(table.left)} x ${name(table.right)} by ${table.producer}\n` +
    `convention ${table.convention}; copies by ${table.multiplicityRule}; sha256 ${digest.slice(0, 16)}...\n` +
    `${table.factors.length} factors that are not zero, ${table.states.length} coefficients between states\n`
  );
}
