import { z } from "zod";
import { mapping, nonNegative, quantity, source, threshold } from "./schema-values.js";
import type { Quantity } from "./study.js";

const use = z.enum(["fit", "table", "both"]).default("both").describe("Where the value counts");
const fraction = (q: Quantity) =>
  q.value >= 0 && q.value <= 1 ? undefined : "expected a fraction from 0 to 1";
const signedFraction = (q: Quantity) =>
  Math.abs(q.value) <= 1 ? undefined : "expected a number from -1 to 1";
const onlyFit = z.literal("fit").default("fit").describe("Such a value settles no row by itself");
const normalisation = z.string().optional().describe("Name of a common normalisation");
export const channel = z
  .string()
  .describe("A channel such as `N(1675) -> N pi`; isospin multiplets stand for all their charge states");
const pair = z.tuple([channel, channel]);

const reactionSign = z
  .union([z.enum(["+", "-", "free"]), z.literal(1), z.literal(-1)])
  .default("free")
  .describe("Sign s_f of the reaction against these phases; `free` is fitted, one for each reaction");

export const measurement = z.union(
  [
    mapping({ width: channel, value: quantity("MeV", nonNegative), normalisation, source, use }),
    mapping({ fraction: channel, value: quantity("1", fraction), normalisation, source, use }),
    mapping({
      ratio: pair.describe("Two channels; the value is the first width over the second"),
      value: quantity("1", nonNegative),
      normalisation,
      source,
      use: onlyFit,
    }),
    mapping({
      product: pair.describe("Two channels of one parent; the value is the product of their fractions"),
      value: quantity("1", fraction),
      normalisation,
      source,
      use: onlyFit,
    }),
    mapping({
      amplitude: pair.describe("Entrance and exit channel of one parent; the value is sqrt(G_i G_f)/G_total"),
      value: z
        .union([z.enum(["+", "-"]), quantity("1", signedFraction)], {
          error: "expected a signed number such as `-0.25 +- 0.03`, or `+` or `-` alone",
        })
        .describe("The amplitude at resonance with its sign, or the sign alone"),
      sign: reactionSign,
      source,
      use: onlyFit,
    }),
    mapping({
      residue: pair.describe("Entrance and exit channel of one parent; the value is the residue's modulus"),
      value: quantity("MeV", nonNegative),
      phase: quantity("rad")
        .optional()
        .describe(
          "Its phase. Couplings are real here, so it gives the sign alone: + up to 90 deg, - beyond. Without it only the modulus counts",
        ),
      sign: reactionSign,
      source,
      use: onlyFit,
    }),
    mapping({
      total: z.string().describe("A parent; the value is the sum of its channels in this study"),
      value: quantity("MeV", nonNegative),
      source,
      use: onlyFit,
    }),
    mapping({
      axial: z.string().describe("A semileptonic transition such as `n -> p`; the value is g1/f1"),
      value: quantity("1"),
      source,
      use: onlyFit,
    }),
  ],
  {
    error:
      "expected a measurement: one of `width`, `fraction`, `ratio`, `product`, `amplitude`, `residue`, `total` or `axial`, with `value` and `source`",
  },
);

export const relativeError = quantity("1", (q) =>
  q.value > 0 && q.value < 1 ? undefined : "expected a relative error > 0 and < 1",
);

export const mode = z
  .string()
  .describe(
    "A final state such as `N(1520)+ -> p gamma`, or with `+ c.c.` at its end that and its charge conjugate",
  );
const modeForm = {
  power: z
    .number()
    .min(0)
    .max(20)
    .optional()
    .describe(
      "The width grows as the distance from threshold to this power. Default: (3n - 5)/2 for n daughters, 3 with one photon",
    ),
  threshold: threshold.optional().describe("Default: the sum of the daughters' masses"),
  weak: z.boolean().default(false).describe("Whether strangeness and charm may change"),
  phase: quantity("rad").optional().describe("Phase of a weak amplitude, where neutral kaons interfere"),
  source,
};
const measuredValue = (unit: "MeV" | "1", check: (q: Quantity) => string | undefined) =>
  quantity(unit, (q) =>
    q.limit === undefined ? check(q) : "expected a value, since an upper limit settles no row",
  );

export const modeEntry = z.union(
  [
    mapping({ mode, fraction: measuredValue("1", fraction), ...modeForm }),
    mapping({ mode, width: measuredValue("MeV", nonNegative), ...modeForm }),
    mapping({
      mode,
      remainder: z
        .number()
        .positive()
        .describe("Share of what the other rows leave of the total width, relative to other such modes"),
      ...modeForm,
    }),
  ],
  { error: "expected a mode: `mode` with one of `fraction`, `width` or `remainder`, and `source`" },
);
