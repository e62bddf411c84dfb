import type { Mode, ModeOrigin, Parent } from "../model/model.js";
import { modeMomentumMeV } from "../model/resolve-modes.js";
import { identicalFactor } from "../widths/partial-width.js";
import type { RunningRow } from "./running-rows.js";
import type { Estimate, Flag, Row } from "./tables.js";
import type { Completed } from "./total-width.js";

/** The part of a remainder that a mode takes, or all of it where none does. */
export interface Leftover {
  /** Undefined for a remainder without daughters. */
  readonly mode?: Mode;
  readonly fraction: Estimate;
  readonly widthMeV: Estimate;
}

/** A mode that a measured value settles. */
export type MeasuredMode = Mode & { readonly origin: Exclude<ModeOrigin, { readonly kind: "remainder" }> };

/** The measured modes of a parent, in the order of their entries. */
export function measuredModes({ modes }: Parent): MeasuredMode[] {
  return modes.filter((mode): mode is MeasuredMode => mode.origin.kind !== "remainder");
}

/** A parent's remainder, divided among the modes that take it by their weights; empty where nothing is left. */
export function leftovers({ modes }: Parent, remainder: Completed["remainder"]): Leftover[] {
  if (remainder === undefined) return [];
  const weighted = modes.flatMap((mode) =>
    mode.origin.kind === "remainder" ? [{ mode, weight: mode.origin.weight }] : [],
  );
  if (weighted.length === 0) return [remainder];
  const sum = weighted.reduce((total, { weight }) => total + weight, 0);
  return weighted.map(({ mode, weight }) => ({
    mode,
    fraction: part(remainder.fraction, weight / sum),
    widthMeV: part(remainder.widthMeV, weight / sum),
  }));
}

/** A part of an estimate, with all its errors. */
export function part({ value, plus, minus, breaking, branch, model }: Estimate, share: number): Estimate {
  return {
    value: value * share,
    plus: plus * share,
    minus: minus * share,
    breaking: breaking * share,
    ...(branch === undefined ? {} : { branch: branch * share }),
    ...(model === undefined ? {} : { model: model * share }),
  };
}

/** What a row of a mode has of itself: its kinematics and its law, without the number. */
export function modeRow(
  parent: Parent,
  mode: Mode,
): Omit<Row, "partsPerBillion" | "fraction" | "widthMeV" | "origin" | "flags" | "sources"> {
  const { id, daughters, thresholdMeV, power, phaseRad } = mode;
  const [first, second] = daughters;
  return {
    id,
    daughters,
    kinematics: "open",
    thresholdMeV,
    momentumMeV: modeMomentumMeV(parent.hadron, mode),
    identicalFactor: identicalFactor(daughters.length === 2 && first!.name === second!.name),
    waves: [],
    power,
    ...(phaseRad === null ? {} : { amplitude: { phaseRad } }),
  };
}

/** What must be known of a mode's row. */
export function modeFlags({ weak, origin }: Mode): Flag[] {
  const split = origin.kind !== "remainder" && origin.split;
  return [...(split ? (["isospin-split"] as const) : []), ...(weak ? (["weak"] as const) : [])];
}

/** How a mode runs with the parent's mass. */
export function modeRunning({ thresholdMeV, power }: Mode, widthMeV: number): RunningRow {
  return { widthMeV, thresholdMeV, power };
}
