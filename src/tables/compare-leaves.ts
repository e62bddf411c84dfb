import { formatExact } from "./exact-message.js";

/** What two tables can differ in: a number with its errors, a list of numbers, or a text; a list of texts is one text. */
export type Leaf =
  | { readonly kind: "number"; readonly value: number; readonly plus: number; readonly minus: number }
  | { readonly kind: "list"; readonly values: readonly number[] }
  | { readonly kind: "text"; readonly text: string; readonly entries?: readonly string[] };

/** Leaves by their path within an item, e.g. `fraction`, `waves[L=2 S=1/2].re`. */
export type Leaves = ReadonlyMap<string, Leaf>;

type Json = unknown;
type JsonObject = Readonly<Record<string, Json>>;

/** Integers that are labels: a difference in them has no size. */
const LABELS = [
  ...[
    "mcNumber",
    "twoJ",
    "parity",
    "charge",
    "baryonNumber",
    "strangeness",
    "charm",
    "threeY",
    "twoI",
    "twoI3",
  ],
  ...["twoL", "twoS", "schemaMinor", "ndf", "used", "minimum", "otherMinima", "sign", "matrixSign", "p", "q"],
  ...["copy", "row", "column", "phase"],
];

/**
 * The leaves of a message as canonical JSON, without regard to the order of its lists.
 *
 * A value with its errors is one leaf, the errors from data and from breaking in quadrature; an exact number is a text;
 * a packed list of numbers is one leaf, and one of logarithms is read as what they are the logarithms of.
 * @param skip - names of fields of the outermost message that are left out
 */
export function leavesOf(message: JsonObject, skip: readonly string[] = []): Leaves {
  const leaves = new Map<string, Leaf>();
  const kept = Object.fromEntries(Object.entries(message).filter(([name]) => !skip.includes(name)));
  collect(kept, "", leaves);
  return leaves;
}

/** Lists of random draws: the numbers and errors they were drawn from are compared, and they are not. */
const SAMPLES: readonly string[] = ["replicaRatios"];

function collect(value: Json, path: string, leaves: Map<string, Leaf>): void {
  if (Array.isArray(value)) collectList(value, path, leaves);
  else if (isObject(value)) collectObject(value, path, leaves);
  else if (typeof value === "number" && !LABELS.includes(fieldOf(path))) leaves.set(path, numberLeaf(value));
  else if (value !== null && value !== undefined) leaves.set(path, { kind: "text", text: String(value) });
}

function collectList(list: readonly Json[], path: string, leaves: Map<string, Leaf>): void {
  if (list.length === 0) return;
  if (list.every((entry) => typeof entry === "number")) {
    const values = path.endsWith("logWidths") ? list.map(Math.exp) : list;
    leaves.set(path, { kind: "list", values });
  } else if (list.every((entry) => typeof entry === "string")) {
    const entries = [...list].sort();
    leaves.set(path, { kind: "text", text: entries.join("; "), entries });
  } else {
    const keys = distinct(list.map((entry) => keyOf(entry)));
    for (const [k, entry] of list.entries()) collect(entry, `${path}[${keys[k]}]`, leaves);
  }
}

function collectObject(object: JsonObject, path: string, leaves: Map<string, Leaf>): void {
  if ("numerator" in object) {
    leaves.set(path, { kind: "text", text: formatExact(object as Parameters<typeof formatExact>[0]) });
    return;
  }
  const hasValue = typeof object["value"] === "number";
  const taken = hasValue ? ["value", "plus", "minus", "breaking", "error"] : [];
  if (hasValue) leaves.set(path, estimateLeaf(object));
  for (const [name, inner] of Object.entries(object)) {
    if (taken.includes(name) || SAMPLES.includes(name)) continue;
    const own = path === "" ? name : `${path}.${name}`;
    const error = object[`${name}Error`];
    const isError = name.endsWith("Error") && name.slice(0, -"Error".length) in object;
    if (typeof inner === "number" && typeof error === "number") leaves.set(own, numberLeaf(inner, error));
    else if (!isError) collect(inner, own, leaves);
  }
}

function numberLeaf(value: number, error = 0): Leaf {
  return { kind: "number", value, plus: error, minus: error };
}

function estimateLeaf(object: JsonObject): Leaf {
  const of = (name: string) => (typeof object[name] === "number" ? (object[name] as number) : 0);
  const error = (side: string) => Math.hypot(of(side in object ? side : "error"), of("breaking"));
  return { kind: "number", value: of("value"), plus: error("plus"), minus: error("minus") };
}

/** What tells the entries of a list apart, so that their order does not matter. */
function keyOf(entry: Json): string {
  if (!isObject(entry)) return String(entry);
  const { name, id, quantity, reduced, hadron, multiplet, states, twoL, twoS, row, column } = entry;
  // A component of a coupling is told by the multiplets of its pure states.
  if (Array.isArray(states)) return states.map((state) => state.multiplet).join(" ");
  if (twoL !== undefined && name === undefined && id === undefined) return `2L=${twoL} 2S=${twoS}`;
  if (row !== undefined && column !== undefined) return `${row},${column}`;
  const state = entry["state"] === undefined ? "" : ` ${JSON.stringify(entry["state"])}`;
  return String(name ?? id ?? quantity ?? reduced ?? hadron ?? multiplet ?? "") + state;
}

/** The last name in a path. */
export function fieldOf(path: string): string {
  return path.slice(path.lastIndexOf(".") + 1);
}

/** Texts with a counter behind those that come again. */
export function distinct(texts: readonly string[]): string[] {
  const seen = new Map<string, number>();
  return texts.map((text) => {
    const count = (seen.get(text) ?? 0) + 1;
    seen.set(text, count);
    return count === 1 ? text : `${text} #${count}`;
  });
}

function isObject(value: Json): value is JsonObject {
  return typeof value === "object" && value !== null && !Array.isArray(value);
}
