import { formatRoot } from "../exact/signed-root.js";
import { publishedIsoscalarTables } from "../published/isoscalar-tables.js";
import type { PublishedTable } from "../published/published-table.js";
import { isoscalarTable } from "../su3/isoscalar-factors.js";
import { type AuditCheck, Findings, type PlannedCheck } from "./check.js";

/** One check for each table of isoscalar factors in the package, value by value with its sign. */
export function publishedChecks(): PlannedCheck[] {
  return publishedIsoscalarTables().map((table) => ({
    name: `published/${table.name}`,
    run: () => publishedCheck(table),
  }));
}

/** The check of one table; magnitudes alone where it has no signs. */
export function publishedCheck(table: PublishedTable): AuditCheck {
  const findings = new Findings();
  const { left, right, irrep, copy, signs, source, provenance, kind, name } = table;
  const engine = isoscalarTable(left, right, { into: irrep });
  for (const row of table.rows) {
    const value = engine.factor(irrep, copy, row, row);
    const computed = formatRoot(signs || value.sign === 0 ? value : { ...value, sign: 1 });
    findings.compare(
      computed === formatRoot(row.value),
      () => `${row.decay}: ${kind} ${formatRoot(row.value)}, computed ${computed}`,
    );
  }
  return findings.exact(
    `published/${name}`,
    signs ? "every value, with its sign" : "every magnitude",
    `${source.authors}, ${source.title}, ${source.journal} (${kind}, provenance: ${provenance})`,
  );
}
