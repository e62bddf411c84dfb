import { EigenvalueDecomposition, Matrix } from "ml-matrix";

type Vector = readonly number[];

/** Parts of a gradient or of a curvature below this part of the largest count as 0. */
const NEGLIGIBLE = 1e-9;

/**
 * The point u of length `radius` where g.u + u^T H u / 2 is largest.
 *
 * It is u = (mu - H)^-1 g with mu above every eigenvalue; where g has no part along the uppermost eigenvector, that
 * vector fills up the length, and of the two equally good signs + is taken.
 * Source: J.J. More and D.C. Sorensen, SIAM J. Sci. Stat. Comput. 4 (1983) 553.
 * @param hessian - symmetric, one row per entry of the gradient
 * @param radius - > 0
 */
export function maximumOnSphere(gradient: Vector, hessian: readonly Vector[], radius: number): number[] {
  const decomposition = new EigenvalueDecomposition(new Matrix(hessian.map((row) => [...row])), {
    assumeSymmetric: true,
  });
  const lambda = decomposition.realEigenvalues;
  const axes = lambda.map((_, k) => decomposition.eigenvectorMatrix.getColumn(k));
  const g = axes.map((axis) => axis.reduce((sum, value, j) => sum + value * gradient[j]!, 0));
  const top = lambda.indexOf(Math.max(...lambda));
  const size = Math.hypot(...g) / radius;
  const scale = Math.max(size, ...lambda.map(Math.abs));
  if (Math.abs(g[top]!) < NEGLIGIBLE * scale * radius) g[top] = 0;
  const along = (mu: number) => lambda.map((value, k) => (g[k] === 0 ? 0 : g[k]! / (mu - value)));
  // |along(mu)| falls from infinity (or from its value at the top eigenvalue) to at most the radius at the upper end.
  let [low, high] = [lambda[top]!, lambda[top]! + size + NEGLIGIBLE * scale];
  for (let round = 0; round < 100; round++) {
    const middle = (low + high) / 2;
    if (Math.hypot(...along(middle)) > radius) low = middle;
    else high = middle;
  }
  const u = along(high);
  const rest = Math.hypot(...u.filter((_, k) => k !== top));
  u[top] = Math.sqrt(Math.max(0, radius * radius - rest * rest)) * (g[top]! < 0 ? -1 : 1);
  return gradient.map((_, j) => axes.reduce((sum, axis, k) => sum + axis[j]! * u[k]!, 0));
}
