import { z } from "zod";
import { parseQuantity, type QuantityProblem, quantityForm } from "./quantity.js";
import type { Quantity } from "./study.js";

const DESCRIPTIONS = {
  MeV: "A number with its unit, e.g. `58 +- 3 MeV`, `0.12 GeV` or `58 +4 -3 MeV`",
  rad: "An angle with its unit, e.g. `-15.4 +- 1 deg`",
  1: "A pure number, e.g. `0.40 +- 0.05`, `0.40 +0.05 -0.04` or `40 +- 5 %`",
};

/** A mapping with these keys and no others; a key it does not know is refused with those it knows. */
function mapping<T extends z.core.$ZodLooseShape>(shape: T) {
  return z.strictObject(shape, {
    error: (issue) => {
      if (issue.code !== "unrecognized_keys") return undefined;
      const unknown = issue.keys.map((key: string) => `\`${key}\``).join(", ");
      return `expected keys among ${Object.keys(shape).join(", ")}, got ${unknown}`;
    },
  });
}

/** A quantity in `unit`; `check` says what else it must be, in words, or undefined. */
function quantity(unit: Quantity["unit"], check: (q: Quantity) => string | undefined = () => undefined) {
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

function isProblem(read: Quantity | QuantityProblem): read is QuantityProblem {
  return "problem" in read;
}

const positive = (what: string) => (q: Quantity) => (q.value > 0 ? undefined : `expected a ${what} > 0`);
const mass = quantity("MeV", positive("mass"));
const width = quantity("MeV", positive("width"));

const SPIN_PARITY = /^(?<number>\d+)(?<half>\/2)?(?<sign>[+-])(?<charge>[+-])?$/;

const spinParity = z
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

const spin = z
  .union([z.string().regex(/^\d+(\/2)?$/, { error: "expected a spin such as 1 or 3/2" }), z.int().min(0)], {
    error: "expected a spin such as 1 or 3/2",
  })
  .transform((text) => (String(text).endsWith("/2") ? Number.parseInt(String(text), 10) : 2 * Number(text)));

const mcAliases = z
  .array(z.int())
  .default([])
  .describe("Other Monte Carlo numbers in use for it: readers and the sidecar find it by these too");

const chargeState = mapping({
  mass: mass.optional(),
  width: width.optional(),
  mcNumber: z.int().optional().describe("Monte Carlo number, where the catalogue has none or another"),
  mcAliases,
}).describe("What one charge state has of its own");

const member = mapping({
  name: z.string().min(1).describe("Name of the isospin multiplet, e.g. `Lambda(1830)`"),
  place: z
    .string()
    .min(1)
    .describe("Place in the irrep: N, Lambda, Sigma, Xi, Delta, Omega, pi, K, Kbar, eta, or `Y=0 I=1`"),
  mass: z
    .union([z.literal("relation"), mass], {
      error: "expected a mass > 0 with its unit, or `relation` for the Gell-Mann-Okubo relation",
    })
    .optional()
    .describe("Mass, or `relation` to fill it from the other members. Default: of the catalogue, by name"),
  width: z
    .union([z.literal("sum"), width], { error: "expected a total width > 0 with its unit, or `sum`" })
    .optional()
    .describe("Total width, or `sum` for the sum of the rows. Default: of the catalogue, by name"),
  chargeStates: z
    .record(z.string(), chargeState)
    .optional()
    .describe("What single charge states have of their own, by name, e.g. `N(1675)+`"),
});

const multiplet = mapping({
  irrep: z
    .union([z.string(), z.int()], { error: "expected an irrep such as 8, 10bar or `2,1`" })
    .transform(String)
    .describe("e.g. 8, 10, 10bar, 27 or `2,1`"),
  spinParity,
  baryonNumber: z.int().optional().describe("Default: 1 for half-integer spin, 0 for integer spin"),
  members: z.array(member).default([]).describe("Isospin multiplets; those not listed are not in the table"),
});

const option = z
  .union([z.number(), z.string()], { error: "expected a number, or one with its unit" })
  .transform((input, context): number | Quantity => {
    if (typeof input === "number") return input;
    const read = parseQuantity(input, "MeV");
    if (!isProblem(read)) return read;
    context.addIssue({ code: "custom", message: read.problem });
    return z.NEVER;
  });

const model = z
  .union(
    [
      z.string().transform((id) => ({ id, options: {} as Record<string, number | Quantity> })),
      z
        .object({ id: z.string().describe("Name of the width model") })
        .catchall(option)
        .transform(({ id, ...options }) => ({ id, options })),
    ],
    { error: "expected a width model's name, or a mapping with its `id` and options" },
  )
  .describe("Width model by name, or its name as `id` with options");

const decay = mapping({
  name: z
    .string()
    .min(1)
    .optional()
    .describe("Prefix of the couplings' names; needed only to tell several decays apart"),
  from: z.string().describe("A multiplet of this study, or one of the catalogue"),
  to: z
    .tuple([z.string(), z.string()])
    .describe("Two multiplets, baryon first, meson second: the order fixes the sign of F"),
  L: z.int().min(0).max(8).describe("Orbital angular momentum"),
  S: spin.optional().describe("Total spin of the daughters; needed only where L leaves a choice"),
  model,
  masses: z
    .enum(["charge", "average"])
    .default("charge")
    .describe("Masses of each charge state, or isospin averages"),
  daughters: z
    .enum(["folded", "nominal"])
    .default("folded")
    .describe("Unstable daughters averaged over their line shapes, or at their nominal masses"),
});

const angle = z
  .union([z.enum(["free", "quadratic masses", "linear masses"]), quantity("rad")], {
    error: `expected \`free\`, \`quadratic masses\`, \`linear masses\`, or ${quantityForm("rad")}`,
  })
  .describe("A mixing angle: fitted, from the masses of a meson octet and its singlet, or given");

const mixing = mapping({
  bare: z
    .array(z.string())
    .min(2)
    .describe("Bare states as `multiplet/place`, e.g. `pseudoscalar-octet/eta`"),
  states: z
    .array(member.omit({ place: true, mass: true }).extend({ mass: mass.optional() }))
    .min(2)
    .describe("Physical states, as many as bare ones"),
  angle: angle.optional().describe("The angle of two states"),
  angles: z.array(angle).min(1).optional().describe("Angles of n states: (1,2), (1,3), ..., (2,3), ..."),
  convention: z
    .enum(["rotation", "meson", "quark"])
    .default("rotation")
    .describe(
      "rotation: |1> = cos|a> + sin|b>; meson: |1> = cos|8> - sin|1>; quark: |1> = cos|nn> - sin|ss>",
    ),
});

const use = z.enum(["fit", "table", "both"]).default("both").describe("Where the value counts");
const source = z.string().min(1).describe("Where the value comes from: it goes into the table");
const nonNegative = (q: Quantity) => (q.value >= 0 ? undefined : "expected a value >= 0");
const fraction = (q: Quantity) =>
  q.value >= 0 && q.value <= 1 ? undefined : "expected a fraction from 0 to 1";
const signedFraction = (q: Quantity) =>
  Math.abs(q.value) <= 1 ? undefined : "expected a number from -1 to 1";
const onlyFit = z.literal("fit").default("fit").describe("Such a value settles no row by itself");
const normalisation = z.string().optional().describe("Name of a common normalisation");
const channel = z
  .string()
  .describe("A channel such as `N(1675) -> N pi`; isospin multiplets stand for all their charge states");
const pair = z.tuple([channel, channel]);

const reactionSign = z
  .union([z.enum(["+", "-", "free"]), z.literal(1), z.literal(-1)])
  .default("free")
  .describe("Sign s_f of the reaction against these phases; `free` is fitted, one for each reaction");

const measurement = z.union(
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

const relativeError = quantity("1", (q) =>
  q.value > 0 && q.value < 1 ? undefined : "expected a relative error > 0 and < 1",
);

const mode = z
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
  threshold: mass.optional().describe("Default: the sum of the daughters' masses"),
  weak: z.boolean().default(false).describe("Whether strangeness and charm may change"),
  phase: quantity("rad").optional().describe("Phase of a weak amplitude, where neutral kaons interfere"),
  source,
};
const measuredValue = (unit: "MeV" | "1", check: (q: Quantity) => string | undefined) =>
  quantity(unit, (q) =>
    q.limit === undefined ? check(q) : "expected a value, since an upper limit settles no row",
  );

const modeEntry = z.union(
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

const particle = mapping({
  name: z
    .string()
    .min(1)
    .regex(/^\S+$/, { error: "expected a name without blanks" })
    .describe("Its name with its charge, such as `a1(1260)+`; its antiparticle comes with it"),
  mass: quantity("MeV", nonNegative),
  width: width.optional().describe("Absent for a stable particle"),
  charge: z.int().describe("In units of the proton charge"),
  spinParity,
  isospin: spin.optional().describe("Needed where a mode of it names isospin multiplets"),
  baryonNumber: z.int().default(0).describe("1 for a baryon"),
  strangeness: z.int().default(0).describe("+1 for K+"),
  charm: z.int().default(0).describe("+1 for D+"),
  mcNumber: z.int().optional().describe("Monte Carlo number"),
  mcAliases,
});

/** The form of a study file; from this one description come the checks and their messages. */
export const studySchema = mapping({
  couplet: z.literal(1).describe("Version of the study format"),
  title: z.string().min(1).describe("What the study is about: it goes into the table"),
  multiplets: z
    .record(z.string(), multiplet)
    .default({})
    .describe("Multiplets that the catalogue has not, by an id of your choice"),
  mixing: z.array(mixing).default([]).describe("Physical states that are superpositions of bare ones"),
  decays: z
    .array(decay)
    .min(1)
    .describe("Decays between multiplets; all channels of one share its couplings"),
  quarkLine: z
    .array(z.array(z.string()).min(1))
    .default([])
    .describe("Families of decays, by name, whose couplings the quark-line rule ties together"),
  measurements: z
    .array(measurement)
    .min(1)
    .describe("What has been measured: it fixes the couplings and stays as it is in the table"),
  modes: z
    .array(modeEntry)
    .default([])
    .describe("Measured decays outside the symmetry: three-body, radiative, weak; and what a remainder is"),
  particles: z
    .array(particle)
    .default([])
    .describe("Daughters of modes that neither the catalogue nor a multiplet has"),
  normalisations: z
    .record(z.string(), relativeError)
    .default({})
    .describe("Relative errors that several measurements share, by name"),
  priors: z
    .array(
      mapping({
        parameter: z.string().describe("Its name, as `couplet fit` prints it"),
        value: z.union([quantity("1"), quantity("rad")]).describe("What it is known to be, with an error"),
        source,
      }),
    )
    .default([])
    .describe("What is known beforehand of a coupling, an angle, F, D, F/D, alpha_F or alpha_D"),
  fit: mapping({
    mirrors: z
      .enum(["refuse", "best", "each"])
      .default("refuse")
      .describe("Where the data allow several solutions: refuse, take the best, or write one file each"),
    theoryError: z
      .number()
      .min(0)
      .max(1)
      .default(0)
      .describe("Breaking of the symmetry in amplitude that enters the fit; 0 leaves it out"),
    masses: z
      .enum(["fixed", "vary"])
      .default("vary")
      .describe("Whether the parents' masses move within their errors"),
  })
    .prefault({})
    .describe("How the fit is made"),
  tables: mapping({
    breaking: z
      .number()
      .min(0)
      .max(1)
      .default(0.2)
      .describe("Breaking of the symmetry in amplitude, for the errors of predicted rows"),
    conflicts: z
      .enum(["refuse", "constrained"])
      .default("refuse")
      .describe(
        "Fractions that add up to more than 1: refuse, or move them within 2 sigma and flag the rows",
      ),
    neutralKaons: z
      .enum(["flavour", "short-long"])
      .default("flavour")
      .describe("Neutral kaons as K0 and K0bar, or as K_S0 and K_L0"),
    antiparticles: z
      .enum(["implied", "rows"])
      .default("implied")
      .describe("Antiparticles of parents by charge conjugation in the reader, or with rows of their own"),
    daughters: z
      .enum(["external", "decayed"])
      .default("external")
      .describe("Short-lived ground states among the daughters: left to the reader, or decayed as measured"),
    widthModels: z
      .enum(["own", "compared"])
      .default("own")
      .describe(
        "Whether the fit is repeated with every other width model, so that rows quote the error from the model",
      ),
    replicas: z
      .int()
      .min(0)
      .max(10_000)
      .default(0)
      .describe("Alternatives drawn for each kind of error, with which a finished simulation is reweighted"),
    seed: z
      .int()
      .min(0)
      .max(2 ** 32 - 1)
      .default(1)
      .describe("Seed of the replicas; the same seed gives the same file"),
  })
    .prefault({})
    .describe("How the tables are made"),
});

/** A study that passed the form check, still in the file's own layout. */
export type StudyDocument = z.infer<typeof studySchema>;
