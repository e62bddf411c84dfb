import { z } from "zod";
import { nearestNames } from "../nearest-names.js";
import { parseQuantity, type QuantityProblem, quantityForm } from "./quantity.js";
import type { Quantity } from "./study.js";

const DESCRIPTIONS = {
  MeV: "A number with its unit, e.g. `58 +- 3 MeV`, `0.12 GeV` or `58 +4 -3 MeV`",
  rad: "An angle with its unit, e.g. `-15.4 +- 1 deg`",
  1: "A pure number, e.g. `0.40 +- 0.05`, `0.40 +0.05 -0.04` or `40 +- 5 %`",
};

/** A mapping with these keys and no others; a key it does not know is refused with those it knows. */
export function mapping<T extends z.core.$ZodLooseShape>(shape: T) {
  return z.strictObject(shape, {
    error: (issue) => {
      if (issue.code !== "unrecognized_keys") return undefined;
      const known = Object.keys(shape);
      const unknown = issue.keys.map((key: string) => {
        const [nearest] = nearestNames(key, known, 1);
        return `\`${key}\`${nearest === undefined ? "" : ` (did you mean \`${nearest}\`?)`}`;
      });
      return `expected keys among ${known.join(", ")}, got ${unknown.join(", ")}`;
    },
  });
}

/** A quantity in `unit`; `check` says what else it must be, in words, or undefined. */
export function quantity(
  unit: Quantity["unit"],
  check: (q: Quantity) => string | undefined = () => undefined,
) {
  return z
    .union([z.string(), z.number()], { error: `expected ${quantityForm(unit)}` })
    .transform((input, context): Quantity => {
      const read = parseQuantity(String(input), unit);
      const problem = isProblem(read) ? read.problem : check(read);
      if (problem === undefined) return read as Quantity;
      context.addIssue({
        code: "custom",
        message: isProblem(read) ? problem : `${problem}, got ${JSON.stringify(input)}`,
      });
      return z.NEVER;
    })
    .describe(DESCRIPTIONS[unit]);
}

export function isProblem(read: Quantity | QuantityProblem): read is QuantityProblem {
  return "problem" in read;
}

const positive = (what: string) => (q: Quantity) => (q.value > 0 ? undefined : `expected a ${what} > 0`);
export const mass = quantity("MeV", positive("mass"));
export const width = quantity("MeV", positive("width"));

const SPIN_PARITY = /^(?<number>\d+)(?<half>\/2)?(?<sign>[+-])(?<charge>[+-])?$/;

export const spinParity = z
  .string()
  .transform((text, context) => {
    const groups = SPIN_PARITY.exec(text)?.groups;
    const number = Number(groups?.["number"]);
    if (groups === undefined || (groups["half"] !== undefined && number % 2 === 0)) {
      context.addIssue({
        code: "custom",
        message: `expected spin and parity such as \`5/2-\` or \`1+\`, got ${JSON.stringify(text)}`,
      });
      return z.NEVER;
    }
    return {
      twoJ: groups["half"] === undefined ? 2 * number : number,
      parity: groups["sign"] === "+" ? (1 as const) : (-1 as const),
      cParity:
        groups["charge"] === undefined ? null : groups["charge"] === "+" ? (1 as const) : (-1 as const),
    };
  })
  .describe("Spin and parity, e.g. `5/2-`; of mesons also the C parity of their neutral members, e.g. `1--`");

export const spin = z
  .union([z.string().regex(/^\d+(\/2)?$/, { error: "expected a spin such as 1 or 3/2" }), z.int().min(0)], {
    error: "expected a spin such as 1 or 3/2",
  })
  .transform((text) => (String(text).endsWith("/2") ? Number.parseInt(String(text), 10) : 2 * Number(text)));

export const mcAliases = z
  .array(z.int())
  .default([])
  .describe("Other Monte Carlo numbers in use for it: readers and the sidecar find it by these too");

export const nonNegative = (q: Quantity) => (q.value >= 0 ? undefined : "expected a value >= 0");
export const source = z.string().min(1).describe("Where the value comes from: it goes into the table");
