import { broken, brokenCParity, withoutConjugate } from "../model/mode-checks.js";
import { requireIdentity } from "../require.js";
import { WHOLE } from "./parts-per-billion.js";
import type { ParentTable, Row } from "./tables.js";

/** Relative difference that rounding may leave between a row and its charge conjugate of equal masses. */
const SAME_WIDTH = 1e-9;

/**
 * Checks that tables keep what they promise: every row conserves charge, baryon and lepton number and, unless it is weak,
 * strangeness and charm; C parity where all hadrons have one; predicted rows of a hadron that is its own antiparticle
 * come with their charge conjugates and these are as wide; parts add up.
 *
 * G parity is checked where the rows of a symmetric decay are made; a measured mode such as omega(782) -> pi+ pi- may
 * break it.
 * @throws InternalError for a row that does not
 */
export function checkRows(tables: readonly ParentTable[]): void {
  for (const table of tables) {
    const { hadron } = table.parent;
    const sum = table.rows.reduce((total, { partsPerBillion }) => total + partsPerBillion, 0);
    requireIdentity("checkRows", sum === WHOLE, () => `${hadron.name}: rows add up to ${sum} parts`);
    for (const row of table.rows) {
      if (row.daughters.length === 0) continue;
      const weak = row.flags.includes("weak");
      const wrong =
        broken(hadron, row.daughters, weak) ?? (weak ? undefined : brokenCParity(hadron, row.daughters));
      requireIdentity("checkRows", wrong === undefined, () => `${row.id} breaks ${wrong}`);
    }
    checkConjugates(table);
  }
}

function checkConjugates({ parent, rows }: ParentTable): void {
  if (parent.hadron.antiparticle !== null) return;
  const predicted = rows.filter(({ origin }) => origin === "predicted");
  const lonely = withoutConjugate(
    parent.hadron,
    rows.filter(({ isospin }) => isospin !== undefined),
  );
  for (const row of predicted) {
    const image = rows.find((other) => other !== row && isImage(row, other));
    if (image?.origin !== "predicted" || lonely.some(({ final }) => final === row)) continue;
    const [a, b] = [row.widthMeV.value, image.widthMeV.value];
    requireIdentity(
      "checkRows",
      row.thresholdMeV !== image.thresholdMeV || Math.abs(a - b) <= SAME_WIDTH * Math.max(a, b),
      () => `${row.id} is ${a} MeV and its charge conjugate ${image.id} is ${b} MeV`,
    );
  }
}

function isImage({ daughters }: Row, other: Row): boolean {
  const images = daughters.map(({ name, antiparticle }) => antiparticle ?? name).sort();
  const names = other.daughters.map(({ name }) => name).sort();
  return images.join(" ") === names.join(" ");
}
