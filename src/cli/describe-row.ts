import { WHOLE } from "../completion/parts-per-billion.js";
import { InputError } from "../errors.js";
import { couplet } from "../gen/couplet.js";
import { nearestNames } from "../nearest-names.js";
import { asGiven, significant, withError } from "../tables/rounding.js";
import { widthModelDefinitions } from "../widths/width-model.js";
import { fractionText } from "./labels.js";
import { type StudyQuotes, studyQuotes } from "./study-quotes.js";
import { textTable } from "./text-table.js";

import v1 = couplet.v1;

import { degreesText } from "./labels.js";
import { totalWidthText } from "./parent-words.js";

type Maybe<T> = T | null | undefined;

/** A row with all its file says about it. */
export interface RowOfTable {
  readonly tables: v1.DecayTables;
  readonly parent: v1.Parent.$Properties;
  readonly row: v1.Row.$Properties;
}

/**
 * The row of an id.
 *
 * @throws InputError for an id the table does not have, with the nearest it has
 */
export function rowNamed(tables: v1.DecayTables, id: string, file: string): RowOfTable {
  for (const parent of tables.parents) {
    const row = parent.rows.find((candidate) => candidate.id === id);
    if (row !== undefined) return { tables, parent, row };
  }
  const ids = tables.parents.flatMap(({ rows }) => rows.map((row) => row.id ?? ""));
  const nearest = nearestNames(id, ids);
  throw new InputError(
    `${file}: expected the id of a row, got ${JSON.stringify(id)}.${nearest.length === 0 ? "" : ` Nearest: ${nearest.join(", ")}.`} \`couplet show ${file}\` lists them.`,
  );
}

/** A row's ledger: from where its number came, step by step, all from the file. */
export function describeRow(found: RowOfTable): string {
  const { tables, parent, row } = found;
  const quotes = studyQuotes(tables.header?.studyText ?? "");
  const sections: readonly (readonly [string, readonly string[]])[] = [
    ["The number", numberLines(found)],
    ["Before a policy moved it", adjustmentLines(found)],
    ["Errors of the fraction, of which each answers another question", errorLines(row)],
    ["Over the parent's line shape", integratedLines(found)],
    ["Total width", totalLines(parent, quotes)],
    ["Measurement", measurementLines(row, quotes)],
    ["Split into charge states", splitLines(found)],
    ["Width model and amplitude", row.waves!.flatMap((wave) => waveLines(row, wave))],
    ["Neutral kaons: projection times the amplitude of each flavour, added before squaring", kaonLines(row)],
    ["Fit", fitLines(tables, row)],
    ["Flags", (row.flags ?? []).map((flag) => FLAGS[flag] ?? v1.Flag[flag] ?? `flag ${flag}`)],
  ];
  const head = `${row.id}: ${ORIGINS[row.origin ?? 0]}, ${KINEMATICS[row.kinematics ?? 0]}\n`;
  const told = sections.filter(([, lines]) => lines.length > 0);
  return head + told.map(([title, lines]) => `\n${title}\n${lines.map((l) => `  ${l}\n`).join("")}`).join("");
}

const ORIGINS = [
  "of unknown origin",
  "measured",
  "predicted by the fit",
  "what the other rows leave of the total width",
];
const KINEMATICS = [
  "kinematics unknown",
  "open at the nominal mass",
  "closed at the nominal mass",
  "open only through the width of a daughter",
];
const FLAGS: Readonly<Partial<Record<v1.Flag, string>>> = {
  [v1.Flag.FLAG_ISOSPIN_SPLIT]:
    "isospin split: the measurement is of several charge states together, or of another one; isospin and phase space divide it",
  [v1.Flag.FLAG_UNDECAYABLE]: "undecayable: no daughters are named, a generator cannot decay this row",
  [v1.Flag.FLAG_NEAR_THRESHOLD]:
    "near threshold: the momentum is below 100 MeV or the threshold within one width; phase space rules the number",
  [v1.Flag.FLAG_FOLDED]: "folded: K is averaged over the line shape of an unstable daughter",
  [v1.Flag.FLAG_SMALL_AMPLITUDE]:
    "small amplitude: below a fifth of the decay's coupling strength; breaking of the symmetry may dominate it",
  [v1.Flag.FLAG_ADJUSTED]: "adjusted: a policy of the study moved the number; the old one is kept above",
  [v1.Flag.FLAG_WEAK]: "weak: strangeness or charm may change",
};

function numberLines({ parent, row }: RowOfTable): string[] {
  const parts = row.partsPerBillion ?? 0;
  const fraction = row.fraction?.value ?? 0;
  const rounded = Math.round(fraction * WHOLE);
  const residue = parts - rounded;
  return [
    `${parts} parts per 10^9 = ${rounded} (the fraction rounded)${residue === 0 ? "" : ` ${signedText(residue)} (what rounding left over in all rows, put here)`}`,
    `fraction ${number(fraction)} = partial width ${number(row.width?.value)} MeV / total width ${number(parent.totalWidth)} MeV`,
    `threshold ${number(row.threshold)} MeV, parent's mass ${number(parent.hadron?.mass)} MeV, momentum ${number(row.momentum)} MeV`,
    ...(row.power == null
      ? []
      : [`outside the symmetry: the width grows with the distance from threshold to the power ${row.power}`]),
  ];
}

