import type { Quantity } from "./study.js";
import { unitFactor } from "./units.js";

const NUMBER = String.raw`[+-]?(?:\d+(?:\.\d*)?|\.\d+)(?:[eE][+-]?\d+)?`;
const UNSIGNED = String.raw`(?:\d+(?:\.\d*)?|\.\d+)(?:[eE][+-]?\d+)?`;
const SYMMETRIC = String.raw`(?:\+-|\+/-|±)\s*(?<both>${UNSIGNED})`;
const ASYMMETRIC = String.raw`\+\s*(?<plus>${UNSIGNED})\s*-\s*(?<minus>${UNSIGNED})`;
const QUANTITY = new RegExp(
  String.raw`^\s*(?<value>${NUMBER})\s*(?:${SYMMETRIC}|${ASYMMETRIC})?\s*(?<unit>[A-Za-z%].*)?$`,
);

/** How a quantity is written, for error messages. */
export function quantityForm(unit: Quantity["unit"]): string {
  return unit === "MeV"
    ? "a number with its unit such as `58 +- 3 MeV`"
    : "a number such as `0.40 +- 0.05` or `40 +- 5 %`";
}

/** A quantity that could not be read, with the reason in words. */
export interface QuantityProblem {
  readonly problem: string;
}

/**
 * A quantity read from text: `58 +- 3 MeV`, `0.12 GeV`, `58 +4 -3 MeV`, `40 +- 5 %`.
 *
 * @param unit - the unit wanted: `MeV` converts any energy unit, `1` takes pure numbers and per cent
 * @returns the quantity, or what is wrong with the text; errors that are written must be > 0
 */
export function parseQuantity(text: string, unit: Quantity["unit"]): Quantity | QuantityProblem {
  const groups = QUANTITY.exec(text)?.groups;
  if (groups === undefined) return { problem: `expected ${quantityForm(unit)}, got ${JSON.stringify(text)}` };
  const factor = unitFactor(groups["unit"]?.trim() ?? "", unit);
  if (typeof factor !== "number") return { problem: `${factor.problem} in ${JSON.stringify(text)}` };
  const number = (name: string): number => scaled(groups[name] ?? groups["both"] ?? "0", factor);
  const quantity: Quantity = {
    value: scaled(groups["value"]!, factor),
    plus: number("plus"),
    minus: number("minus"),
    unit,
  };
  if (![quantity.value, quantity.plus, quantity.minus].every(Number.isFinite)) {
    return { problem: `expected a number that fits a double, got ${JSON.stringify(text)}` };
  }
  const hasError = groups["both"] !== undefined || groups["plus"] !== undefined;
  if (hasError && !(quantity.plus > 0 && quantity.minus > 0)) {
    return {
      problem: `expected errors > 0, got ${JSON.stringify(text)}; leave the error out if there is none`,
    };
  }
  return quantity;
}

/** The decimal number times the unit's factor, without the noise a binary product adds: 0.12 GeV is 120 MeV. */
function scaled(digits: string, factor: number): number {
  const exponent = Math.log10(factor);
  return Number.isInteger(exponent) ? Number(shiftExponent(digits, exponent)) : Number(digits) * factor;
}

function shiftExponent(digits: string, shift: number): string {
  const [mantissa, exponent] = digits.toLowerCase().split("e");
  return `${mantissa}e${Number(exponent ?? 0) + shift}`;
}
