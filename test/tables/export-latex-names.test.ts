import { expect, test } from "vitest";
import { latexHadron } from "../../src/tables/export-latex-names.js";

test.each([
  ["p", "p"],
  ["Sigma(1385)+", "\\Sigma(1385)^{+}"],
  ["Delta(1232)++", "\\Delta(1232)^{++}"],
  ["K0bar", "\\overline{K^{0}}"],
  ["pbar", "\\overline{p}"],
  ["K2*(1430)+", "K_{2}^{*}(1430)^{+}"],
  ["K*(892)-", "K^{*}(892)^{-}"],
  ["f2'(1525)", "f_{2}^{\\prime}(1525)"],
  ["eta'(958)", "\\eta^{\\prime}(958)"],
  ["D_s+", "D_{s}^{+}"],
  ["K_S0", "K_{S}^{0}"],
  ["chi_c0(1P)", "\\chi_{c0}(1P)"],
  ["J/psi(1S)", "J/\\psi(1S)"],
  ["a&b_{c}%", "\\mathrm{a\\&b\\_\\{c\\}\\%}"],
])("%s is typeset as %s", (name, latex) => {
  expect(latexHadron(name)).toBe(latex);
});
