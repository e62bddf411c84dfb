/** Singular values and vectors of a matrix A = U S V^T with n columns. */
export interface SingularValues {
  /** S, descending; n of them, those beyond the rank about 0. */
  readonly values: readonly number[];
  /** Columns of U S, each of the length of a column of A. */
  readonly scaledLeft: readonly Float64Array[];
  /** Columns of V, n of length n whatever the rank of A: those of vanishing values span the null space. */
  readonly right: readonly Float64Array[];
}

/** Columns count as orthogonal when their cosine is below this. */
const ORTHOGONAL = 1e-15;
const MAXIMUM_SWEEPS = 60;

/**
 * Singular value decomposition by one-sided Jacobi rotations: columns are turned in pairs until all are orthogonal.
 *
 * Small values come out with high relative accuracy, and for the few columns of a fit it is faster than bidiagonal
 * methods. Cost about 6 rows x columns^2 a sweep, 4 to 8 sweeps.
 * Sources: M.R. Hestenes, J. SIAM 6 (1958) 51; J. Demmel and K. Veselic, SIAM J. Matrix Anal. Appl. 13 (1992) 1204.
 * @param matrix - column after column, all entries finite; overwritten
 * @param rows - > 0, the length of a column
 */
export function singularValues(matrix: Float64Array, rows: number): SingularValues {
  const count = matrix.length / rows;
  const right = new Float64Array(count * count);
  for (let k = 0; k < count; k++) right[k * count + k] = 1;
  const squares = new Float64Array(count);
  for (let sweep = 0; sweep < MAXIMUM_SWEEPS; sweep++) {
    for (let k = 0; k < count; k++) squares[k] = dot(matrix, k * rows, k * rows, rows);
    let turned = false;
    for (let p = 0; p + 1 < count; p++) {
      for (let q = p + 1; q < count; q++) {
        const product = dot(matrix, p * rows, q * rows, rows);
        if (!(Math.abs(product) > ORTHOGONAL * Math.sqrt(squares[p]! * squares[q]!))) continue;
        turned = true;
        const ratio = (squares[q]! - squares[p]!) / (2 * product);
        const tangent = (ratio < 0 ? -1 : 1) / (Math.abs(ratio) + Math.sqrt(1 + ratio * ratio));
        rotate(matrix, p * rows, q * rows, rows, tangent);
        rotate(right, p * count, q * count, count, tangent);
        squares[p]! -= tangent * product;
        squares[q]! += tangent * product;
      }
    }
    if (!turned) break;
  }
  const order = Array.from(squares.keys()).sort((a, b) => squares[b]! - squares[a]!);
  return {
    values: order.map((k) => Math.sqrt(Math.max(0, squares[k]!))),
    scaledLeft: order.map((k) => matrix.subarray(k * rows, (k + 1) * rows)),
    right: order.map((k) => right.subarray(k * count, (k + 1) * count)),
  };
}

/** Turns the columns that begin at x and y by the angle of a tangent: x -> c x - s y, y -> s x + c y. */
function rotate(matrix: Float64Array, x: number, y: number, rows: number, tangent: number): void {
  const c = 1 / Math.sqrt(1 + tangent * tangent);
  const s = c * tangent;
  for (let i = 0; i < rows; i++) {
    const a = matrix[x + i]!;
    const b = matrix[y + i]!;
    matrix[x + i] = c * a - s * b;
    matrix[y + i] = s * a + c * b;
  }
}

function dot(matrix: Float64Array, x: number, y: number, rows: number): number {
  let sum = 0;
  for (let i = 0; i < rows; i++) sum += matrix[x + i]! * matrix[y + i]!;
  return sum;
}
