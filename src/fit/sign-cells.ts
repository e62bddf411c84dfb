import { Matrix, SingularValueDecomposition } from "ml-matrix";

type Vector = readonly number[];

/** Forms whose unit vectors differ by less than this count as one; so do forms this short as none. */
const COINCIDENCE = 1e-9;

/**
 * One interior point of every cell of the central hyperplane arrangement { form . x = 0 }, one of each pair +-x.
 *
 * A cell is the set of points that give every form one sign, so in it all |form . x| are linear. The list is built by
 * deletion and restriction: a new hyperplane cuts exactly those cells whose sign pattern occurs on it, and the cells
 * on it are those of an arrangement in one dimension less. Forms in special position (parallel, several through one
 * ray) need no care. Points have length 1 and are moved away from the walls; they lie in the span of the forms.
 * Source of the method: T. Zaslavsky, Memoirs of the AMS 154 (1975), deletion-restriction.
 * @param forms - rows of `dimension` numbers; zero rows are left out
 * @returns none if there is no form that is not zero
 */
export function signCells(forms: readonly Vector[], dimension: number): number[][] {
  const distinct = distinctForms(forms);
  if (distinct.length === 0) return [];
  const span = spanningBasis(distinct, dimension);
  const inner = distinct.map((form) => span.map((axis) => dot(axis, form)));
  return cells(inner, span.length)
    .filter((point) => dot(inner[0]!, point) > 0)
    .map((point) => combine(span, awayFromWalls(inner, point), dimension));
}

/**
 * Largest possible number of cells, one of each pair, for forms in general position: the sum of C(n - 1, i), i < p,
 * with n distinct forms of rank p. Used to refuse a request before the work begins.
 */
export function signCellBound(forms: readonly Vector[], dimension: number): number {
  const distinct = distinctForms(forms);
  if (distinct.length === 0) return 0;
  const rank = spanningBasis(distinct, dimension).length;
  let [binomial, sum] = [1, 0];
  for (let i = 0; i < rank; i++) {
    sum += binomial;
    binomial = (binomial * (distinct.length - 1 - i)) / (i + 1);
  }
  return sum;
}

/** Interior points of all cells, both of each pair; the forms are distinct, of length 1. */
function cells(forms: readonly Vector[], dimension: number): number[][] {
  let points: number[][] = [new Array<number>(dimension).fill(0)];
  for (const [count, form] of forms.entries()) {
    const earlier = forms.slice(0, count);
    const pattern = (point: Vector) => earlier.map((other) => (dot(other, point) > 0 ? "+" : "-")).join("");
    const axes = orthogonalComplement(form);
    const restricted = distinctForms(earlier.map((other) => axes.map((axis) => dot(axis, other))));
    const onWall = cells(restricted, dimension - 1).map((point) => combine(axes, point, dimension));
    const cut = new Set(onWall.map(pattern));
    const uncut = points.filter((point) => !cut.has(pattern(point)));
    points = [...uncut, ...onWall.flatMap((point) => bothSides(earlier, form, point))];
  }
  return points;
}

/** The points on either side of a wall, near enough that no earlier form changes sign. */
function bothSides(earlier: readonly Vector[], form: Vector, point: Vector): number[][] {
  const reach = earlier.map((other) => Math.abs(dot(other, point) / dot(other, form)));
  const step = Math.min(1, ...reach.filter((value) => !Number.isNaN(value))) / 2;
  return [1, -1].map((side) => {
    const moved = point.map((value, j) => value + side * step * form[j]!);
    const length = Math.hypot(...moved);
    return moved.map((value) => value / length);
  });
}

/** A point of the same cell, farther from its nearest wall: repeated small moves away from whichever is nearest. */
function awayFromWalls(forms: readonly Vector[], start: Vector): number[] {
  const signed = forms.map((form) => form.map((value) => value * Math.sign(dot(form, start))));
  let point = [...start];
  let best = { point, margin: 0 };
  for (let round = 0; round < 60; round++) {
    const distances = signed.map((form) => dot(form, point));
    const margin = Math.min(...distances);
    if (margin > best.margin) best = { point, margin };
    const nearest = signed[distances.indexOf(margin)]!;
    const moved = point.map((value, j) => value + nearest[j]! / (round + 2));
    const length = Math.hypot(...moved);
    point = moved.map((value) => value / length);
  }
  return best.point;
}

/** The forms as unit vectors, without zero rows and without repetitions (parallel or antiparallel). */
function distinctForms(forms: readonly Vector[]): number[][] {
  const kept: number[][] = [];
  const largest = Math.max(0, ...forms.map((form) => Math.hypot(...form)));
  for (const form of forms) {
    const length = Math.hypot(...form);
    if (length <= COINCIDENCE * largest) continue;
    const unit = form.map((value) => value / length);
    const same = (other: Vector) =>
      [1, -1].some((sign) => Math.hypot(...other.map((value, j) => value - sign * unit[j]!)) < COINCIDENCE);
    if (!kept.some(same)) kept.push(unit);
  }
  return kept;
}

/** An orthonormal basis of the space the forms span. */
function spanningBasis(forms: readonly Vector[], dimension: number): number[][] {
  const rows = Math.max(forms.length, dimension);
  const matrix = Matrix.zeros(rows, dimension);
  for (const [i, form] of forms.entries()) matrix.setRow(i, [...form]);
  const svd = new SingularValueDecomposition(matrix);
  const rank = svd.diagonal.filter((value) => value > COINCIDENCE * svd.diagonal[0]!).length;
  return Array.from({ length: rank }, (_, k) => svd.rightSingularVectors.getColumn(k));
}

/** An orthonormal basis of the hyperplane orthogonal to a unit vector: the other columns of its Householder reflection. */
function orthogonalComplement(unit: Vector): number[][] {
  const dimension = unit.length;
  const sign = unit[0]! >= 0 ? 1 : -1;
  const mirror = unit.map((value, j) => value + (j === 0 ? sign : 0));
  const norm = dot(mirror, mirror);
  return Array.from({ length: dimension - 1 }, (_, k) =>
    mirror.map((value, j) => (j === k + 1 ? 1 : 0) - (2 * value * mirror[k + 1]!) / norm),
  );
}

function combine(axes: readonly Vector[], coordinates: Vector, dimension: number): number[] {
  return Array.from({ length: dimension }, (_, j) =>
    axes.reduce((sum, axis, k) => sum + axis[j]! * coordinates[k]!, 0),
  );
}

function dot(a: Vector, b: Vector): number {
  return a.reduce((sum, value, j) => sum + value * b[j]!, 0);
}
