import { describe, expect, test } from "vitest";
import { fAndDForm } from "../../src/couplings/f-and-d.js";
import { MatrixConvention } from "../../src/couplings/matrix-convention.js";
import {
  formatRoot,
  multiplyRoots,
  parseRoot,
  type SignedRoot,
  signedRoot,
} from "../../src/exact/signed-root.js";
import { catalogueMultiplet } from "../../src/hadrons/catalogue-multiplet.js";
import {
  type Matrix,
  type MatrixState,
  octetMatrixStates,
  overlap,
  product,
} from "../../src/su3/matrix-phases.js";
import { type State, sameState, states } from "../../src/su3/state.js";
import { BARYONS, DECUPLET, MESONS, makerOf, stateOf } from "./schemes.js";

/**
 * Forms against traces of 3x3 matrices: an independent path to the same amplitudes, in the phases of the matrix
 * convention, for every triple of charge states.
 *
 * The phase of a whole octet is free, and three octets meet here: the common sign below is the one that makes g_S and g_A
 * positive multiples of D and F. No rate and no ratio of couplings depends on it.
 */
const COMMON_SIGN = -1;
const octet = octetMatrixStates();
const matrixOf = (state: State): MatrixState => octet.find((entry) => sameState(entry.state, state))!;

const octets = makerOf("8", ["8", "8"]);
const decuplet = makerOf("10", ["8", "8"]);

/** Coefficient of one coupling in a charge channel, in the phases of the matrices. */
function inMatrixPhases(
  maker: typeof octets,
  index: number,
  initial: State,
  finals: readonly State[],
): SignedRoot {
  const { terms } = maker.chargeForm(initial, finals);
  const c = terms.find(({ reduced }) => reduced === index)?.c ?? parseRoot("0");
  const phases = [initial, ...finals].map((state) =>
    state.irrep.q === 0 ? 1 : COMMON_SIGN * matrixOf(state).phase,
  );
  return multiplyRoots(
    c,
    signedRoot(
      phases.reduce((sign, phase) => sign * phase, 1),
      1,
      1,
    ),
  );
}

const times = (factor: string, numerator: number, denominatorSquared: number): SignedRoot =>
  multiplyRoots(
    parseRoot(factor),
    signedRoot(Math.sign(numerator), numerator * numerator, denominatorSquared),
  );

const plus = (a: Matrix, b: Matrix, sign: 1 | -1): Matrix =>
  a.map((row, i) => row.map((x, j) => x + sign * b[i]![j]!));

describe("octet forms and matrices", () => {
  test.each([
    ["symmetric, sqrt(3/10) Tr(R^T {B, M})", 0, "sqrt(3/10)", 1],
    ["antisymmetric, sqrt(1/6) Tr(R^T [M, B])", 1, "sqrt(1/6)", -1],
  ] as const)("%s, for all 512 charge triples", (_, index, factor, sign) => {
    for (const R of octet) {
      for (const B of octet) {
        for (const M of octet) {
          const both = plus(product(M.entries, B.entries), product(B.entries, M.entries), sign);
          const expected = times(factor, overlap(R.entries, both), R.square * B.square * M.square);
          const c = inMatrixPhases(octets, index, R.state, [B.state, M.state]);
          expect(formatRoot(c)).toBe(formatRoot(expected));
        }
      }
    }
  });
});

/** A decuplet state as a symmetric tensor: how many of its indices are 1, 2, 3; norm^2 = number of orderings. */
const tensors = [3, 2, 1, 0].flatMap((up) =>
  Array.from({ length: 4 - up }, (_, strange) => ({ up, down: 3 - up - strange, strange })),
);

function decupletState({ up, down, strange }: (typeof tensors)[number]): State {
  return { irrep: { p: 3, q: 0 }, threeY: up + down - 2 * strange, twoI: up + down, twoI3: up - down };
}

/** Sum over a, b, c, e, f of T_abc B_ae M_bf eps_efc, the tensor having entries 1. */
function contraction(content: (typeof tensors)[number], B: Matrix, M: Matrix): number {
  const counts = [content.up, content.down, content.strange];
  let sum = 0;
  for (let code = 0; code < 3 ** 5; code++) {
    const [a, b, c, e, f] = [81, 27, 9, 3, 1].map((unit) => Math.floor(code / unit) % 3) as [
      number,
      number,
      number,
      number,
      number,
    ];
    const isThis = [0, 1, 2].every(
      (flavour) => [a, b, c].filter((x) => x === flavour).length === counts[flavour],
    );
    if (isThis) sum += B[a]![e]! * M[b]![f]! * (((e - f) * (f - c) * (c - e)) / 2);
  }
  return sum;
}

