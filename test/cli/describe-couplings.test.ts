import { describe, expect, test } from "vitest";
import { describeCouplings } from "../../src/cli/describe-couplings.js";
import { couplingTable } from "../../src/completion/tabulate-couplings.js";
import { couplingsMessage } from "../../src/tables/encode-couplings.js";
import { fitOf, MIXED_OCTET, TWENTY_SEVEN } from "../completion/coupling-studies.js";

const textOf = (study: string) =>
  describeCouplings(couplingsMessage(couplingTable(fitOf(study), 0)), "study.yaml");

/** The cells of the first line that starts with a text. */
function cells(text: string, start: string): string[] {
  const line = text.split("\n").find((candidate) => candidate.trimStart().startsWith(start))!;
  return line.trim().split(/ {2,}/);
}

describe("coupling tables in words", () => {
  const text = textOf(MIXED_OCTET);

  test("a charge state stands with its exact coupling in both phases", () => {
    expect(cells(text, "N(1577)+ -> n pi+").slice(0, 3)).toEqual([
      "N(1577)+ -> n pi+",
      "L=2 S=1/2",
      "-sqrt(3/10) octet.g(8_1) - sqrt(1/6) octet.g(8_2)",
    ]);
    expect(cells(text, "N(1577)+ -> n pi+")[4]).toBe("sqrt(2) D + sqrt(2) F");
    expect(cells(text, "N(1577)+ -> n pi+")[3]).toMatch(/^-\d+\.\d+ \+- 0\.\d+ \(br\. 0\.\d+\)$/);
  });

  test("mixed hadrons show the weight of each part", () => {
    expect(cells(text, "N(1577)+ -> p eta ")[2]).toBe(
      "0.9664 (-sqrt(1/20) octet.g(8_1) + 1/2 octet.g(8_2)) + 0.2571 (singlet.g(8))",
    );
  });

  test("an isospin channel names its constant, and the Lagrangian gives it", () => {
    expect(cells(text, "Sigma(1731) -> N Kbar").at(-1)).toBe("~ g(N Sigma K)");
    expect(cells(text, "g(N Sigma K)").slice(1, 2)).toEqual(["D - F"]);
    expect(cells(text, "g(N Sigma K)").at(-1)).toBe("Nbar tau K.Sigma + h.c.");
  });

  test("the matrices are laid out with the Lagrangian", () => {
    expect(text).toContain("L = sqrt2 { D Tr(Bbar {M, B}) + F Tr(Bbar [M, B]) }\n");
    expect(cells(text, "B =")).toEqual(["B =", "sqrt(1/2) Sigma0 + sqrt(1/6) Lambda", "Sigma+", "p"]);
    expect(cells(text, "K- ")).toEqual(["K-", "K0bar", "-sqrt(2/3) eta"]);
  });

  test("columns that no row fills are left out, and what is not defined says so", () => {
    const exotic = textOf(TWENTY_SEVEN);
    expect(cells(exotic, "channel")).toEqual(["channel", "wave", "coupling", "value"]);
    expect(cells(exotic, "Theta1(1900)++ -> p K+").at(-1)).toBe("not defined");
    expect(exotic).not.toContain("Isospin Lagrangian");
  });
});
