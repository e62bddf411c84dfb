import { z } from "zod";
import { studySchema } from "./schema.js";

/**
 * A JSON Schema (draft 2020-12) of the study file as it is written, for editors: names, forms and descriptions come from
 * the description that the checks themselves use.
 *
 * It knows the form only: that `58 +- 3` lacks its unit, or that a hadron does not exist, is for `couplet fit` to say.
 */
export function studyJsonSchema(): Readonly<Record<string, unknown>> {
  const { $schema, ...schema } = z.toJSONSchema(studySchema, { io: "input" });
  return {
    $schema,
    title: "A study for Couplet",
    description: "Multiplets of hadrons, decays between them, and what has been measured",
    ...schema,
  };
}