const factorial = (n: number): number => (n < 2 ? 1 : n * factorial(n - 1));

describe("decuplet forms and tensors", () => {
  test("sqrt(1/2) T^abc B_ae M_bf eps_efc, for all 640 charge triples", () => {
    for (const content of tensors) {
      const orderings = 6 / (factorial(content.up) * factorial(content.down) * factorial(content.strange));
      for (const B of octet) {
        for (const M of octet) {
          const sum = contraction(content, B.entries, M.entries);
          const expected = times("sqrt(1/2)", sum, orderings * B.square * M.square);
          const c = inMatrixPhases(decuplet, 0, decupletState(content), [B.state, M.state]);
          expect(formatRoot(c)).toBe(formatRoot(expected));
        }
      }
    }
  });

  /**
   * Decuplet into octet and meson in units of A(Delta++ -> p pi+), phases of the matrices. Worked out once from the
   * tensors by hand and by another program; entries are roots.
   */
  const TABLE: Record<string, Record<string, string>> = {
    "Delta(1232)++": { "p pi+": "1", "Sigma+ K+": "-1" },
    "Delta(1232)+": {
      "p pi0": "-sqrt(2/3)",
      "n pi+": "sqrt(1/3)",
      "Sigma+ K0": "-sqrt(1/3)",
      "Sigma0 K+": "sqrt(2/3)",
    },
    "Delta(1232)0": {
      "p pi-": "-sqrt(1/3)",
      "n pi0": "-sqrt(2/3)",
      "Sigma0 K0": "sqrt(2/3)",
      "Sigma- K+": "sqrt(1/3)",
    },
    "Delta(1232)-": { "n pi-": "-1", "Sigma- K0": "1" },
    "Sigma(1385)+": {
      "p K0bar": "sqrt(1/3)",
      "Sigma+ pi0": "sqrt(1/6)",
      "Sigma+ eta": "sqrt(1/2)",
      "Sigma0 pi+": "-sqrt(1/6)",
      "Lambda pi+": "-sqrt(1/2)",
      "Xi0 K+": "-sqrt(1/3)",
    },
    "Sigma(1385)0": {
      "p K-": "-sqrt(1/6)",
      "n K0bar": "sqrt(1/6)",
      "Sigma+ pi-": "sqrt(1/6)",
      "Sigma- pi+": "-sqrt(1/6)",
      "Sigma0 eta": "-sqrt(1/2)",
      "Lambda pi0": "sqrt(1/2)",
      "Xi0 K0": "-sqrt(1/6)",
      "Xi- K+": "sqrt(1/6)",
    },
    "Sigma(1385)-": {
      "n K-": "-sqrt(1/3)",
      "Sigma0 pi-": "-sqrt(1/6)",
      "Sigma- pi0": "sqrt(1/6)",
      "Sigma- eta": "-sqrt(1/2)",
      "Lambda pi-": "sqrt(1/2)",
      "Xi- K0": "sqrt(1/3)",
    },
    "Xi(1530)0": {
      "Sigma+ K-": "sqrt(1/3)",
      "Sigma0 K0bar": "-sqrt(1/6)",
      "Lambda K0bar": "-sqrt(1/2)",
      "Xi0 pi0": "sqrt(1/6)",
      "Xi0 eta": "sqrt(1/2)",
      "Xi- pi+": "-sqrt(1/3)",
    },
    "Xi(1530)-": {
      "Sigma0 K-": "-sqrt(1/6)",
      "Sigma- K0bar": "-sqrt(1/3)",
      "Lambda K-": "sqrt(1/2)",
      "Xi0 pi-": "sqrt(1/3)",
      "Xi- pi0": "sqrt(1/6)",
      "Xi- eta": "-sqrt(1/2)",
    },
    "Omega-": { "Xi0 K-": "1", "Xi- K0bar": "-1" },
  };

  test.each(Object.entries(TABLE))("the charge channels of %s", (parent, expected) => {
    const initial = stateOf(DECUPLET, parent);
    const unit = inMatrixPhases(decuplet, 0, stateOf(DECUPLET, "Delta(1232)++"), [
      stateOf(BARYONS, "p"),
      stateOf(MESONS, "pi+"),
    ]);
    const found = decuplet.chargeForms(initial).map(({ finals }) => {
      const names = finals.map(({ state }, k) =>
        nameOf(k === 0 ? "baryon-octet" : "pseudoscalar-octet", state),
      );
      const c = inMatrixPhases(
        decuplet,
        0,
        initial,
        finals.map(({ state }) => state),
      );
      return [names.join(" "), formatRoot(multiplyRoots(c, inverse(unit)))];
    });
    expect(Object.fromEntries(found)).toEqual(expected);
  });
});

