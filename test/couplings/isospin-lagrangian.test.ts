import { describe, expect, test } from "vitest";
import { fAndDForm } from "../../src/couplings/f-and-d.js";
import { isospinConstantName, isospinConstants } from "../../src/couplings/isospin-lagrangian.js";
import { MatrixConvention } from "../../src/couplings/matrix-convention.js";
import { addRoots } from "../../src/exact/root-sum.js";
import {
  formatRoot,
  multiplyRoots,
  negateRoot,
  parseRoot,
  rootToNumber,
  type SignedRoot,
} from "../../src/exact/signed-root.js";
import table from "../../src/published/de-swart-1963-isospin-couplings.json";
import { BARYONS, MESONS, makerOf, placeOfMember, stateOf } from "./schemes.js";

const maker = makerOf("8", ["8", "8"]);
const matrices = new MatrixConvention();
const constants = isospinConstants();

/**
 * Constants in units of g(N N pi), evaluated at four values of alpha by another program from symbolic traces.
 * Columns: alpha = 0, 0.4, 1, 0.365.
 */
const NUMBERS: Record<string, readonly [number, number, number, number]> = {
  "N N pi": [1, 1, 1, 1],
  "Lambda Sigma pi": [1.1547005384, 0.692820323, 0, 0.7332348419],
  "Sigma Sigma pi": [0, 0.8, 2, 0.73],
  "Xi Xi pi": [-1, -0.2, 1, -0.27],
  "N N eta8": [-0.5773502692, 0.3464101615, 1.7320508076, 0.2655811238],
  "Lambda Lambda eta8": [-1.1547005384, -0.692820323, 0, -0.7332348419],
  "Sigma Sigma eta8": [1.1547005384, 0.692820323, 0, 0.7332348419],
  "Xi Xi eta8": [-0.5773502692, -1.0392304845, -1.7320508076, -0.9988159657],
  "N Lambda K": [-0.5773502692, -1.0392304845, -1.7320508076, -0.9988159657],
  "N Sigma K": [1, 0.2, -1, 0.27],
  "Xi Lambda K": [-0.5773502692, 0.3464101615, 1.7320508076, 0.2655811238],
  "Xi Sigma K": [-1, -1, -1, -1],
};

/**
 * Every charge term of the isospin Lagrangian, written out by hand from its vertices: [constant, times, Rbar, B, M].
 * Spherical components: Sigma.pi = Sigma+ pi- + Sigma0 pi0 + Sigma- pi+, and -i (Sigmabar x Sigma) pointing along pi0
 * is Sigma+bar Sigma+ - Sigma-bar Sigma-.
 */
const ROOT2 = "sqrt(2)";
const TERMS: readonly (readonly [string, string, string, string, string])[] = [
  ["N N pi", "1", "p", "p", "pi0"],
  ["N N pi", "-1", "n", "n", "pi0"],
  ["N N pi", ROOT2, "p", "n", "pi+"],
  ["N N pi", ROOT2, "n", "p", "pi-"],
  ["Xi Xi pi", "1", "Xi0", "Xi0", "pi0"],
  ["Xi Xi pi", "-1", "Xi-", "Xi-", "pi0"],
  ["Xi Xi pi", ROOT2, "Xi0", "Xi-", "pi+"],
  ["Xi Xi pi", ROOT2, "Xi-", "Xi0", "pi-"],
  ["Lambda Sigma pi", "1", "Lambda", "Sigma+", "pi-"],
  ["Lambda Sigma pi", "1", "Lambda", "Sigma0", "pi0"],
  ["Lambda Sigma pi", "1", "Lambda", "Sigma-", "pi+"],
  ["Lambda Sigma pi", "1", "Sigma+", "Lambda", "pi+"],
  ["Lambda Sigma pi", "1", "Sigma0", "Lambda", "pi0"],
  ["Lambda Sigma pi", "1", "Sigma-", "Lambda", "pi-"],
  ["Sigma Sigma pi", "1", "Sigma+", "Sigma+", "pi0"],
  ["Sigma Sigma pi", "-1", "Sigma-", "Sigma-", "pi0"],
  ["Sigma Sigma pi", "-1", "Sigma+", "Sigma0", "pi+"],
  ["Sigma Sigma pi", "1", "Sigma0", "Sigma-", "pi+"],
  ["Sigma Sigma pi", "-1", "Sigma0", "Sigma+", "pi-"],
  ["Sigma Sigma pi", "1", "Sigma-", "Sigma0", "pi-"],
  ["N N eta8", "1", "p", "p", "eta"],
  ["N N eta8", "1", "n", "n", "eta"],
  ["Lambda Lambda eta8", "1", "Lambda", "Lambda", "eta"],
  ["Sigma Sigma eta8", "1", "Sigma+", "Sigma+", "eta"],
  ["Sigma Sigma eta8", "1", "Sigma0", "Sigma0", "eta"],
  ["Sigma Sigma eta8", "1", "Sigma-", "Sigma-", "eta"],
  ["Xi Xi eta8", "1", "Xi0", "Xi0", "eta"],
  ["Xi Xi eta8", "1", "Xi-", "Xi-", "eta"],
  ["N Lambda K", "1", "p", "Lambda", "K+"],
  ["N Lambda K", "1", "n", "Lambda", "K0"],
  ["N Lambda K", "1", "Lambda", "p", "K-"],
  ["N Lambda K", "1", "Lambda", "n", "K0bar"],
  ["N Sigma K", "1", "p", "Sigma0", "K+"],
  ["N Sigma K", ROOT2, "p", "Sigma+", "K0"],
  ["N Sigma K", "-1", "n", "Sigma0", "K0"],
  ["N Sigma K", ROOT2, "n", "Sigma-", "K+"],
  ["N Sigma K", "1", "Sigma0", "p", "K-"],
  ["N Sigma K", ROOT2, "Sigma+", "p", "K0bar"],
  ["N Sigma K", "-1", "Sigma0", "n", "K0bar"],
  ["N Sigma K", ROOT2, "Sigma-", "n", "K-"],
  ["Xi Lambda K", "1", "Xi0", "Lambda", "K0bar"],
  ["Xi Lambda K", "-1", "Xi-", "Lambda", "K-"],
  ["Xi Lambda K", "1", "Lambda", "Xi0", "K0"],
  ["Xi Lambda K", "-1", "Lambda", "Xi-", "K+"],
  ["Xi Sigma K", "1", "Xi0", "Sigma0", "K0bar"],
  ["Xi Sigma K", `-${ROOT2}`, "Xi0", "Sigma+", "K-"],
  ["Xi Sigma K", "1", "Xi-", "Sigma0", "K-"],
  ["Xi Sigma K", ROOT2, "Xi-", "Sigma-", "K0bar"],
  ["Xi Sigma K", "1", "Sigma0", "Xi0", "K0"],
  ["Xi Sigma K", `-${ROOT2}`, "Sigma+", "Xi0", "K+"],
  ["Xi Sigma K", "1", "Sigma0", "Xi-", "K+"],
  ["Xi Sigma K", ROOT2, "Sigma-", "Xi-", "K0"],
];

