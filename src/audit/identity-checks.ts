import { InternalError } from "../errors.js";
import { addRational, multiplyRational, type Rational, rational } from "../exact/rational.js";
import { addRoots } from "../exact/root-sum.js";
import { formatRoot, multiplyRoots, type SignedRoot, signedRoot } from "../exact/signed-root.js";
import { CasimirCoupling, casimirEigenvalue } from "../su3/casimir-coupling.js";
import {
  casimir,
  type Irrep,
  type IsospinMultiplet,
  irrepDimension,
  irrepName,
  isospinMultiplets,
} from "../su3/irrep.js";
import { type IsoscalarTable, isoscalarTable } from "../su3/isoscalar-factors.js";
import { decomposeProduct } from "../su3/product.js";
import { recouplingMatrix } from "../su3/recoupling.js";
import { conjugationMatrix, exchangeMatrix, transferMatrix } from "../su3/symmetries.js";
import { Findings, type PlannedCheck } from "./check.js";

/** The products the identities are checked over: all with p + q up to a sum in either factor. */
export interface AuditGrid {
  readonly largestSum: number;
}

/** The identities over a grid of products. */
export function identityChecks({ largestSum }: AuditGrid): PlannedCheck[] {
  const pairs = productsUpTo(largestSum);
  const grid = `all ${pairs.length} products with p + q <= ${largestSum}`;
  const tables = new Map<string, IsoscalarTable>();
  const tableOf = ([left, right]: readonly [Irrep, Irrep]) => {
    const key = productName(left, right);
    const table = tables.get(key) ?? isoscalarTable(left, right);
    tables.set(key, table);
    return table;
  };
  const planned = (
    name: string,
    what: string,
    source: string,
    check: (pair: readonly [Irrep, Irrep], findings: Findings) => void,
  ): PlannedCheck => ({
    name: `identity/${name}`,
    run: () => {
      const findings = new Findings();
      for (const pair of pairs) check(pair, findings);
      return findings.exact(`identity/${name}`, `${what}, ${grid}`, source);
    },
  });
  const change = "a real orthogonal change of basis between channels and coupled states";
  return [
    planned("dimension-sum", "dim left dim right = sum of dimensions", "complete reducibility", dimensionSum),
    planned("casimir-sum", "sum of dim C2 over the product", "trace of (T1 + T2)^2", casimirSum),
    planned("orthonormality", "rows of every (Y,I) block", change, (pair, findings) =>
      orthonormality(tableOf(pair), findings, false),
    ),
    planned("completeness", "columns of every (Y,I) block", change, (pair, findings) =>
      orthonormality(tableOf(pair), findings, true),
    ),
    planned(
      "casimir-eigenvectors",
      "T1.T2 from generators on every copy",
      "T1.T2 = (C2 of the product - C2 of the factors) / 2 is diagonal in coupled states",
      (pair, findings) => casimirEigenvectors(tableOf(pair), findings),
    ),
    planned("exchange", "matrix between copies is orthogonal", "exchange of the factors", (pair, findings) =>
      symmetryMatrices(pair, exchangeMatrix, findings),
    ),
    planned(
      "conjugation",
      "matrix between copies is orthogonal",
      "conjugation of all irreps",
      (pair, findings) => symmetryMatrices(pair, conjugationMatrix, findings),
    ),
    planned("transfer", "matrix between copies is orthogonal", "transfer of a factor", (pair, findings) =>
      symmetryMatrices(pair, transferMatrix, findings),
    ),
    recouplingOrthogonality(largestSum),
    engineIdentities(),
  ];
}

/** All pairs of irreps with p + q up to a sum, in either order. */
export function productsUpTo(largestSum: number): (readonly [Irrep, Irrep])[] {
  const irreps: Irrep[] = [];
  for (let sum = 0; sum <= largestSum; sum++) for (let q = 0; q <= sum; q++) irreps.push({ p: sum - q, q });
  return irreps.flatMap((left) => irreps.map((right) => [left, right] as const));
}

/** `8x10bar`. */
export function productName(left: Irrep, right: Irrep): string {
  return `${irrepName(left)}x${irrepName(right)}`;
}

function dimensionSum([left, right]: readonly [Irrep, Irrep], findings: Findings): void {
  const total = decomposeProduct(left, right).reduce(
    (sum, { irrep, multiplicity }) => sum + multiplicity * irrepDimension(irrep),
    0,
  );
  const expected = irrepDimension(left) * irrepDimension(right);
  findings.compare(total === expected, () => `${productName(left, right)}: ${total} states, not ${expected}`);
}

/** Tr (T1 + T2)^2 = dim dim (C1 + C2), since generators are traceless. */
function casimirSum([left, right]: readonly [Irrep, Irrep], findings: Findings): void {
  const weighted = (irrep: Irrep, times: number) => multiplyRational(rational(times), casimir(irrep));
  const total = decomposeProduct(left, right)
    .map(({ irrep, multiplicity }) => weighted(irrep, multiplicity * irrepDimension(irrep)))
    .reduce(addRational);
  const states = irrepDimension(left) * irrepDimension(right);
  const expected = addRational(weighted(left, states), weighted(right, states));
  const holds = total.num === expected.num && total.den === expected.den;
  findings.compare(holds, () => `${productName(left, right)}: ${text(total)}, not ${text(expected)}`);
}

function orthonormality(table: IsoscalarTable, findings: Findings, byColumns: boolean): void {
  for (const { place, rows } of blocksOf(table)) {
    const vectors = byColumns ? rows[0]!.map((_, c) => rows.map((row) => row[c]!)) : rows;
    vectors.forEach((vector, i) => {
      vectors.slice(i).forEach((other, j) => {
        const product = dot(vector, other);
        findings.compare(product === (j === 0 ? "1" : "0"), () => {
          const kind = byColumns ? "columns" : "rows";
          return `${blockName(table, place)}: ${kind} ${i} and ${i + j} have the product ${product}`;
        });
      });
    });
  }
}