describe("the matrix convention of tables", () => {
  const matrices = new MatrixConvention();

  test("has S+, p, n, Xi0 minus and the other baryons plus their matrix, and mesons likewise", () => {
    const signs = (multiplet: typeof BARYONS) =>
      multiplet.members.flatMap(({ hadrons }) =>
        hadrons.flatMap(({ name, content }) => (matrices.phase(content[0]!.leg.state) === -1 ? [name] : [])),
      );
    expect(signs(BARYONS)).toEqual(["p", "n", "Sigma+", "Xi0"]);
    expect(signs(MESONS)).toEqual(["K+", "K0", "pi+", "K0bar"]);
    expect(signs(DECUPLET)).toEqual([]);
  });

  test("gives the vertices of sqrt2 {D Tr(Bbar {M, B}) + F Tr(Bbar [M, B])} for all 512 charge triples", () => {
    for (const R of octet) {
      for (const B of octet) {
        for (const M of octet) {
          const { terms } = octets.chargeForm(R.state, [B.state, M.state]);
          const { D, F } = fAndDForm(terms, octets.scheme);
          const trace = (sign: 1 | -1, first: Matrix, second: Matrix) =>
            formatRoot(
              times(
                "sqrt(2)",
                overlap(R.entries, plus(product(first, second), product(second, first), sign)),
                R.square * B.square * M.square,
              ),
            );
          const vertex = [R.state, B.state, M.state];
          expect(formatRoot(matrices.coefficient(D, vertex)!)).toBe(trace(1, M.entries, B.entries));
          expect(formatRoot(matrices.coefficient(F, vertex)!)).toBe(trace(-1, M.entries, B.entries));
        }
      }
    }
  });

  test("has phase +1 for quarks and -1 for each ubar in tensors, and no phase for the 27", () => {
    const phases = (p: number, q: number) => states({ p, q }).map((state) => matrices.phase(state));
    expect(phases(0, 0)).toEqual([1]);
    expect(phases(2, 0)).toEqual([1, 1, 1, 1, 1, 1]);
    expect(phases(0, 1)).toEqual([1, 1, -1]);
    expect(phases(0, 2)).toEqual([1, 1, -1, 1, -1, 1]);
    expect(phases(2, 2).every((phase) => phase === undefined)).toBe(true);
    const top = states({ p: 2, q: 2 })[0]!;
    expect(matrices.coefficient(parseRoot("1"), [top])).toBeNull();
  });

  test("lays its matrix out as rows of quarks and columns of antiquarks", () => {
    const text = matrices.octetLayout().map(({ row, column, parts }) => {
      const sum = parts.map(
        ({ state, times: c }) => `${formatRoot(c)} ${nameOf("pseudoscalar-octet", state)}`,
      );
      return `${row}${column}: ${sum.join(", ")}`;
    });
    expect(text).toEqual([
      "11: sqrt(1/2) pi0, sqrt(1/6) eta",
      "12: 1 pi+",
      "13: 1 K+",
      "21: 1 pi-",
      "22: -sqrt(1/2) pi0, sqrt(1/6) eta",
      "23: 1 K0",
      "31: 1 K-",
      "32: 1 K0bar",
      "33: -sqrt(2/3) eta",
    ]);
  });
});

function nameOf(multiplet: string, state: State): string {
  const hadrons = catalogueMultiplet(multiplet).members.flatMap((member) => member.hadrons);
  return hadrons.find(({ content }) => sameState(content[0]!.leg.state, state))!.name;
}

function inverse(root: SignedRoot): SignedRoot {
  return signedRoot(root.sign, root.den, root.num);
}
