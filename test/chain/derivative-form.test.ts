import { describe, expect, test } from "vitest";
import { catalogueMultiplet } from "../../src/hadrons/catalogue-multiplet.js";
import { isospinAveragedMassMeV } from "../../src/hadrons/multiplet.js";
import { decodeDecays } from "../../src/tables/decode-decays.js";
import { encodeDecays } from "../../src/tables/encode-decays.js";
import { rowsEvaluator, tableHadrons } from "../../src/tables/evaluate-rows.js";
import { parameterValue, rowWidthMeV, tablesOf } from "./run.js";

/** One coupling of an invented flavour singlet of spin 1/2, fixed by its width to N Kbar. */
const study = (spinParity: string, L: number, model: string) => `couplet: 1
title: A singlet of spin 1/2, every number invented
multiplets:
  singlet:
    irrep: 1
    spinParity: ${spinParity}
    members: [{ name: Lambda(1760), place: Lambda, mass: 1760 MeV, width: 80 MeV }]
decays:
  - { from: singlet, to: [baryon-octet, pseudoscalar-octet], L: ${L}, model: ${model}, masses: average }
measurements:
  - { width: Lambda(1760) -> N Kbar, value: 10 +- 1 MeV, source: invented }
`;

const masses = new Map(
  ["baryon-octet", "pseudoscalar-octet"].flatMap((id) =>
    catalogueMultiplet(id).members.map((member) => [member.name, isospinAveragedMassMeV(member)] as const),
  ),
);
const [N, Kbar, Sigma, pi] = ["N", "Kbar", "Sigma", "pi"].map((name) => masses.get(name)!) as [
  number,
  number,
  number,
  number,
];

/** Model d for spin 1/2 written out here, for g = 1 or, in the derivative form, f/m_s = 1/MeV. */
function widthMeV(M: number, m: number, meson: number, L: number, derivative: boolean): number {
  const q = Math.sqrt((M ** 2 - (m + meson) ** 2) * (M ** 2 - (m - meson) ** 2)) / (2 * M);
  const sign = L === 0 ? 1 : -1;
  const E = Math.sqrt(m ** 2 + q ** 2);
  return ((q * (E + sign * m)) / (4 * Math.PI * M)) * (derivative ? (M - sign * m) ** 2 : 1);
}

const SIGMA_PI = ["Sigma+ pi-", "Sigma0 pi0", "Sigma- pi+"];
const N_KBAR = ["p K-", "n K0bar"];

describe.each([
  ["1/2-", 0],
  ["1/2+", 1],
])("a study of a %s singlet with model d", (spinParity, L) => {
  test.each([
    ["d", false],
    ["{ id: d, derivativeForm: 0 }", false],
    ["{ id: d, derivativeForm: 1 }", true],
    ["{ id: d, derivativeForm: 1, scaleMeV: 1000 }", true],
  ])("model: %s", (model, derivative) => {
    const tables = tablesOf(study(spinParity, L, model));
    const ofKbar = rowWidthMeV(tables, "Lambda(1760)", N_KBAR);
    const K = [widthMeV(1760, Sigma, pi, L, derivative), widthMeV(1760, N, Kbar, L, derivative)];
    // Singlet to octets, squares 3 : 2 of Sigma pi and N Kbar: J. J. de Swart, Rev. Mod. Phys. 35 (1963) 916; memory.
    expect(rowWidthMeV(tables, "Lambda(1760)", SIGMA_PI) / ofKbar / ((1.5 * K[0]!) / K[1]!)).toBeCloseTo(
      1,
      8,
    );
    const name = tables.fit.minima[0]!.parameters.find(({ kind }) => kind === "coupling")!.name;
    const coupling = parameterValue(tables.fit.minima[0]!, name);
    const scale = derivative ? (model.includes("1000") ? 1000 : 139.57) : 1;
    // Of the unit vector of 1 -> 8 x 8 over 8 states, N Kbar has 1/4.
    expect((coupling / scale) ** 2 / 4 / (ofKbar / K[1]!)).toBeCloseTo(1, 6);

    const file = decodeDecays(encodeDecays(tables), "test.pb");
    const [parent] = file.parents;
    const evaluator = rowsEvaluator(parent!, tableHadrons(file));
    const widths = [0, 1].map(() => new Array<number>(evaluator.rowCount).fill(0));
    for (const [k, massMeV] of [1760, 1950].entries()) evaluator.widthsInto(massMeV, widths[k]!, 0);
    const row = parent!.rows.findIndex(({ id }) => id === "Lambda(1760) -> p K-");
    const [p, Kminus] = parent!.rows[row]!.daughters.map(
      ({ name }) => file.externals.find((hadron) => hadron.name === name)!.mass!,
    );
    const grown = widthMeV(1950, p!, Kminus!, L, derivative) / widthMeV(1760, p!, Kminus!, L, derivative);
    expect(widths[1]![row]! / widths[0]![row]! / grown).toBeCloseTo(1, 10);
  });
});
