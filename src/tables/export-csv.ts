import type * as csv from "csv-stringify/sync";
import { couplet } from "../gen/couplet.js";
import { formatExact } from "./exact-message.js";

import v1 = couplet.v1;

type Maybe<T> = T | null | undefined;
type Cell = string | number | null | undefined;

/** Columns of a table: titles, with the unit in brackets where there is one, and how a cell is found. */
type Columns<Of> = readonly (readonly [title: string, cell: (of: Of) => Cell])[];

const ORIGINS = ["", "measured", "predicted", "remainder"];
const TOTAL_ORIGINS = ["", "measured", "sum of rows"];
const KINEMATICS = ["", "open", "closed", "folded"];

interface RowOfParent {
  readonly parent: v1.Parent.$Properties;
  readonly row: v1.Row.$Properties;
}

const ROW_COLUMNS: Columns<RowOfParent> = [
  ["parent", ({ parent }) => parent.hadron?.name],
  ["parent Monte Carlo number", ({ parent }) => parent.hadron?.mcNumber],
  ["parent mass [MeV]", ({ parent }) => parent.hadron?.mass],
  ["total width [MeV]", ({ parent }) => parent.totalWidth],
  ["total width error [MeV]", ({ parent }) => parent.totalWidthError],
  ["total width error up [MeV]", ({ parent }) => parent.totalWidthPlus],
  ["total width error down [MeV]", ({ parent }) => parent.totalWidthMinus],
  ["total width source", ({ parent }) => parent.totalSource],
  ["total width origin", ({ parent }) => TOTAL_ORIGINS[parent.totalOrigin ?? 0]],
  ["row", ({ row }) => row.id],
  ["daughters", ({ row }) => spaced(row.daughters, ({ name }) => name ?? "")],
  ["daughter Monte Carlo numbers", ({ row }) => spaced(row.daughters, ({ mcNumber }) => mcNumber ?? "none")],
  ["fraction [parts per 10^9]", ({ row }) => row.partsPerBillion],
  ["fraction [1]", ({ row }) => row.fraction?.value],
  ["fraction error up [1]", ({ row }) => row.fraction?.plus],
  ["fraction error down [1]", ({ row }) => row.fraction?.minus],
  ["fraction error from breaking [1]", ({ row }) => row.fraction?.breaking],
  ["fraction error from branch [1]", ({ row }) => row.fraction?.branch],
  ["fraction error from width model [1]", ({ row }) => row.fraction?.model],
  ["fraction over line shape [1]", ({ row }) => row.integratedFraction],
  ["fraction over line shape error up [1]", ({ row }) => row.integrated?.plus],
  ["fraction over line shape error down [1]", ({ row }) => row.integrated?.minus],
  ["fraction over line shape error from breaking [1]", ({ row }) => row.integrated?.breaking],
  ["fraction over line shape error from branch [1]", ({ row }) => row.integrated?.branch],
  ["fraction over line shape error from width model [1]", ({ row }) => row.integrated?.model],
  ["partial width [MeV]", ({ row }) => row.width?.value],
  ["partial width error up [MeV]", ({ row }) => row.width?.plus],
  ["partial width error down [MeV]", ({ row }) => row.width?.minus],
  ["partial width error from breaking [MeV]", ({ row }) => row.width?.breaking],
  ["partial width error from branch [MeV]", ({ row }) => row.width?.branch],
  ["partial width error from width model [MeV]", ({ row }) => row.width?.model],
  ["origin", ({ row }) => ORIGINS[row.origin ?? 0]],
  ["kinematics", ({ row }) => KINEMATICS[row.kinematics ?? 0]],
  ["flags", ({ row }) => (row.flags ?? []).map(flagName).join("; ")],
  ["threshold [MeV]", ({ row }) => row.threshold],
  ["momentum [MeV]", ({ row }) => row.momentum],
  ["identical factor [1]", ({ row }) => row.identicalFactor],
  ["waves L/S", ({ row }) => spaced(row.waves, (wave) => `${half(wave.twoL)}/${half(wave.twoS)}`)],
  ["amplitudes, real part [sqrt(MeV)]", ({ row }) => spaced(row.waves, ({ re }) => re ?? 0)],
  ["amplitudes, imaginary part [sqrt(MeV)]", ({ row }) => spaced(row.waves, ({ im }) => im ?? 0)],
  ["measured quantity", ({ row }) => row.measurement?.quantity],
  ["measured value", ({ row }) => row.measurement?.value],
  ["measured error up", ({ row }) => row.measurement?.plus],
  ["measured error down", ({ row }) => row.measurement?.minus],
  ["measured unit", ({ row }) => row.measurement?.unit],
  ["fitted value", ({ row }) => row.measurement?.fitted],
  ["pull [1]", ({ row }) => row.measurement?.pull],
  ["sources", ({ row }) => (row.sources ?? []).join("; ")],
];

