import { z } from "zod";
import { nearestNames } from "../nearest-names.js";
import { NAME_PATTERN, nameProblem } from "./names.js";
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

/** What a value should have been, and how to mend it. */
interface Unfit {
  readonly expected: string;
  readonly mend: string;
}

function inWords(unfit: Unfit | string, input: string | number): string {
  const got = `got ${JSON.stringify(input)}`;
  return typeof unfit === "string" ? `${unfit}, ${got}` : `${unfit.expected}, ${got}. ${unfit.mend}`;
}

/** A quantity in `unit`; `check` says what else it must be, in words, or undefined. */
export function quantity(
  unit: Quantity["unit"],
  check: (q: Quantity) => Unfit | string | undefined = () => undefined,
) {
  return z
    .union([z.string(), z.number()], { error: `expected ${quantityForm(unit)}` })
    .transform((input, context): Quantity => {
      const read = parseQuantity(String(input), unit);
      const unfit = isProblem(read) ? undefined : check(read);
      if (!isProblem(read) && unfit === undefined) return read;
      context.addIssue({ code: "custom", message: isProblem(read) ? read.problem : inWords(unfit!, input) });
      return z.NEVER;
    })
    .describe(DESCRIPTIONS[unit]);
}

export function isProblem(read: Quantity | QuantityProblem): read is QuantityProblem {
  return "problem" in read;
}

/** Masses and widths of hadrons lie below this, in MeV; what lies above has the wrong unit. */
const LARGEST_MEV = 20_000;
/** Masses of hadrons lie above this, in MeV: the pion's is 135. */
const SMALLEST_MEV = 100;

const positive = (what: string) => (q: Quantity) =>
  q.value > 0 ? belowLargest(what)(q) : `expected a ${what} > 0`;
const belowLargest = (what: string) => (q: Quantity) =>
  q.value < LARGEST_MEV
    ? undefined
    : {
        expected: `expected a ${what} below ${LARGEST_MEV / 1000} GeV`,
        mend: "Check whether its unit is MeV",
      };
const hadronMass = (q: Quantity) =>
  q.value > 0 && q.value < SMALLEST_MEV
    ? { expected: `expected a mass above ${SMALLEST_MEV} MeV`, mend: "Check whether its unit is GeV" }
    : positive("mass")(q);
export const threshold = quantity("MeV", positive("threshold"));
/** Mass of a hadron. */
export const mass = quantity("MeV", hadronMass);
/** Mass of any particle, such as a photon or a lepton. */
export const anyMass = quantity("MeV", (q) => nonNegative(q) ?? belowLargest("mass")(q));
export const width = quantity("MeV", positive("width"));

/** The name of a hadron. */
export const hadronName = z
  .string()
  .superRefine((name, context) => {
    const message = nameProblem(name);
    if (message !== undefined) context.addIssue({ code: "custom", message });
  })
  .meta({ pattern: NAME_PATTERN });

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
