import { parseIrrep } from "../su3/irrep.js";
import { type Baseline, baselineCheck, type MeantChange } from "./baseline.js";
import type { PlannedCheck } from "./check.js";
import { identityChecks } from "./identity-checks.js";
import { publishedChecks } from "./published-checks.js";
import { quarkAndLagrangianChecks } from "./quark-and-lagrangian-checks.js";
import { roundingCheck } from "./rounding-check.js";

/** What an audit compares with, beside what the package itself holds. */
export interface AuditInput {
  /** The identities run over all products with p + q up to this. */
  readonly largestSum: number;
  readonly baseline: Baseline;
  readonly meant: readonly MeantChange[];
}

/** Products whose doubles are compared one by one, about 115000 of them. */
const ROUNDED = [
  ["8", "8"],
  ["27", "27"],
  ["125", "125"],
] as const;

/** The checks of an audit in the order they run. */
export function plannedChecks({ largestSum, baseline, meant }: AuditInput): PlannedCheck[] {
  return [
    ...publishedChecks(),
    ...quarkAndLagrangianChecks(),
    ...identityChecks({ largestSum }),
    roundingCheck(ROUNDED.map(([left, right]) => [parseIrrep(left), parseIrrep(right)] as const)),
    baselineCheck(baseline, meant),
  ];
}