/** Every row of decay tables as comma-separated values: one line each, every digit kept. Grids are left out. */
export function exportDecaysCsv(tables: v1.DecayTables): string {
  const rows = tables.parents.flatMap((parent) => parent.rows.map((row) => ({ parent, row })));
  return csvText(ROW_COLUMNS, rows);
}

interface CouplingOf {
  readonly by: "isospin" | "charge state";
  readonly coupling: v1.Coupling.$Properties;
}

const COUPLING_COLUMNS: Columns<CouplingOf> = [
  ["by", ({ by }) => by],
  ["vertex", ({ coupling }) => coupling.id],
  ["parent", ({ coupling }) => coupling.parent?.name],
  ["parent Monte Carlo number", ({ coupling }) => coupling.parent?.mcNumber],
  ["daughters", ({ coupling }) => spaced(coupling.daughters, ({ name }) => name ?? "")],
  [
    "daughter Monte Carlo numbers",
    ({ coupling }) => spaced(coupling.daughters, ({ mcNumber }) => mcNumber ?? "none"),
  ],
  ["L", ({ coupling }) => half(coupling.twoL)],
  ["S", ({ coupling }) => half(coupling.twoS)],
  ["coefficients", ({ coupling }) => coefficients(coupling, "coefficient")],
  ["coupling", ({ coupling }) => coupling.value?.value],
  ["coupling error", ({ coupling }) => coupling.value?.plus],
  ["coupling error from breaking", ({ coupling }) => coupling.value?.breaking],
  ["convention", ({ coupling }) => coupling.convention],
  ["matrix coefficients", ({ coupling }) => coefficients(coupling, "matrixCoefficient")],
  ["matrix coupling", ({ coupling }) => coupling.matrixValue?.value],
  ["matrix convention", ({ coupling }) => coupling.matrixConvention],
  ["unit of couplings", ({ coupling }) => coupling.unit],
  ["width model", ({ coupling }) => coupling.model],
  [
    "width model options",
    ({ coupling }) => (coupling.options ?? []).map((o) => `${o.name} = ${o.value} [${o.unit}]`).join("; "),
  ],
  ["identical factor [1]", ({ coupling }) => coupling.identicalFactor],
];

/** Every coupling as comma-separated values, by isospin and by charge state, with its exact coefficients. */
export function exportCouplingsCsv(tables: v1.CouplingTables): string {
  return csvText(COUPLING_COLUMNS, [
    ...tables.isospin.map((coupling) => ({ by: "isospin" as const, coupling })),
    ...tables.charged.map((coupling) => ({ by: "charge state" as const, coupling })),
  ]);
}

/** RFC 4180: commas, CRLF, quotes where they are needed; an absent value is an empty cell. */
function csvText<Of>(columns: Columns<Of>, rows: readonly Of[]): string {
  const { stringify } = require("csv-stringify/sync") as typeof csv;
  const cells = rows.map((row) => columns.map(([, cell]) => cell(row) ?? ""));
  const options = { record_delimiter: "windows", cast: { number: String } } as const;
  return stringify([columns.map(([title]) => title), ...cells], options);
}

function spaced<T>(values: Maybe<readonly T[]>, text: (value: T) => Cell): string {
  return (values ?? []).map(text).join(" ");
}

/** `FLAG_ISOSPIN_SPLIT` as `isospin split`. */
function flagName(flag: v1.Flag): string {
  return v1.Flag[flag]!.replace("FLAG_", "").replaceAll("_", " ").toLowerCase();
}

/** A number given twice: `1/2`, `2`. */
function half(twice: Maybe<number>): string {
  const value = twice ?? 0;
  return value % 2 === 0 ? String(value / 2) : `${value}/2`;
}

/** `sqrt(9/20) g(8_1); 1/2 g(8_2)`, the components of mixed hadrons with their weights in front. */
function coefficients(
  { components }: v1.Coupling.$Properties,
  field: "coefficient" | "matrixCoefficient",
): string {
  const terms = (components ?? []).flatMap(({ weight, terms }) =>
    (terms ?? []).flatMap(({ reduced, [field]: exact }) =>
      exact == null ? [] : [`${weight === 1 ? "" : `${weight} `}${formatExact(exact)} ${reduced}`],
    ),
  );
  return terms.join("; ");
}
