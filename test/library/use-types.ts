// The declarations, as a strict user compiles them.
import {
  type AccordOptions,
  type Change,
  compareTables,
  complete,
  couplingTable,
  type DecayChannel,
  type DecayFile,
  decayPieces,
  decodeCouplings,
  decodeDecays,
  encodeCouplings,
  encodeDecays,
  exportAccord,
  exportCouplingsCsv,
  exportCouplingsLatex,
  exportDecaysCsv,
  exportDecaysLatex,
  type Fit,
  fitModel,
  type Irrep,
  isoscalarFactor,
  type Leaf,
  openDecays,
  readStudy,
  resolveStudy,
  rootToNumber,
  type SignedRoot,
  type StreamedTables,
  sealedPieces,
  studyWarnings,
  type TableComparison,
  type Tables,
  type Thresholds,
  type ValidityWarning,
  validityWarnings,
  type WholeFile,
  type WidthModel,
  widthModel,
  writeAllWhole,
  writeWhole,
  writeWholePieces,
} from "couplet";

const octet: Irrep = { p: 1, q: 1 };
const root: SignedRoot = isoscalarFactor(
  octet,
  octet,
  octet,
  1,
  { threeY: 0, twoI: 0 },
  {
    threeY1: 3,
    twoI1: 1,
    threeY2: -3,
    twoI2: 1,
  },
);
export const value: number = rootToNumber(root);
export const model: WidthModel = widthModel("a", { n: 1 });

export function tablesOf(bytes: Uint8Array): number {
  const fit: Fit = fitModel(resolveStudy(readStudy(bytes, "study.yaml")));
  const channels: readonly DecayChannel[] = fit.model.channels;
  const tables: Tables = complete(fit, 0);
  const read = decodeDecays(encodeDecays(tables), "study.decays.pb");
  return channels.length + (read.header?.schemaMinor ?? 0);
}

export function warningsOf(fit: Fit): string[] {
  const warnings: readonly ValidityWarning[] = validityWarnings(fit, 0);
  return [...studyWarnings(fit, 0), ...warnings.map(({ parents, text }) => `${parents.join()}: ${text}`)];
}

export function written(fit: Fit): number {
  const tables: StreamedTables = complete(fit, 0);
  const length: number = writeWholePieces("a.pb", sealedPieces(decayPieces(tables)));
  const file: DecayFile = openDecays("a.pb");
  let rows = 0;
  for (const parent of file.parents()) rows += parent.rows.length;
  file.close();
  return length + rows;
}

export function exported(decays: Uint8Array, fit: Fit): void {
  const tables = decodeDecays(decays, "a.pb");
  const couplings = decodeCouplings(encodeCouplings(couplingTable(fit, 0)), "c.pb");
  const accord: AccordOptions = { numbers: new Map([["X", 1]]), rescale: false };
  const texts: readonly string[] = [
    exportDecaysCsv(tables),
    exportDecaysLatex(tables),
    exportAccord(tables, "a.pb", accord),
    exportCouplingsCsv(couplings),
    exportCouplingsLatex(couplings),
  ];
  const files: WholeFile[] = texts.map((text, k) => ({ path: `${k}.txt`, bytes: text }));
  writeAllWhole(files);
  writeWhole("all.txt", texts.join(""));
}

export function changes(first: Uint8Array, second: Uint8Array): Leaf[] {
  const thresholds: Thresholds = { percent: 2 };
  const a = { bytes: first, file: "a.pb" };
  const comparison: TableComparison = compareTables(a, { bytes: second, file: "b.pb" }, thresholds);
  const all: readonly Change[] = comparison.items.flatMap((item) => item.changes);
  return all.flatMap(({ to }) => (to === undefined ? [] : [to]));
}
