import { uniformFloat64 } from "pure-rand/distribution/uniformFloat64";
import { xoroshiro128plus } from "pure-rand/generator/xoroshiro128plus";
import { levenbergMarquardt } from "../../src/fit/levenberg-marquardt.js";
import type { MinimaProblem } from "../../src/fit/minima.js";

/** The problem of measured squares (l_k . g)^2 = squares[k] +- sigmas[k], with its exact Jacobian. */
export function squaredForms(
  forms: readonly (readonly number[])[],
  squares: readonly number[],
  sigmas: readonly number[],
): MinimaProblem & { jacobian(parameters: readonly number[]): number[][] } {
  const amplitude = (form: readonly number[], g: readonly number[]) =>
    form.reduce((sum, value, j) => sum + value * g[j]!, 0);
  return {
    parameterNames: forms[0]!.map((_, j) => `g${j + 1}`),
    couplingCount: forms[0]!.length,
    forms,
    // Near 0 the error of a root is at most the root of the error; a square below 0 asks for the amplitude 0.
    amplitudeTargets: squares.map((square, form) => {
      const amplitude = Math.sqrt(Math.max(0, square));
      const rootOfError = Math.sqrt(sigmas[form]!);
      return { form, amplitude, sigma: Math.min(rootOfError, sigmas[form]! / (2 * amplitude || 1e-300)) };
    }),
    nuisanceStarts: [],
    residuals: (g) => forms.map((form, k) => (amplitude(form, g) ** 2 - squares[k]!) / sigmas[k]!),
    jacobian: (g) =>
      forms.map((form, k) => form.map((value) => (2 * amplitude(form, g) * value) / sigmas[k]!)),
  };
}

/** A seeded source of uniform numbers in (-1, 1). */
export function seededUniform(seed: number): () => number {
  const random = xoroshiro128plus(seed);
  return () => 2 * uniformFloat64(random) - 1;
}

/** Random forms, planted couplings, and squares measured with 5-25 % errors and Gaussian-like noise `noise` times them. */
export function randomProblem(uniform: () => number, couplings: number, observables: number, noise: number) {
  const vector = () => Array.from({ length: couplings }, uniform);
  const planted = vector();
  const forms = Array.from({ length: observables }, vector);
  const exact = forms.map((form) => form.reduce((sum, value, j) => sum + value * planted[j]!, 0) ** 2);
  const sigmas = exact.map((value) => 0.01 + value * (0.15 + 0.1 * uniform()));
  const gauss = () => Math.sqrt(2) * (uniform() + uniform() + uniform()) * Math.SQRT1_2;
  const squares = exact.map((value, k) => value + noise * gauss() * sigmas[k]!);
  return { planted, forms, squares, sigmas, problem: squaredForms(forms, squares, sigmas) };
}

/** A minimum in the plane of two couplings: its direction in radians, null at the origin. */
export interface PlaneMinimum {
  readonly angle: number | null;
  readonly chi2: number;
}

/**
 * Minima of a two-coupling problem of squared forms, by another way: for each direction in the plane the best length
 * is linear least squares in its square, and the minima of that profile over the angle are those of chi-square.
 */
export function minimaOfPlaneProfile(problem: MinimaProblem, steps = 200_000): PlaneMinimum[] {
  const profile = (angle: number) => {
    const [none, full] = [problem.residuals([0, 0]), problem.residuals([Math.cos(angle), Math.sin(angle)])];
    const slope = full.map((value, k) => value - none[k]!);
    const dot = (a: number[], b: number[]) => a.reduce((sum, value, k) => sum + value * b[k]!, 0);
    const square = Math.max(0, -dot(slope, none) / dot(slope, slope));
    return none.reduce((sum, value, k) => sum + (value + square * slope[k]!) ** 2, 0);
  };
  const values = Array.from({ length: steps }, (_, i) => profile((Math.PI * i) / steps));
  // Where every direction does best at length 0, that point is the one minimum.
  if (values.every((value) => value === values[0])) return [{ angle: null, chi2: values[0]! }];
  return values.flatMap((chi2, i) => {
    const [before, after] = [values.at(i - 1)!, values[(i + 1) % steps]!];
    return chi2 < before && chi2 <= after ? [{ angle: (Math.PI * i) / steps, chi2 }] : [];
  });
}

/** Minima met from many random starts, first coupling positive: the slow, independent search. */
export function minimaByChance(problem: MinimaProblem, uniform: () => number, starts: number, size: number) {
  const found: { parameters: number[]; chi2: number; hits: number }[] = [];
  for (let i = 0; i < starts; i++) {
    const start = Array.from({ length: problem.couplingCount }, () => size * uniform());
    const fit = levenbergMarquardt(problem, start, { refine: false, initialRadius: 0.1 });
    if (!fit.verdicts.converged) continue;
    const sign = fit.parameters[0]! < 0 ? -1 : 1;
    const parameters = fit.parameters.map((value) => sign * value);
    const known = found.find(
      (other) =>
        Math.hypot(...other.parameters.map((v, j) => v - parameters[j]!)) < 1e-3 * Math.hypot(...parameters),
    );
    if (known) known.hits++;
    else found.push({ parameters, chi2: fit.chi2, hits: 1 });
  }
  return found.sort((a, b) => a.chi2 - b.chi2);
}
