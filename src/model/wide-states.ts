import type { StudyState } from "../study/study.js";
import type { Problems } from "./problems.js";

/** A width above so many times the mass is a slip of the unit; the broadest scalar mesons come near the mass itself. */
const WIDEST = 2;

/** Notes charge states whose width is more than twice their mass, where the width stands. */
export function noteWideStates(
  { width, chargeStates }: Pick<StudyState, "width" | "chargeStates">,
  states: readonly { readonly name: string; readonly massMeV: number; readonly widthMeV: number | null }[],
  path: string,
  problems: Problems,
): void {
  const wide = states.find(({ massMeV, widthMeV }) => widthMeV !== null && widthMeV > WIDEST * massMeV);
  if (wide === undefined) return;
  const ofItsOwn = chargeStates[wide.name]?.width !== undefined;
  const at = ofItsOwn
    ? `${path}/chargeStates/${wide.name}/width`
    : width === undefined
      ? path
      : `${path}/width`;
  problems.add(
    at,
    `expected a width below twice the mass of ${wide.name}, ${wide.massMeV} MeV, got ${wide.widthMeV} MeV. Check the units of both.`,
  );
}
