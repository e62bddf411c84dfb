import { isospinConstants } from "../couplings/isospin-lagrangian.js";
import { addRoots } from "../exact/root-sum.js";
import { formatRoot, negateRoot, type SignedRoot } from "../exact/signed-root.js";
import waveFunctions from "../published/close-1979-quark-wave-functions.json";
import isospinCouplings from "../published/de-swart-1963-isospin-couplings.json";
import { type ContentTerm, productContent } from "../su3/content.js";
import { irrepName, parseIrrep } from "../su3/irrep.js";
import { Findings, type PlannedCheck } from "./check.js";

/** The published tables that are no isoscalar factors: quark wave functions, and constants of the isospin Lagrangian. */
export function quarkAndLagrangianChecks(): PlannedCheck[] {
  return [waveFunctionCheck(), isospinCouplingCheck()];
}

function cited({ source, provenance }: { source: Record<string, string>; provenance: string }): string {
  return `${source["authors"]}, ${source["title"]}, ${source["journal"]} (published, provenance: ${provenance})`;
}

/** Relative signs inside each state; the sign of a whole state is free. */
function waveFunctionCheck(): PlannedCheck {
  const name = "published/close-1979-quark-wave-functions.json";
  return {
    name,
    run: () => {
      const findings = new Findings();
      const quark = parseIrrep("3");
      for (const row of waveFunctions.rows) {
        const contents = productContent([quark, quark, quark], parseIrrep(row.irrep));
        const content = contents.find(({ path }) => irrepName(path.path[0]!.irrep) === row.by);
        const state = content?.states.find(
          ({ state }) => state.threeY === row.threeY && state.twoI === row.twoI && state.twoI3 === row.twoI3,
        );
        const printed = Object.entries(row.terms)
          .map(([letters, value]) => `${letters} ${value}`)
          .sort()
          .join(", ");
        const computed = [1, -1].map((sign) => lettered(state?.terms ?? [], sign));
        findings.compare(
          computed.includes(printed),
          () => `${row.name} by ${row.by}: published ${printed}, computed ${computed[0]}`,
        );
      }
      return findings.exact(name, "every state of three quarks, up to its sign", cited(waveFunctions));
    },
  };
}

function lettered(terms: readonly ContentTerm[], sign: number): string {
  return terms
    .map(({ quarks, value }) => {
      const letters = quarks.map((index) => "uds".charAt(index)).join("");
      return `${letters} ${formatRoot(sign < 0 ? negateRoot(value) : value)}`;
    })
    .sort()
    .join(", ");
}

/** g (D (1 - alpha) + F alpha) = g (constantTerm + alphaTerm alpha). */
function isospinCouplingCheck(): PlannedCheck {
  const name = "published/de-swart-1963-isospin-couplings.json";
  return {
    name,
    run: () => {
      const findings = new Findings();
      const constants = isospinConstants();
      for (const { constant, constantTerm, alphaTerm } of isospinCouplings.rows) {
        const found = constants.find((other) => other.name === constant);
        const computed =
          found === undefined
            ? "nothing"
            : `${text([found.D])} + alpha ${text([found.F, negateRoot(found.D)])}`;
        const printed = `${constantTerm} + alpha ${alphaTerm}`;
        findings.compare(
          computed === printed,
          () => `${constant}: published ${printed}, computed ${computed}`,
        );
      }
      return findings.exact(name, "every constant, as a function of alpha", cited(isospinCouplings));
    },
  };
}

function text(roots: readonly SignedRoot[]): string {
  const sum = addRoots(roots);
  return sum.length === 0 ? "0" : sum.map(formatRoot).join(" + ");
}
