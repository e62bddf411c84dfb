import { distinct, type Leaves, leavesOf } from "./compare-leaves.js";

/** What an item is, in the order a comparison is told: how the tables were made, then what is in them. */
export const ITEM_KINDS = [
  "header",
  "fit",
  "measurement",
  "parameter",
  "other minimum",
  "parent",
  "row",
  "external hadron",
  "conventions of matrices",
  "reduced coupling",
  "isospin channel",
  "vertex",
  "isospin constant",
  "irrep",
  "coefficients between states",
  "factor",
  "state coefficient",
] as const;
/** What an item of a table is, e.g. `row` or `reduced coupling`. */
export type ItemKind = (typeof ITEM_KINDS)[number];

/** A part of a table that has a name of its own. */
export interface Item {
  readonly kind: ItemKind;
  /** Unique within its kind. */
  readonly name: string;
  /** Items of one group are measured by the same scale: the rows of one parent. */
  readonly group: string;
  readonly leaves: Leaves;
}

type JsonObject = Readonly<Record<string, unknown>>;

/** Every item of decay tables as canonical JSON; nothing is left out but the digest and the study's text. */
export function decayItems(tables: JsonObject): Item[] {
  const parents = objects(tables["parents"]);
  return [
    ...madeFrom(tables),
    ...parents.flatMap((parent) => {
      const name = textOf((parent["hadron"] as JsonObject)["name"]);
      const head = { kind: "parent" as const, name, group: name, leaves: leavesOf(parent, ["rows"]) };
      return [head, ...items("row", objects(parent["rows"]), ({ id }) => textOf(id), name)];
    }),
    ...items("external hadron", objects(tables["externals"]), ({ name }) => textOf(name)),
  ];
}

/** Every item of coupling tables as canonical JSON. */
export function couplingItems(tables: JsonObject): Item[] {
  const matrices = tables["matrixConvention"];
  const vertex = ({ id, twoL, twoS }: JsonObject) => `${id} 2L=${twoL} 2S=${twoS}`;
  return [
    ...madeFrom(tables),
    ...items("conventions of matrices", matrices === undefined ? [] : [matrices as JsonObject], ({ id }) =>
      textOf(id),
    ),
    ...items("reduced coupling", objects(tables["reduced"]), ({ name }) => textOf(name)),
    ...items("isospin channel", objects(tables["isospin"]), vertex, "isospin"),
    ...items("vertex", objects(tables["charged"]), vertex, "charged"),
    ...objects(tables["isospinLagrangians"]).flatMap((lagrangian) =>
      items(
        "isospin constant",
        objects(lagrangian["constants"]),
        ({ name }) =>
          `${lagrangian["from"]} -> ${(lagrangian["to"] as string[]).join(" ")} 2L=${lagrangian["twoL"]} g(${name})`,
      ),
    ),
  ];
}

/** Header and fit, which all tables have. */
function madeFrom(tables: JsonObject): Item[] {
  const header = (tables["header"] ?? {}) as JsonObject;
  const fit = (tables["fit"] ?? {}) as JsonObject;
  const minima = objects(fit["minima"]);
  const used = minima[Number(fit["used"] ?? 0)] ?? {};
  const others = minima.filter((minimum) => minimum !== used);
  const lists = ["parameters", "pulls"];
  return [
    { kind: "header", name: "header", group: "", leaves: leavesOf(header, ["studyText"]) },
    {
      kind: "fit",
      name: "fit",
      group: "",
      leaves: new Map([...leavesOf(fit, ["minima"]), ...leavesOf(used, lists)]),
    },
    ...items("measurement", objects(used["pulls"]).map(measured), ({ quantity }) => textOf(quantity)),
    ...items("parameter", objects(used["parameters"]), ({ name }) => textOf(name)),
    ...others.map((minimum, k) => ({
      kind: "other minimum" as const,
      name: `${k + 1}`,
      group: "",
      leaves: leavesOf(minimum, ["pulls"]),
    })),
  ];
}

/** A pull with its measured number as a value, so that its errors go with it. */
function measured({ measured, ...pull }: JsonObject): JsonObject {
  return { ...pull, value: measured };
}

function items(
  kind: ItemKind,
  messages: readonly JsonObject[],
  nameOf: (message: JsonObject) => string,
  group = "",
): Item[] {
  const names = distinct(messages.map(nameOf));
  return messages.map((message, k) => ({ kind, name: names[k]!, group, leaves: leavesOf(message) }));
}

function objects(list: unknown): JsonObject[] {
  return (list ?? []) as JsonObject[];
}

function textOf(value: unknown): string {
  return String(value ?? "");
}
