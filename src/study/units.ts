import type { Quantity } from "./study.js";

// mathjs's one-file build loads in a tenth of the time of its package entry and is the same library.
type MathJs = typeof import("mathjs");

/**
 * Factor from a written unit to the wanted one.
 *
 * @param written - e.g. `GeV`, `keV`, `%`; empty for none
 * @param wanted - `MeV` for masses and widths, `rad` for angles, `1` for pure numbers
 * @returns the factor, or what is wrong in words
 */
export function unitFactor(written: string, wanted: Quantity["unit"]): number | { problem: string } {
  if (wanted === "1") {
    if (written === "") return 1;
    return written === "%"
      ? 0.01
      : { problem: `expected a pure number or %, got the unit ${JSON.stringify(written)}` };
  }
  const example = wanted === "rad" ? "deg or rad" : "MeV or GeV";
  if (written === "") return { problem: `expected a unit such as ${example}, got none` };
  const math = require("mathjs/lib/browser/math.js") as MathJs;
  try {
    const unit = math.unit(1, written);
    // Rounded to the power of ten it is, so that decimal numbers stay exact.
    return Number(unit.toNumber(wanted).toPrecision(15));
  } catch {
    const kind = wanted === "rad" ? "an angle" : "an energy unit";
    return { problem: `expected ${kind} such as ${example}, got ${JSON.stringify(written)}` };
  }
}
