import type { Parent } from "../model/model.js";
import type { Completed, CompletedRow, Entry } from "./total-width.js";

/**
 * What the policy `constrained` did to a parent, with its numbers: the predicted widths, which have the large errors and
 * move most, by their sum and by the rows that moved least and most; then the measured ones. Empty where nothing moved.
 */
export function constrainedWarning(
  { hadron }: Parent,
  entries: readonly Entry[],
  { estimates, totalMeV }: Completed,
): string[] {
  if (estimates.every(({ unadjusted }) => unadjusted === undefined)) return [];
  const rows = (isPredicted: boolean) =>
    estimates.filter((_, k) => (entries[k]!.kind === "predicted") === isPredicted);
  const [predicted, measured] = [rows(true), rows(false)];
  const texts = [];
  if (sumOf(predicted, before) > 0) {
    const left = totalMeV - sumOf(measured, after);
    texts.push(
      `${rounded(sumOf(predicted, before))} MeV of predicted widths were scaled by ${scales(predicted)} into the ${rounded(left)} MeV that are left`,
    );
  }
  if (measured.some(({ unadjusted }) => unadjusted !== undefined))
    texts.push(
      `${rounded(sumOf(measured, before))} MeV of measured widths were moved to ${rounded(sumOf(measured, after))} MeV`,
    );
  return [`${hadron.name}: ${texts.join(", ")}, of a total width of ${rounded(totalMeV)} MeV (constrained).`];
}

const before = ({ widthMeV, unadjusted }: CompletedRow) => (unadjusted?.widthMeV ?? widthMeV).value;
const after = ({ widthMeV }: CompletedRow) => widthMeV.value;

function sumOf(rows: readonly CompletedRow[], of: (row: CompletedRow) => number): number {
  return rows.reduce((sum, row) => sum + of(row), 0);
}

/** The scale of the sum and, where rows have others, the least and the largest. */
function scales(rows: readonly CompletedRow[]): string {
  const single = rows.filter((row) => before(row) > 0).map((row) => after(row) / before(row));
  const mean = (sumOf(rows, after) / sumOf(rows, before)).toFixed(2);
  const [least, most] = [Math.min(...single).toFixed(2), Math.max(...single).toFixed(2)];
  return least === most ? mean : `${mean} (rows by ${least} to ${most})`;
}

/** Three digits, or all before the point. */
function rounded(widthMeV: number): string {
  return widthMeV >= 100 ? widthMeV.toFixed(0) : String(Number(widthMeV.toPrecision(3)));
}
