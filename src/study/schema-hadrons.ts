import { z } from "zod";
import { anyMass, hadronName, mapping, mass, mcAliases, spin, spinParity, width } from "./schema-values.js";

const chargeState = mapping({
  mass: mass.optional(),
  width: width.optional(),
  mcNumber: z.int().optional().describe("Monte Carlo number, where the catalogue has none or another"),
  mcAliases,
}).describe("What one charge state has of its own");

export const member = mapping({
  name: hadronName.describe("Name of the isospin multiplet, e.g. `Lambda(1830)`"),
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

export const multiplet = mapping({
  irrep: z
    .union([z.string(), z.int()], { error: "expected an irrep such as 8, 10bar or `2,1`" })
    .transform(String)
    .describe("e.g. 8, 10, 10bar, 27 or `2,1`"),
  spinParity,
  baryonNumber: z.int().optional().describe("Default: 1 for half-integer spin, 0 for integer spin"),
  members: z.array(member).default([]).describe("Isospin multiplets; those not listed are not in the table"),
});

export const particle = mapping({
  name: hadronName.describe("Its name with its charge, such as `a1(1260)+`; its antiparticle comes with it"),
  mass: anyMass,
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
