import { existsSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { type Baseline, meantChanges } from "../audit/baseline.js";
import { type AuditCheck, allHold } from "../audit/check.js";
import { plannedChecks } from "../audit/plan.js";
import storedBaseline from "../published/baseline.json";
import { producerName } from "../version.js";
import { integerOption } from "./integer-option.js";
import { print, printJson } from "./print.js";
import { progressBar } from "./progress.js";

/** What `couplet audit` was asked for. */
export interface AuditOptions {
  readonly grid: string;
  readonly json?: true;
}

const LARGEST_GRID = 4;
/** A check with more differences than this shows only the first ones, and their number. */
const SHOWN_DIFFERENCES = 10;

/** `couplet audit`: coefficients against published tables, identities and the last baseline. Exit code 1 on differences. */
export function runAudit(options: AuditOptions): void {
  const mend = "It bounds p + q of both factors.";
  const largestSum = integerOption("couplet audit: --grid", options.grid, 0, LARGEST_GRID, mend);
  const bar = progressBar("audit", true);
  let checks: AuditCheck[];
  try {
    const planned = plannedChecks({
      largestSum,
      baseline: storedBaseline as Baseline,
      meant: meantChanges(changeLog()),
    });
    checks = planned.map((check, i) => {
      bar.report(i, planned.length);
      return check.run();
    });
  } finally {
    bar.end();
  }
  if (options.json) printJson(asJson(checks));
  else print(describe(checks));
  if (!allHold(checks)) process.exitCode = 1;
}

/** The change log of the package; it stands beside package.json. */
function changeLog(): string {
  const path = join(__dirname, "..", "..", "CHANGELOG.md");
  return existsSync(path) ? readFileSync(path, "utf8") : "";
}

function asJson(checks: readonly AuditCheck[]) {
  return { producer: producerName(), holds: allHold(checks), checked: total(checks), checks };
}

function describe(checks: readonly AuditCheck[]): string {
  const blocks = checks.map(({ name, what, source, checked, worst, differences }) => {
    const verdict = differences.length === 0 ? "ok    " : "DIFFER";
    const more = differences.length - SHOWN_DIFFERENCES;
    const lines = [
      ...differences.slice(0, SHOWN_DIFFERENCES),
      ...(more > 0 ? [`and ${more} more; --json lists all`] : []),
    ];
    return (
      `${verdict}  ${name}: ${checked} values, ${differences.length === 0 ? `worst: ${worst}` : `${differences.length} differ`}\n` +
      `        ${what}\n        source: ${source}\n` +
      lines.map((line) => `        ! ${line}\n`).join("")
    );
  });
  const failed = checks.filter(({ differences }) => differences.length > 0).length;
  const verdict =
    failed === 0
      ? `audit passed: ${checks.length} checks, ${total(checks)} values compared\n`
      : `audit FAILED: ${failed} of ${checks.length} checks found differences, ${total(checks)} values compared\n`;
  return `${producerName()}\n${blocks.join("")}${verdict}`;
}

function total(checks: readonly AuditCheck[]): number {
  return checks.reduce((sum, { checked }) => sum + checked, 0);
}