function casimirEigenvectors(table: IsoscalarTable, findings: Findings): void {
  const { left, right } = table;
  const operator = new CasimirCoupling(left, right);
  for (const { place, rows, irreps } of blocksOf(table)) {
    const matrix = operator.betweenChannels(place, table.channels(place));
    rows.forEach((vector, r) => {
      const { num, den } = casimirEigenvalue(left, right, irreps[r]!);
      const eigenvalue = signedRoot(num, num * num, den * den);
      matrix.forEach((row, c) => {
        const [image, expected] = [dot(row, vector), formatRoot(multiplyRoots(eigenvalue, vector[c]!))];
        findings.compare(image === expected, () => {
          return `${blockName(table, place)}, ${irrepName(irreps[r]!)}: T1.T2 gives ${image}, not ${expected}`;
        });
      });
    });
  }
}

function symmetryMatrices(
  [left, right]: readonly [Irrep, Irrep],
  matrixOf: typeof exchangeMatrix,
  findings: Findings,
): void {
  for (const { irrep } of decomposeProduct(left, right)) {
    const matrix = matrixOf(left, right, irrep);
    matrix.forEach((row, i) => {
      matrix.forEach((other, j) => {
        const product = dot(row, other);
        findings.compare(product === (i === j ? "1" : "0"), () => {
          return `${productName(left, right)}, ${irrepName(irrep)}: copies ${i + 1} and ${j + 1} give ${product}`;
        });
      });
    });
  }
}

/** Three irreps coupled in two orders span the same states: the recoupling matrix is orthogonal. */
function recouplingOrthogonality(largestSum: number): PlannedCheck {
  const name = "identity/recoupling";
  const sum = Math.min(largestSum, 2);
  return {
    name,
    run: () => {
      const findings = new Findings();
      const irreps = productsUpTo(sum)
        .filter(([left]) => left.p + left.q === 0)
        .map(([, right]) => right);
      const third = { p: 1, q: 1 };
      for (const a of irreps) {
        for (const b of irreps) {
          const ab = decomposeProduct(a, b).map(({ irrep }) => irrep);
          for (const d of ab) {
            const { matrix } = recouplingMatrix(a, b, third, d.p + d.q === 0 ? third : d);
            matrix.forEach((row, i) => {
              matrix.slice(i).forEach((other, j) => {
                const product = dot(row, other);
                findings.compare(product === (j === 0 ? "1" : "0"), () => {
                  return `(${irrepName(a)} ${irrepName(b)} 8) -> ${irrepName(d)}: ${product}`;
                });
              });
            });
          }
        }
      }
      const what = `recoupling of a, b and 8 is orthogonal, all a, b with p + q <= ${sum}`;
      return findings.exact(name, what, "((a b) c) and (a (b c)) span the same states");
    },
  };
}

/** Products large enough for big integers and high multiplicity. */
const ENGINE_PRODUCTS = [
  [4, 4, 4, 4],
  [5, 2, 2, 6],
  [12, 0, 0, 12],
  [3, 6, 5, 1],
] as const;

/** The identities the engine checks in every run; it refuses to give a table that breaks one. */
function engineIdentities(): PlannedCheck {
  const name = "identity/engine";
  return {
    name,
    run: () => {
      const findings = new Findings();
      for (const [p1, q1, p2, q2] of ENGINE_PRODUCTS) {
        try {
          findings.checked += isoscalarTable({ p: p1, q: q1 }, { p: p2, q: q2 }).count;
        } catch (error) {
          if (!(error instanceof InternalError)) throw error;
          findings.differences.push(error.message);
        }
      }
      return findings.exact(
        name,
        "closure below the lowest multiplets, path independence, squares that add up (modulo a prime), square blocks",
        `ladders of ${ENGINE_PRODUCTS.map(([p1, q1, p2, q2]) => `(${p1},${q1})x(${p2},${q2})`).join(", ")}`,
      );
    },
  };
}

/** The square blocks of a table: a row for each copy. */
function blocksOf(
  table: IsoscalarTable,
): { place: IsospinMultiplet; rows: SignedRoot[][]; irreps: Irrep[] }[] {
  const blocks = new Map<string, { place: IsospinMultiplet; rows: SignedRoot[][]; irreps: Irrep[] }>();
  for (const { irrep, multiplicity } of table.series) {
    for (const place of isospinMultiplets(irrep)) {
      const key = `${place.threeY},${place.twoI}`;
      const block = blocks.get(key) ?? { place, rows: [], irreps: [] };
      blocks.set(key, block);
      for (let copy = 1; copy <= multiplicity; copy++) {
        block.rows.push(table.channels(place).map((c) => table.factor(irrep, copy, place, c)));
        block.irreps.push(irrep);
      }
    }
  }
  return [...blocks.values()];
}

/** The exact scalar product, as text; of irrational terms as a sum. */
function dot(a: readonly SignedRoot[], b: readonly SignedRoot[]): string {
  const sum = addRoots(a.map((root, i) => multiplyRoots(root, b[i]!)));
  return sum.length === 0 ? "0" : sum.map(formatRoot).join(" + ");
}

function blockName({ left, right }: IsoscalarTable, { threeY, twoI }: IsospinMultiplet): string {
  return `${productName(left, right)}, 3Y = ${threeY}, 2I = ${twoI}`;
}

function text({ num, den }: Rational): string {
  return `${num}/${den}`;
}