function adjustmentLines({ tables, row }: RowOfTable): string[] {
  const { unadjustedFraction, unadjustedWidth } = row;
  if (unadjustedFraction == null) return [];
  return [
    `fraction ${number(unadjustedFraction.value)}, partial width ${number(unadjustedWidth?.value)} MeV; policy for conflicts: ${tables.header?.policies?.conflicts}`,
  ];
}

function kaonLines({ kaonFlavours }: v1.Row.$Properties): string[] {
  return (kaonFlavours ?? []).map(({ row, projection, re, im }) => {
    const amplitudes = (re ?? []).map((x, k) => `${number(x)}${im?.[k] ? ` + ${number(im[k])} i` : ""}`);
    return `${number(projection)} of ${row}: ${amplitudes.join(", ")} sqrt(MeV)`;
  });
}

function errorLines({ fraction, origin }: v1.Row.$Properties): string[] {
  const { value, plus, minus, breaking, branch, model } = fraction ?? {};
  // What is lost in the digits of a double is none.
  const error = (size: Maybe<number>) => ((size ?? 0) > 1e-12 * (value ?? 0) ? number(size, 3) : "0");
  const from =
    origin === v1.Origin.ORIGIN_PREDICTED
      ? "from the fit's covariance and the total width"
      : origin === v1.Origin.ORIGIN_REMAINDER
        ? "from all other rows and the total width"
        : "from the measurement and the total width";
  return [
    `data      +${error(plus)} -${error(minus)}  ${from}`,
    `breaking  ${error(breaking)}  from breaking of the symmetry; independent of the data`,
    ...(branch == null
      ? []
      : [
          `branch    ${error(branch)}  the largest difference to another minimum within chi2 + 9 of the best`,
        ]),
    model == null
      ? "model     not computed; `tables: { widthModels: compared }` in the study has it computed"
      : `model     ${error(model)}  half the range over the width models, each fitted to the same data`,
  ];
}

/** The fraction integrated over the line shape with the same parts of its error, which are other numbers. */
function integratedLines({ parent, row }: RowOfTable): string[] {
  const { integrated, integratedFraction } = row;
  if (integratedFraction == null) return [];
  const { low, high } = parent.hadron?.lineShape ?? {};
  const { plus, minus, breaking, branch, model } = integrated ?? {};
  const size = (error: Maybe<number>) => number(error, 3);
  return [
    `fraction ${number(integratedFraction)}, integrated from ${number(low, 5)} to ${number(high, 5)} MeV`,
    ...(integrated == null
      ? []
      : [
          `data +${size(plus)} -${size(minus)}, breaking ${size(breaking)}${branch == null ? "" : `, branch ${size(branch)}`}${model == null ? "" : `, model ${size(model)}`}: those of all widths, at the same distribution of the mass`,
        ]),
  ];
}

function totalLines(parent: v1.Parent.$Properties, quotes: StudyQuotes): string[] {
  const { hadron, multiplet, totalOrigin, totalSource } = parent;
  const text = `${totalWidthText(parent)} MeV`;
  if (totalOrigin === v1.TotalOrigin.TOTAL_ORIGIN_SUM)
    return [`${text}, the sum of the rows of ${hadron?.name}`];
  const quote = quotes.width(multiplet ?? "", hadron?.name ?? "");
  return quote === undefined
    ? [`${text}, of the catalogue${totalSource ? ` (${totalSource})` : ""}`]
    : [`${text}, given in the study, line ${quote.line}:`, `  ${quote.text}`];
}

function measurementLines(
  { measurement, sources, fraction, width }: v1.Row.$Properties,
  quotes: StudyQuotes,
): string[] {
  if (measurement == null) return [];
  const { quantity, value, plus, minus, unit, fitted, pull, share } = measurement;
  const inUnit = unit === "1" ? "" : ` ${unit}`;
  const source = (sources ?? [])[0] ?? "";
  const quote = quotes.measurement(quantity ?? "", source);
  const own = unit === "1" ? fraction?.value : width?.value;
  return [
    `${quantity} = ${asGiven(value ?? 0, plus ?? 0, minus ?? 0)}${inUnit}`,
    ...(sources ?? []).map((text) => `source: ${text}`),
    ...(quote === undefined ? [] : [`line ${quote.line} of the study: ${quote.text}`]),
    fitted == null
      ? "it did not enter the fit"
      : `the fit has ${number(fitted)}${inUnit}, a pull of ${(pull ?? 0).toFixed(2)}; the row keeps the measured value`,
    ...(share == null ? [] : [`this row's share of it: ${number(share)}, which is ${number(own)}${inUnit}`]),
  ];
}

