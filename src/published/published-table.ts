import { TableError } from "../errors.js";
import { parseRoot, type SignedRoot } from "../exact/signed-root.js";
import { type Irrep, parseIrrep } from "../su3/irrep.js";

/**
 * A block of isoscalar factors found by others, with its origin.
 *
 * `kind` is `published` for values printed in a source, `regression` for values computed by an independent program,
 * which no source vouches for. `provenance` says how a value came here: `read` in the source, from `memory` of it,
 * `common practice`, or `computed`.
 */
export interface PublishedTable {
  readonly name: string;
  readonly kind: "published" | "regression";
  readonly left: Irrep;
  readonly right: Irrep;
  readonly irrep: Irrep;
  readonly copy: number;
  /** Whether signs count; otherwise the values are magnitudes. */
  readonly signs: boolean;
  readonly source: {
    readonly authors: string;
    readonly title: string;
    readonly journal: string;
    readonly note: string;
  };
  readonly provenance: "read" | "memory" | "common practice" | "computed";
  readonly convention: string;
  readonly transcribed: string;
  readonly errata: readonly string[];
  readonly rows: readonly PublishedFactor[];
}

/** One factor of a published block; `decay` names it as the source does. */
export interface PublishedFactor {
  readonly decay: string;
  readonly threeY: number;
  readonly twoI: number;
  readonly threeY1: number;
  readonly twoI1: number;
  readonly threeY2: number;
  readonly twoI2: number;
  readonly value: SignedRoot;
}

const PROVENANCES = ["read", "memory", "common practice", "computed"];
const LABELS = ["threeY", "twoI", "threeY1", "twoI1", "threeY2", "twoI2"] as const;

/**
 * Reads one table from its parsed JSON.
 *
 * @param name - the file's name, for messages
 * @throws TableError if a key is missing or of the wrong kind; InputError if an irrep or a value does not parse
 */
export function readPublishedTable(name: string, json: unknown): PublishedTable {
  const table = requireRecord(name, json);
  const text = (key: string, from = table) => requireKind(`${name}: ${key}`, from[key], "string") as string;
  const kind = requireOneOf(`${name}: kind`, table["kind"], ["published", "regression"]);
  const provenance = requireOneOf(`${name}: provenance`, table["provenance"], PROVENANCES);
  const source = requireRecord(`${name}: source`, table["source"]);
  return {
    name,
    kind: kind as PublishedTable["kind"],
    left: parseIrrep(text("left")),
    right: parseIrrep(text("right")),
    irrep: parseIrrep(text("irrep")),
    copy: requireKind(`${name}: copy`, table["copy"], "number") as number,
    signs: requireKind(`${name}: signs`, table["signs"], "boolean") as boolean,
    source: {
      authors: text("authors", source),
      title: text("title", source),
      journal: text("journal", source),
      note: text("note", source),
    },
    provenance: provenance as PublishedTable["provenance"],
    convention: text("convention"),
    transcribed: text("transcribed"),
    errata: requireList(`${name}: errata`, table["errata"]).map(String),
    rows: requireList(`${name}: rows`, table["rows"]).map((row, i) => readFactor(`${name}: rows[${i}]`, row)),
  };
}

function readFactor(where: string, json: unknown): PublishedFactor {
  const row = requireRecord(where, json);
  const [threeY, twoI, threeY1, twoI1, threeY2, twoI2] = LABELS.map(
    (key) => requireKind(`${where}.${key}`, row[key], "number") as number,
  ) as [number, number, number, number, number, number];
  const decay = requireKind(`${where}.decay`, row["decay"], "string") as string;
  const value = parseRoot(requireKind(`${where}.value`, row["value"], "string") as string);
  return { decay, threeY, twoI, threeY1, twoI1, threeY2, twoI2, value };
}

function requireRecord(where: string, value: unknown): Record<string, unknown> {
  if (typeof value === "object" && value !== null && !Array.isArray(value))
    return value as Record<string, unknown>;
  throw new TableError(`${where}: expected an object, got ${JSON.stringify(value)}.`);
}

function requireList(where: string, value: unknown): unknown[] {
  if (Array.isArray(value)) return value;
  throw new TableError(`${where}: expected a list, got ${JSON.stringify(value)}.`);
}

function requireKind(where: string, value: unknown, kind: "string" | "number" | "boolean"): unknown {
  if (typeof value === kind && value !== "") return value;
  throw new TableError(`${where}: expected a ${kind}, got ${JSON.stringify(value)}.`);
}

function requireOneOf(where: string, value: unknown, choices: readonly string[]): string {
  if (typeof value === "string" && choices.includes(value)) return value;
  throw new TableError(`${where}: expected one of ${choices.join(", ")}, got ${JSON.stringify(value)}.`);
}
