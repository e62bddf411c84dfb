import { describe, expect, test } from "vitest";
import { InputError, LimitError } from "../../src/errors.js";
import { formatRoot, negateRoot, type SignedRoot } from "../../src/exact/signed-root.js";
import { productContent } from "../../src/su3/content.js";
import {
  type CouplingTree,
  type TreeTerm,
  treePaths,
  treeStates,
  treeTransformation,
} from "../../src/su3/coupling-trees.js";
import { type Irrep, irrepName, parseIrrep } from "../../src/su3/irrep.js";
import { irrepMultiplicities } from "../../src/su3/product.js";
import { recouplingMatrix } from "../../src/su3/recoupling.js";
import { conjugateState } from "../../src/su3/state.js";
import { exchangeMatrix } from "../../src/su3/symmetries.js";
import { scalarProductOfRoots } from "../support/sum-of-roots.js";

const [quark, antiquark, sextet, octet, decuplet] = ["3", "3bar", "6", "8", "10"].map(parseIrrep) as [
  Irrep,
  Irrep,
  Irrep,
  Irrep,
  Irrep,
];
const TRIPLES: (readonly [Irrep, Irrep, Irrep])[] = [
  [quark, quark, quark],
  [quark, antiquark, quark],
  [sextet, quark, antiquark],
  [octet, quark, quark],
  [octet, octet, quark],
  [octet, octet, octet],
  [decuplet, octet, octet],
];

type Matrix = readonly (readonly SignedRoot[])[];

function columnsOf(matrix: Matrix): Matrix {
  return matrix[0]!.map((_, j) => matrix.map((row) => row[j]!));
}

function texts(matrix: Matrix): string[][] {
  return matrix.map((row) => row.map(formatRoot));
}

function asNumbers(matrix: Matrix): number[][] {
  return matrix.map((row) => row.map(({ sign, num, den }) => sign * Math.sqrt(Number(num) / Number(den))));
}

function times(a: number[][], b: number[][]): number[][] {
  return a.map((row) => b[0]!.map((_, j) => row.reduce((sum, x, k) => sum + x * b[k]![j]!, 0)));
}

function expectClose(a: number[][], b: number[][]): void {
  expect(a.length).toBe(b.length);
  a.forEach((row, i) => {
    row.forEach((x, j) => {
      expect(Math.abs(x - b[i]![j]!), `element ${i}, ${j}`).toBeLessThan(1e-12);
    });
  });
}

describe("recoupling of three irreps", () => {
  test("is orthogonal, exactly, over rows and columns, for every irrep of seven products", () => {
    let copies = 0;
    for (const [a, b, c] of TRIPLES) {
      for (const { irrep, multiplicity } of irrepMultiplicities([a, b, c])) {
        if (multiplicity > 12) continue;
        const { matrix, rows, columns } = recouplingMatrix(a, b, c, irrep);
        expect([rows.length, columns.length]).toEqual([multiplicity, multiplicity]);
        copies = Math.max(copies, ...rows.map((row) => row.pair.copy), ...rows.map((row) => row.copy));
        for (const m of [matrix, columnsOf(matrix)]) {
          m.forEach((row, i) => {
            m.slice(i).forEach((other, j) => {
              expect(formatRoot(scalarProductOfRoots(row, other))).toBe(j === 0 ? "1" : "0");
            });
          });
        }
      }
    }
    expect(copies).toBe(2);
  }, 120_000);

  test("equals the overlap of coupled product states, computed without any 6j symbol", () => {
    for (const [a, b, c] of TRIPLES.slice(0, 6)) {
      for (const { irrep, multiplicity } of irrepMultiplicities([a, b, c])) {
        if (a === octet && b === octet && c === octet && multiplicity > 2) continue;
        const states = treeTransformation([a, b, c], [[0, 1], 2], [0, [1, 2]], irrep);
        expect(texts(states.matrix), irrepName(irrep)).toEqual(
          texts(recouplingMatrix(a, b, c, irrep).matrix),
        );
      }
    }
  }, 120_000);

  test("of three quarks in an octet is -1/2 and sqrt3/2, as in the permutation group", () => {
    const { matrix, rows } = recouplingMatrix(quark, quark, quark, octet);
    expect(rows.map(({ pair }) => irrepName(pair.irrep))).toEqual(["3bar", "6"]);
    expect(texts(matrix).map((row) => row.map((text) => text.replace("-", "")))).toEqual([
      ["1/2", "sqrt(3/4)"],
      ["sqrt(3/4)", "1/2"],
    ]);
  });

  test("obeys Racah's sum rule: two ways from (a b) c to (a c) b are one", () => {
    // <((a b) c) | ((a c) b)> through a (b c), and through (c (a b)) and ((c a) b).
    for (const [a, b, c] of TRIPLES.slice(0, 5)) {
      for (const { irrep, multiplicity } of irrepMultiplicities([a, b, c])) {
        if (multiplicity > 8) continue;
        const first = recouplingMatrix(a, b, c, irrep);
        const back = recouplingMatrix(a, c, b, irrep);
        const last = recouplingMatrix(c, a, b, irrep);
        const through = times(
          times(asNumbers(first.matrix), pairExchange(first.columns, back.columns, [b, c])),
          asNumbers(columnsOf(back.matrix)),
        );
        // ((a b) c) = exchange (c (a b)); ((a c) b) = exchange of the inner pair of ((c a) b).
        const outer = outerExchange(first.rows, last.columns, c, irrep);
        const inner = pairExchange(last.rows, back.rows, [c, a]);
        const around = times(times(outer, asNumbers(columnsOf(last.matrix))), inner);
        expectClose(around, through);
      }
    }
  });

  test("refuses sums that would take hours", () => {
    const large = { p: 6, q: 6 };
    expect(() => recouplingMatrix(large, large, large, large)).toThrow(LimitError);
    expect(() => recouplingMatrix(large, large, large, large)).toThrow(
      /^recouplingMatrix: expected at most 20000000 terms, got up to \d+ for 343 x 343 x 343\. Choose smaller irreps\.$/,
    );
  });

  test("refuses an irrep that is not in the product", () => {
    expect(() => recouplingMatrix(quark, quark, quark, quark)).toThrow(
      new InputError(
        'recouplingMatrix: d: expected an irrep of the product, got "3". Couple the first three to it.',
      ),
    );
  });
});