describe("isospin Lagrangian", () => {
  test("its 12 constants are those of de Swart, exactly", () => {
    const found = constants.map(({ name, D, F }) => [name, formatRoot(D), formatRoot(F)]);
    const published = table.rows.map(({ constant, constantTerm, alphaTerm }) => {
      const sum = addRoots([parseRoot(constantTerm), parseRoot(alphaTerm)]).map(formatRoot);
      return [constant, constantTerm, sum[0] ?? "0"];
    });
    expect(found).toEqual(published);
  });

  test.each([0, 0.4, 1, 0.365].map((alpha, column) => [alpha, column] as const))(
    "has the numbers of the table at alpha = %s",
    (alpha, column) => {
      expect(constants.map(({ name }) => name)).toEqual(Object.keys(NUMBERS));
      for (const { name, D, F } of constants) {
        const value = rootToNumber(D) * (1 - alpha) + rootToNumber(F) * alpha;
        expect(Math.abs(value - NUMBERS[name]![column]!), name).toBeLessThan(1e-9);
      }
    },
  );

  test("its charge terms are all the vertices of the matrix Lagrangian, with -Xi- for Xi-", () => {
    const seen = new Set<string>();
    for (const [name, times, R, B, M] of TERMS) {
      const states = [stateOf(BARYONS, R), stateOf(BARYONS, B), stateOf(MESONS, M)] as const;
      const inMatrices = fAndDForm(maker.chargeForm(states[0], states.slice(1)).terms, maker.scheme);
      const turned = [R, B].filter((baryon) => baryon === "Xi-").length === 1;
      const vertex = (c: SignedRoot) => {
        const inPhases = matrices.coefficient(c, states)!;
        return formatRoot(turned ? negateRoot(inPhases) : inPhases);
      };
      const constant = constants.find((entry) => entry.name === name)!;
      const expected = [constant.D, constant.F].map((c) => formatRoot(multiplyRoots(parseRoot(times), c)));
      expect([vertex(inMatrices.D), vertex(inMatrices.F)], `${R} -> ${B} ${M}`).toEqual(expected);
      seen.add(`${R} -> ${B} ${M}`);
    }
    const baryons = BARYONS.members.flatMap(({ hadrons }) => hadrons);
    const all = baryons.flatMap(({ content }) => maker.chargeForms(content[0]!.leg.state));
    expect(seen.size).toBe(TERMS.length);
    expect(all).toHaveLength(seen.size);
  });

  test("every isospin channel of the octet has one constant, and each of the 12 serves one channel or two", () => {
    const names = BARYONS.members.flatMap(({ threeY, twoI }) =>
      maker.isospinForms({ threeY, twoI }).map(({ initial, finals }) => {
        return isospinConstantName([initial, ...finals]);
      }),
    );
    expect(names).toHaveLength(17);
    expect(new Set(names)).toEqual(new Set(constants.map(({ name }) => name)));
    const nucleon = placeOfMember(BARYONS, "N");
    const xi = placeOfMember(BARYONS, "Xi");
    expect(isospinConstantName([nucleon, xi, placeOfMember(MESONS, "K")])).toBeUndefined();
  });
});
