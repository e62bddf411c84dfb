import { readFileSync } from "node:fs";
import { join } from "node:path";
import { type Fit, fitModel } from "../src/model/fit-model.js";
import { resolveStudy } from "../src/model/resolve-study.js";
import { readStudy } from "../src/study/read-study.js";

/**
 * The fit of ten observables that the benches use: the nine fractions of the 3/2- octet alone, and a tenth that is
 * invented. It has 2 couplings and 8 masses and total widths held by priors, so 18 residuals and 10 parameters.
 */
export function tenObservables(): Fit {
  const file = join(__dirname, "..", "test", "chain", "studies", "octet-3-2-alone.yaml");
  const tenth = "  - { fraction: N(1520) -> N eta, value: 0.0008 +- 0.0004, source: invented }\n";
  const text = Buffer.concat([readFileSync(file), Buffer.from(tenth)]);
  return fitModel(resolveStudy(readStudy(text, file)));
}
