/**
 * Rows of cells as aligned text, two blanks between columns, no trailing blanks.
 *
 * @param rows - each a list of cells; rows may differ in length
 * @param options - `indent` blanks before each row; columns in `right` (from 0) are aligned to the right
 */
export function textTable(
  rows: readonly (readonly string[])[],
  options: { readonly indent?: number; readonly right?: readonly number[] } = {},
): string {
  const widths: number[] = [];
  for (const row of rows)
    for (const [i, cell] of row.entries()) widths[i] = Math.max(widths[i] ?? 0, cell.length);
  const pad = (cell: string, i: number) =>
    options.right?.includes(i) ? cell.padStart(widths[i]!) : cell.padEnd(widths[i]!);
  const margin = " ".repeat(options.indent ?? 0);
  return rows.map((row) => `${margin}${row.map(pad).join("  ")}`.trimEnd() + "\n").join("");
}
