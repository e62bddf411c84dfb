import { createHash } from "node:crypto";
import { TableError } from "../errors.js";
import { formatRational, type Rational } from "../exact/rational.js";
import { signedSquare } from "../exact/signed-root.js";
import { type Irrep, irrepName, parseIrrep } from "../su3/irrep.js";
import {
  type FactorSegment,
  type IsoscalarTable,
  isoscalarTable,
  valueAt,
} from "../su3/isoscalar-factors.js";
import { Findings, type PlannedCheck } from "./check.js";
import { productName } from "./identity-checks.js";

/**
 * Tables of an earlier version, to notice any change: a digest of each canonical table, and what names the difference.
 * Small products carry all their signed squares, in the order of the table; large ones a short digest of every copy.
 */
export interface Baseline {
  /** The version of Couplet that made it. */
  readonly version: string;
  readonly products: readonly BaselineProduct[];
}

export interface BaselineProduct {
  /** As p,q. */
  readonly left: string;
  readonly right: string;
  /** SHA-256 of the canonical text. */
  readonly sha256: string;
  /** Signed squares such as `-9/20`, zeros included; separated by blanks. */
  readonly squares?: string;
  /** Short digests of the copies, in the order of the table; separated by blanks. */
  readonly copies?: string;
}

/** A change of coefficients that was meant, as a line of the change log says. */
export interface MeantChange {
  /** e.g. `8x8`. */
  readonly product: string;
  readonly reason: string;
}

const SHORT_DIGEST = 12;

/**
 * The meant changes in a change log: lines `- coefficients of 8x8 changed: reason`, or `of all products`.
 *
 * @param text - CHANGELOG.md
 */
export function meantChanges(text: string): MeantChange[] {
  return [...text.matchAll(/^- coefficients of (all products|\S+) changed: (.*\S)\s*$/gm)].map((match) => ({
    product: match[1]!,
    reason: match[2]!,
  }));
}

/** The baseline of this version: all signed squares for the first list, digests of copies for the second. */
export function makeBaseline(
  version: string,
  small: readonly (readonly [Irrep, Irrep])[],
  large: readonly (readonly [Irrep, Irrep])[],
): Baseline {
  const labels = ({ p, q }: Irrep) => `${p},${q}`;
  const entry = ([left, right]: readonly [Irrep, Irrep], isSmall: boolean): BaselineProduct => {
    const canonical = canonicalTable(isoscalarTable(left, right));
    const named = isSmall
      ? { squares: squaresOf(canonical).join(" ") }
      : { copies: copyDigests(canonical).join(" ") };
    return { left: labels(left), right: labels(right), sha256: digest(canonical.text), ...named };
  };
  return {
    version,
    products: [...small.map((pair) => entry(pair, true)), ...large.map((pair) => entry(pair, false))],
  };
}

/** One check for the whole baseline: every product's digest, and the name of every coefficient that changed. */
export function baselineCheck(baseline: Baseline, meant: readonly MeantChange[]): PlannedCheck {
  const name = `baseline/${baseline.version}`;
  return {
    name,
    run: () => {
      const findings = new Findings();
      for (const product of baseline.products) compareProduct(product, meant, findings);
      const explained = findings.explained.length === 0 ? "" : `; meant: ${findings.explained.join("; ")}`;
      return findings.exact(
        name,
        `digests of ${baseline.products.length} tables${explained}`,
        `Couplet ${baseline.version}; a change needs a reason in CHANGELOG.md`,
      );
    },
  };
}

function compareProduct(product: BaselineProduct, meant: readonly MeantChange[], findings: Findings): void {
  const [left, right] = [parseIrrep(product.left), parseIrrep(product.right)];
  const name = productName(left, right);
  const canonical = canonicalTable(isoscalarTable(left, right));
  const same = digest(canonical.text) === product.sha256;
  const reason = same
    ? undefined
    : meant.find((change) => change.product === name || change.product === "all products");
  if (reason !== undefined) findings.explained.push(`${name}: ${reason.reason}`);
  findings.compare(same || reason !== undefined, () => `${name} changed`);
  if (!same && reason === undefined) findings.differences.push(...changesOf(product, name, canonical));
}

/** A line for each coefficient that differs, or for each copy where the baseline has no coefficients. */
function changesOf(product: BaselineProduct, name: string, canonical: CanonicalTable): string[] {
  const { lines } = canonical;
  if (product.squares !== undefined) {
    const then = product.squares.split(" ");
    const missing =
      then.length === lines.length
        ? []
        : [`${name}: ${then.length} coefficients before, ${lines.length} now`];
    const changed = lines.flatMap(({ label, square }, i) =>
      square === then[i]
        ? []
        : [`${name}, ${label}: signed square ${then[i] ?? "none"} before, ${square} now`],
    );
    return [...missing, ...changed];
  }
  if (product.copies === undefined)
    throw new TableError(
      `baseline: ${name}: expected squares or copies, got neither. Make the baseline again.`,
    );
  const then = product.copies.split(" ");
  const copies = [...new Set(lines.map(({ copy }) => copy))];
  return copyDigests(canonical).flatMap((now, i) =>
    now === then[i] ? [] : [`${name}, ${copies[i]!}: changed`],
  );
}

interface CanonicalLine {
  /** `8_2`. */
  readonly copy: string;
  readonly label: string;
  readonly square: string;
}

interface CanonicalTable {
  readonly lines: readonly CanonicalLine[];
  readonly text: string;
}

/** One line a factor, zeros included, in the order of the table. */
function canonicalTable(table: IsoscalarTable): CanonicalTable {
  const columns = table.columns();
  const lines = columns.segments.flatMap((segment) =>
    segment.channels.map((_, c) => line(segment, c, signedSquare(valueAt(columns, segment.start + c)))),
  );
  const head = `${table.convention} ${table.multiplicityRule}\n`;
  return { lines, text: head + lines.map(({ label, square }) => `${label} ${square}\n`).join("") };
}

function line(
  { irrep, copy, threeY, twoI, channels }: FactorSegment,
  c: number,
  square: Rational,
): CanonicalLine {
  const { threeY1, twoI1, threeY2, twoI2 } = channels[c]!;
  const name = `${irrepName(irrep)}_${copy}`;
  const label = `${name} (3Y ${threeY}, 2I ${twoI}) -> (${threeY1}, ${twoI1}) (${threeY2}, ${twoI2})`;
  return { copy: name, label, square: formatRational(square) };
}

function squaresOf({ lines }: CanonicalTable): string[] {
  return lines.map(({ square }) => square);
}

function copyDigests({ lines }: CanonicalTable): string[] {
  const texts = new Map<string, string[]>();
  for (const { copy, label, square } of lines) {
    const list = texts.get(copy) ?? [];
    texts.set(copy, list);
    list.push(`${label} ${square}`);
  }
  return [...texts.values()].map((list) => digest(list.join("\n")).slice(0, SHORT_DIGEST));
}

function digest(text: string): string {
  return createHash("sha256").update(text).digest("hex");
}
