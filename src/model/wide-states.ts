import type { StudyState } from "../study/study.js";
import type { Problems } from "./problems.js";

/** Notes charge states whose width is larger than their mass, where the width stands. */
export function noteWideStates(
  { width, chargeStates }: Pick<StudyState, "width" | "chargeStates">,
  states: readonly { readonly name: string; readonly massMeV: number; readonly widthMeV: number | null }[],
  path: string,
  problems: Problems,
): void {
  const wide = states.find(({ massMeV, widthMeV }) => widthMeV !== null && widthMeV > massMeV);
  if (wide === undefined) return;
  const ofItsOwn = chargeStates[wide.name]?.width !== undefined;
  const at = ofItsOwn
    ? `${path}/chargeStates/${wide.name}/width`
    : width === undefined
      ? path
      : `${path}/width`;
  problems.add(
    at,
    `expected a width below the mass of ${wide.name}, ${wide.massMeV} MeV, got ${wide.widthMeV} MeV. Check the units of both.`,
  );
}