/** All charge states of the parent in the same isospin channel, with their weights. */
function splitLines({ parent, row }: RowOfTable): string[] {
  if (!row.isospinChannel) return [];
  const rows = (parent.rows ?? []).filter(({ isospinChannel }) => isospinChannel === row.isospinChannel);
  const weights = rows.map(({ isospinCoefficient: c, identicalFactor: s, waves }) => {
    const factors = (waves ?? []).map(({ kinematicFactor }) => number(kinematicFactor, 5)).join(", ");
    return [number((c ?? 0) ** 2, 5), number(s, 2), factors];
  });
  const whole = sum(rows.map(({ width }) => width?.value ?? 0));
  const cells = rows.map((each, k) => [
    each.id ?? "",
    ...weights[k]!,
    number(whole > 0 ? (each.width?.value ?? 0) / whole : 0, 5),
  ]);
  const head = ["charge state", "isospin", "identical", "K of each wave", "share of the width"];
  return [
    `isospin channel ${row.isospinChannel}, SU(2) coefficient ${number(row.isospinCoefficient, 5)}`,
    ...textTable([head, ...cells], { right: [1, 2, 3, 4] })
      .trimEnd()
      .split("\n"),
  ];
}

function waveLines(row: v1.Row.$Properties, wave: v1.Wave.$Properties): string[] {
  const { model, options, flavourAmplitude: amplitude, kinematicFactor, unit, re, im } = wave;
  const definition = widthModelDefinitions().find(({ id }) => id === model);
  const unitText = !unit || unit === "1" ? "" : ` ${unit}`;
  const factorUnit = !unit || unit === "1" ? "MeV" : `MeV/(${unit})^2`;
  const s = row.identicalFactor ?? 1;
  const predicted = s * (amplitude ?? 0) ** 2 * (kinematicFactor ?? 0);
  const scales = (options ?? []).map(
    ({ name, value, unit: of }) => `${name} = ${value}${of === "1" ? "" : ` ${of}`}`,
  );
  return [
    `wave L=${fractionText(wave.twoL ?? 0, 2)} S=${fractionText(wave.twoS ?? 0, 2)}, model ${model}: ${definition?.title ?? "unknown to this version"}`,
    ...(definition === undefined ? [] : [`  ${definition.formula}`, `  source: ${definition.source}`]),
    ...(scales.length === 0 ? [] : [`  with ${scales.join(", ")}`]),
    `  the fit's flavour amplitude A = ${number(amplitude)}${unitText}, K = ${number(kinematicFactor)} ${factorUnit}, identical-particle factor s = ${s}`,
    `  s A^2 K = ${number(predicted)} MeV by the fit; this row has ${number((re ?? 0) ** 2 + (im ?? 0) ** 2)} MeV in this wave, amplitude ${number(re)}${im ? ` + ${number(im)} i` : ""} sqrt(MeV)`,
  ];
}

function fitLines({ fit, header }: v1.DecayTables, row: v1.Row.$Properties): string[] {
  if ((row.waves ?? []).length === 0) return [];
  const used = fit?.used ?? 0;
  const minimum = fit?.minima?.[used];
  const couplings = (minimum?.parameters ?? [])
    .filter(({ kind }) => kind === "coupling" || kind === "mixing angle")
    .map(({ name, value, error, unit }) => `${name} = ${withError(value ?? 0, error ?? 0)}${unitOf(unit)}`);
  const names = [row.id, row.isospinChannel].filter((name) => name);
  const pulls = (minimum?.pulls ?? []).filter(({ quantity }) =>
    names.some((name) => quantity?.includes(name!)),
  );
  return [
    `minimum ${used + 1} of ${fit?.minima?.length}, chi2 ${minimum?.chi2?.toFixed(2)} with ${degreesText(minimum?.ndf)}, ${minimum?.pulls?.length} data; convention ${header?.convention}`,
    couplings.join(", "),
    ...pulls.map(
      ({ quantity, measured, plus, minus, unit, fitted, pull, source }) =>
        `datum on this channel: ${quantity} = ${datumText(measured ?? 0, plus ?? 0, minus ?? 0)}${unitOf(unit)}, fitted ${number(fitted)}, pull ${(pull ?? 0).toFixed(2)} (${source})`,
    ),
    `breaking of the symmetry for errors: ${number((header?.breaking ?? 0) * 100, 3)} % in amplitude, relative to the coupling strength`,
  ];
}

/** A datum of the fit without an error is a sign alone. */
function datumText(measured: number, plus: number, minus: number): string {
  if (plus === 0 && minus === 0) return measured < 0 ? "-" : "+";
  return asGiven(measured, plus, minus);
}

function unitOf(unit: Maybe<string>): string {
  return !unit || unit === "1" ? "" : ` ${unit}`;
}

function number(value: Maybe<number>, digits = 6): string {
  return value == null ? "(not given)" : significant(value, digits);
}

function signedText(value: number): string {
  return value < 0 ? `- ${-value}` : `+ ${value}`;
}

function sum(values: readonly number[]): number {
  return values.reduce((total, value) => total + value, 0);
}
