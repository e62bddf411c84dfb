import { z } from "zod";
import { parseQuantity, quantityForm } from "./quantity.js";
import { member, multiplet, particle } from "./schema-hadrons.js";
import { measurement, modeEntry, relativeError } from "./schema-measurements.js";
import { isProblem, mapping, mass, quantity, source, spin } from "./schema-values.js";
import type { Quantity } from "./study.js";

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

const TIED = "tied to ";
const tied = z
  .string()
  .startsWith(TIED)
  .transform((text) => ({ tiedTo: text.slice(TIED.length).trim() }));

const angle = z
  .union([z.enum(["free", "quadratic masses", "linear masses"]), tied, quantity("rad")], {
    error: `expected \`free\`, \`quadratic masses\`, \`linear masses\`, \`tied to\` a state of another pair, or ${quantityForm("rad")}`,
  })
  .describe(
    "A mixing angle: fitted, from the masses of a meson octet and its singlet, from another pair of the same multiplets, or given",
  );

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
      .describe(
        "Breaking of the symmetry that enters the fit, as a part of the coupling strength |g| like `tables: breaking`; 0 leaves it out",
      ),
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
      .describe(
        "Breaking of the symmetry in amplitude, for the errors of predicted rows: A -> A + breaking |g| z with one normal number z for each isospin channel. It is a part of the coupling strength |g|, not of the channel's amplitude: 0.2 is 40 % of the amplitude of a channel that takes a quarter of |g|^2",
      ),
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
