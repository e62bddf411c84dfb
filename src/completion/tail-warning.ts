import type { ParentTable } from "./tables.js";

/** Integrated over nominal fraction from which on the tail of a line shape rules a row, and the least integrated ones that matter. */
const TAIL_RATIO = 2;
const LEAST_FRACTION = 1e-3;

/** A table that says, after its own warnings, which fractions over the line shape come from its tail. */
export function withTailWarning(table: ParentTable): ParentTable {
  const { lineShape, parent, rows, warnings } = table;
  if (lineShape === undefined) return table;
  const ruled = rows.filter(
    // What is closed at the nominal mass is all tail: the nominal fraction says nothing of how much it matters.
    ({ fraction, integrated }) =>
      (integrated?.value ?? 0) > Math.max(LEAST_FRACTION, TAIL_RATIO * fraction.value),
  );
  if (ruled.length === 0) return table;
  const names = ruled.map(({ id }) => id).join(", ");
  const [low, high] = lineShape.windowMeV.map((mass) => mass.toFixed(0));
  const text = `${parent.hadron.name}: fractions over the line shape more than ${TAIL_RATIO} times those at the nominal mass: ${names}. They depend on the tail of the line shape within the window of ${low} to ${high} MeV.`;
  return { ...table, warnings: [...warnings, text] };
}
