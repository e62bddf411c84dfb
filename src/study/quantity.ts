import type { Quantity } from "./study.js";
import { unitFactor } from "./units.js";

const UNSIGNED = String.raw`(?:\d+(?:\.\d*)?|\.\d+)(?:[eE][+-]?\d+)?`;
const NUMBER = `[+-]?${UNSIGNED}`;
const UNIT = String.raw`\s*(?<unit>[A-Za-z%][^\s]*)?`;
const SYMMETRIC = String.raw`(?:\+-|\+/-|±)\s*(?<both>${UNSIGNED})`;
const ASYMMETRIC = String.raw`\+\s*(?<plus>${UNSIGNED})\s*-\s*(?<minus>${UNSIGNED})`;
const VALUE = new RegExp(String.raw`^\s*(?<value>${NUMBER})\s*(?:${SYMMETRIC}|${ASYMMETRIC})?${UNIT}\s*$`);
const RANGE = new RegExp(String.raw`^\s*(?<low>${NUMBER})\s+to\s+(?<high>${NUMBER})${UNIT}\s*$`);
const LIMIT = new RegExp(
  String.raw`^\s*<\s*(?<limit>${UNSIGNED})${UNIT}\s+at\s+(?<level>${UNSIGNED})\s*%\s*$`,
);

/** A limit that does not say how sure it is. */
const BARE_LIMIT = new RegExp(String.raw`^\s*<\s*(?<limit>${UNSIGNED})${UNIT}\s*$`);

const FORMS: Readonly<Record<Quantity["unit"], string>> = {
  MeV: "a number with its unit such as `58 +- 3 MeV`",
  rad: "an angle with its unit such as `-15.4 +- 1 deg`",
  "1": "a number such as `0.40 +- 0.05` or `40 +- 5 %`",
};

/** How a quantity is written, for error messages. */
export function quantityForm(unit: Quantity["unit"]): string {
  return FORMS[unit];
}

/** A quantity that could not be read, with the reason in words. */
export interface QuantityProblem {
  readonly problem: string;
}

/**
 * A quantity read from text: `58 +- 3 MeV`, `0.12 GeV`, `58 +4 -3 MeV`, `40 +- 5 %`; a range `0.55 to 0.65`, taken as its
 * centre with half its width as a soft error; an upper limit `< 5 % at 90 %`, which has the value 0, the limit as its
 * errors and its confidence in `limit`.
 *
 * @param unit - the unit wanted: `MeV` converts any energy unit, `rad` any angle, `1` takes pure numbers and per cent
 * @returns the quantity, or what is wrong with the text; errors that are written must be > 0
 */
export function parseQuantity(text: string, unit: Quantity["unit"]): Quantity | QuantityProblem {
  const groups = VALUE.exec(text)?.groups ?? RANGE.exec(text)?.groups ?? LIMIT.exec(text)?.groups;
  if (groups === undefined) return { problem: formProblem(text, unit) };
  const tooLarge = { problem: `expected a number that fits a double, got ${JSON.stringify(text)}` };
  const { unit: _, ...numbers } = groups;
  if (Object.values(numbers).some((digits) => digits !== undefined && !Number.isFinite(Number(digits)))) {
    return tooLarge;
  }
  const factor = unitFactor(groups["unit"]?.trim() ?? "", unit);
  if (typeof factor !== "number") return { problem: `${factor.problem} in ${JSON.stringify(text)}` };
  const number = (digits: string | undefined): number => scaled(digits ?? "0", factor);
  const quantity = quantityOf(groups, unit, number);
  if (![quantity.value, quantity.plus, quantity.minus].every(Number.isFinite)) return tooLarge;
  const { confidence = 0.5 } = quantity.limit ?? {};
  if (!(confidence > 0 && confidence < 1)) {
    return { problem: `expected a confidence between 0 and 100 %, got ${JSON.stringify(text)}` };
  }
  if (groups["low"] !== undefined && quantity.plus < 0) {
    const turned = [groups["high"], "to", groups["low"], groups["unit"] ?? ""].join(" ").trim();
    return {
      problem: `expected a range with the smaller value first, got ${JSON.stringify(text)}. Write \`${turned}\``,
    };
  }
  const hasError = ["both", "plus", "low", "limit"].some((name) => groups[name] !== undefined);
  if (hasError && !(quantity.plus > 0 && quantity.minus > 0)) {
    return {
      problem: `expected errors > 0, got ${JSON.stringify(text)}; leave the error out if there is none`,
    };
  }
  return quantity;
}

/** What is wrong with a text of no known form. */
function formProblem(text: string, unit: Quantity["unit"]): string {
  const got = `got ${JSON.stringify(text)}`;
  const limit = BARE_LIMIT.exec(text)?.groups;
  if (limit === undefined) return `expected ${quantityForm(unit)}, ${got}`;
  const factor = unitFactor(limit["unit"]?.trim() ?? "", unit);
  if (typeof factor !== "number") return `${factor.problem} in ${JSON.stringify(text)}`;
  return `expected an upper limit with its confidence, ${got}. Write \`${text.trim()} at 90 %\` if that is its confidence`;
}

function quantityOf(
  groups: Readonly<Record<string, string | undefined>>,
  unit: Quantity["unit"],
  number: (digits: string | undefined) => number,
): Quantity {
  if (groups["low"] !== undefined) {
    const [low, high] = [number(groups["low"]), number(groups["high"])];
    const half = (high - low) / 2;
    return { value: (low + high) / 2, plus: half, minus: half, unit, soft: true };
  }
  if (groups["limit"] !== undefined) {
    const upper = number(groups["limit"]);
    return {
      value: 0,
      plus: upper,
      minus: upper,
      unit,
      limit: { confidence: Number(groups["level"]) / 100 },
    };
  }
  const plus = number(groups["plus"] ?? groups["both"]);
  return { value: number(groups["value"]), plus, minus: number(groups["minus"] ?? groups["both"]), unit };
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