type PairPath = ReturnType<typeof recouplingMatrix>["rows"][number];

/** <(x (y z)) | (x (z y))>: exchange inside the pair, between two lists of paths. */
function pairExchange(
  from: readonly PairPath[],
  to: readonly PairPath[],
  [y, z]: [Irrep, Irrep],
): number[][] {
  return from.map((row) =>
    to.map((column) => {
      const same = irrepName(row.pair.irrep) === irrepName(column.pair.irrep) && row.copy === column.copy;
      if (!same) return 0;
      return asNumbers(exchangeMatrix(y, z, row.pair.irrep))[row.pair.copy - 1]![column.pair.copy - 1]!;
    }),
  );
}

/** <((a b) c) d | (c (a b)) d>. */
function outerExchange(from: readonly PairPath[], to: readonly PairPath[], c: Irrep, d: Irrep): number[][] {
  return from.map((row) =>
    to.map((column) => {
      const same =
        irrepName(row.pair.irrep) === irrepName(column.pair.irrep) && row.pair.copy === column.pair.copy;
      if (!same) return 0;
      return asNumbers(exchangeMatrix(row.pair.irrep, c, d))[row.copy - 1]![column.copy - 1]!;
    }),
  );
}

/** A term by the numbers 0, 1, 2 of its quarks; a state of the antiquark is its quark's conjugate, with its phase. */
function asQuarks({ factors, value }: TreeTerm): { quarks: number[]; value: SignedRoot } {
  let sign = 1;
  const quarks = factors.map((state) => {
    const { phase, state: own } = state.irrep.p === 1 ? { phase: 1, state } : conjugateState(state);
    sign *= phase;
    return own.twoI === 0 ? 2 : own.twoI3 > 0 ? 0 : 1;
  });
  return { quarks, value: sign < 0 ? negateRoot(value) : value };
}

describe("coupling trees", () => {
  const four = [quark, antiquark, quark, quark];

  test("obey the pentagon rule: two ways from ((0 1) 2) 3 to 0 (1 (2 3)) are one", () => {
    const trees: CouplingTree[] = [
      [[[0, 1], 2], 3],
      [
        [0, 1],
        [2, 3],
      ],
      [0, [1, [2, 3]]],
      [[0, [1, 2]], 3],
      [0, [[1, 2], 3]],
    ];
    for (const { irrep } of irrepMultiplicities(four)) {
      const step = (i: number, j: number) =>
        asNumbers(treeTransformation(four, trees[i]!, trees[j]!, irrep).matrix);
      const short = times(step(0, 1), step(1, 2));
      const long = times(times(step(0, 3), step(3, 4)), step(4, 2));
      expectClose(short, long);
      expectClose(step(0, 2), short);
    }
  });

  test("have as many paths as the irrep has multiplicity, in every order", () => {
    const irreps = [octet, octet, quark, antiquark];
    for (const { irrep, multiplicity } of irrepMultiplicities(irreps)) {
      for (const tree of [
        [[[0, 1], 2], 3],
        [
          [3, 0],
          [2, 1],
        ],
        [0, [1, [2, 3]]],
      ] as CouplingTree[])
        expect(treePaths(irreps, tree, irrep).length).toBe(multiplicity);
    }
  });

  test("give the states that coupling quark after quark gives, term by term", () => {
    const tree: CouplingTree = [[0, 1], 2];
    for (const third of [quark, antiquark]) {
      const factors = [quark, quark, third];
      for (const { path, states } of productContent(factors)) {
        const text = (terms: { quarks: readonly number[]; value: SignedRoot }[]) =>
          terms.map(({ quarks, value }) => `${quarks.join("")} ${formatRoot(value)}`).sort();
        const expected = states.map(({ terms }) => text([...terms]));
        const computed = treeStates(factors, tree, path.path).map((terms) => text(terms.map(asQuarks)));
        expect(computed).toEqual(expected);
      }
    }
  });

  test("refuse a tree that leaves out a factor, a path of another tree, and products too large", () => {
    expect(() => treePaths(four, [[0, 1], 2], octet)).toThrow(
      new InputError("treePaths: tree: expected each of the factors 0 to 3 once, got [0,1,2]."),
    );
    expect(() => treeStates([quark, quark], [0, 1], [{ irrep: sextet, copy: 2 }])).toThrow(InputError);
    expect(() => treeTransformation([quark, quark, quark], [[0, 1], 2], [0, [1, 2]], quark)).toThrow(
      new InputError('treeTransformation: into: expected one of 1, 8, 10, got "3".'),
    );
    const large = [octet, octet, octet, octet, octet];
    expect(() => treeTransformation(large, [[[[0, 1], 2], 3], 4], [[[[0, 1], 2], 3], 4], octet)).toThrow(
      new LimitError(
        "treeTransformation: expected at most 20000 product states, got 32768. Couple fewer or smaller irreps.",
      ),
    );
  });
});
