import { expect, test } from "vitest";
import { InputError, LimitError } from "../../src/errors.js";
import { levenbergMarquardt } from "../../src/fit/levenberg-marquardt.js";
import { findMinima, type MinimaProblem } from "../../src/fit/minima.js";
import { minimaOfPlaneProfile, squaredForms } from "./squared-forms.js";

/** F/(F+D) of a minimum in the couplings (g, alpha g). */
const alpha = (parameters: readonly number[]) => parameters[1]! / parameters[0]!;
const sorted = (values: number[]) => values.sort((a, b) => a - b);

/** Isospin-summed amplitudes of octet -> octet + pseudoscalar, as forms in (g, alpha g). */
const OCTET = {
  // J.J. de Swart, Rev. Mod. Phys. 35 (1963) 916, table of the octet vertices in alpha = F/(F+D); provenance: memory.
  "N->Npi": [Math.sqrt(3), 0],
  "N->SigK": [Math.sqrt(3), -2 * Math.sqrt(3)],
  "Sig->NKb": [Math.sqrt(2), -2 * Math.sqrt(2)],
  "Sig->Lampi": [Math.sqrt(4 / 3), -Math.sqrt(4 / 3)],
  "Sig->Sigpi": [0, Math.sqrt(8)],
  "Lam->NKb": [Math.sqrt(2 / 3), 2 * Math.sqrt(2 / 3)],
  "Lam->Sigpi": [2, -2],
} as const;

test("one ratio |1 - 2 alpha| = 0.2 has the two solutions alpha = 0.4 and 0.6 of exact algebra", () => {
  const forms = [OCTET["N->Npi"], OCTET["N->SigK"]];
  const { minima, otherMinima } = findMinima(squaredForms(forms, [3, 3 * 0.04], [0.3, 0.02]));
  const alphas = sorted(minima.map(({ parameters }) => alpha(parameters)));
  expect(alphas).toHaveLength(2);
  expect(alphas[0]).toBeCloseTo(0.4, 12);
  expect(alphas[1]).toBeCloseTo(0.6, 12);
  expect(otherMinima).toBe(0);
  expect(minima.map(({ ndf, probability }) => [ndf, probability])).toEqual([
    [0, 1],
    [0, 1],
  ]);
});

test("the reduced ratio 4 (1 - alpha)^2 / 9 = 0.16 of Sig -> Lam pi to N -> N pi has alpha = 0.4 and 1.6", () => {
  const forms = [OCTET["N->Npi"], OCTET["Sig->Lampi"]];
  const { minima } = findMinima(squaredForms(forms, [3, 3 * 0.16], [0.3, 0.02]));
  const alphas = sorted(minima.map(({ parameters }) => alpha(parameters)));
  expect(alphas).toHaveLength(2);
  expect(alphas[0]).toBeCloseTo(0.4, 9);
  expect(alphas[1]).toBeCloseTo(1.6, 9);
});

/** Width in MeV of a 5/2- state for unit amplitude: (q / GeV)^5 (GeV / M)^2, the D-wave momentum power. */
function dWave(massGeV: number, baryonGeV: number, mesonGeV: number): number {
  const [sum, difference] = [baryonGeV + mesonGeV, baryonGeV - mesonGeV];
  const q = Math.sqrt((massGeV ** 2 - sum ** 2) * (massGeV ** 2 - difference ** 2)) / (2 * massGeV);
  return q ** 5 / massGeV ** 2;
}

test("six widths of the 5/2- octet have their best minimum at alpha = -0.240 with chi-square 5.32", () => {
  // Widths rounded from the Review of Particle Physics; provenance: memory. Expected minimum: a scan over alpha made
  // apart from this code, and the profile below.
  const [N, LAM, SIG, PI, K] = [0.938919, 1.115683, 1.193154, 0.138039, 0.495644];
  const rows = [
    { form: OCTET["N->Npi"], width: 58, error: 3, factor: dWave(1.675, N, PI) },
    { form: OCTET["Sig->NKb"], width: 48, error: 4, factor: dWave(1.775, N, K) },
    { form: OCTET["Sig->Lampi"], width: 20.4, error: 3.6, factor: dWave(1.775, LAM, PI) },
    { form: OCTET["Sig->Sigpi"], width: 4.2, error: 1.8, factor: dWave(1.775, SIG, PI) },
    { form: OCTET["Lam->NKb"], width: 5.4, error: 1.8, factor: dWave(1.825, N, K) },
    { form: OCTET["Lam->Sigpi"], width: 54, error: 14, factor: dWave(1.825, SIG, PI) },
  ];
  const problem = squaredForms(
    rows.map((row) => row.form.map((value) => value * Math.sqrt(row.factor))),
    rows.map((row) => row.width),
    rows.map((row) => row.error),
  );
  const { minima, otherMinima } = findMinima(problem);
  expect(alpha(minima[0]!.parameters)).toBeCloseTo(-0.2402, 4);
  expect(minima[0]!.chi2).toBeCloseTo(5.319, 3);
  expect(minima[0]!.ndf).toBe(4);
  // The profile over the angle in the plane of couplings has no second minimum: neither may the search.
  expect(minimaOfPlaneProfile(problem)).toHaveLength(1);
  expect([minima.length, otherMinima]).toEqual([1, 0]);
});

test("each of its widths over that of N -> N pi alone allows the pairs of alpha that exact algebra gives", () => {
  // alpha of each pair: from the closed formula for one ratio, with the same masses and widths.
  const [N, LAM, SIG, PI, K] = [0.938919, 1.115683, 1.193154, 0.138039, 0.495644];
  const npi = { width: 58, factor: dWave(1.675, N, PI) };
  const cases = [
    { form: OCTET["Sig->NKb"], width: 48, factor: dWave(1.775, N, K), pair: [-0.272, 1.272] },
    { form: OCTET["Sig->Lampi"], width: 20.4, factor: dWave(1.775, LAM, PI), pair: [-0.128, 2.128] },
    { form: OCTET["Sig->Sigpi"], width: 4.2, factor: dWave(1.775, SIG, PI), pair: [-0.272, 0.272] },
    { form: OCTET["Lam->NKb"], width: 5.4, factor: dWave(1.825, N, K), pair: [-0.879, -0.121] },
    { form: OCTET["Lam->Sigpi"], width: 54, factor: dWave(1.825, SIG, PI), pair: [-0.172, 2.172] },
  ];
  for (const { form, width, factor, pair } of cases) {
    const squares = [npi.width / npi.factor, width / factor];
    const errors = squares.map((value) => value / 10);
    const measured = squaredForms([OCTET["N->Npi"], form], squares, errors);
    // A channel to be predicted ties the signs of both couplings together; N pi and Sig pi alone would not.
    const { minima } = findMinima({ ...measured, forms: [...measured.forms, OCTET["N->SigK"]] });
    const alphas = sorted(minima.map(({ parameters }) => alpha(parameters)));
    expect(alphas.map((value) => value.toFixed(3))).toEqual(pair.map((value) => value.toFixed(3)));
  }
});

const PLANE = [
  [1, 0],
  [0.3, 1],
  [1, -2],
  [0.5, 0.8],
];
const PLANE_SQUARES = [4.1, 5.3, 0.9, 2.9];
const PLANE_SIGMAS = [0.2, 0.3, 0.1, 0.2];

test("the order of the observables changes no digit that counts", () => {
  const order = [2, 0, 3, 1];
  const pick = <T>(rows: readonly T[]) => order.map((k) => rows[k]!);
  const a = findMinima(squaredForms(PLANE, PLANE_SQUARES, PLANE_SIGMAS), { deltaChi2: Infinity });
  const b = findMinima(squaredForms(pick(PLANE), pick(PLANE_SQUARES), pick(PLANE_SIGMAS)), {
    deltaChi2: Infinity,
  });
  expect(a.minima.length).toBeGreaterThan(1);
  expect(b.minima).toHaveLength(a.minima.length);
  for (const [k, { parameters, chi2 }] of a.minima.entries()) {
    expect(relative(b.minima[k]!.chi2, chi2)).toBeLessThan(1e-11);
    expect(relative(b.minima[k]!.parameters[1]!, parameters[1]!)).toBeLessThan(1e-11);
  }
});

test("widths in GeV instead of MeV divide the couplings by sqrt(1000), their covariance by 1000, and keep chi-square", () => {
  const scale = (values: readonly number[]) => values.map((value) => value / 1000);
  const a = findMinima(squaredForms(PLANE, PLANE_SQUARES, PLANE_SIGMAS)).minima[0]!;
  const b = findMinima(squaredForms(PLANE, scale(PLANE_SQUARES), scale(PLANE_SIGMAS))).minima[0]!;
  expect(relative(b.chi2, a.chi2)).toBeLessThan(1e-11);
  expect(relative(b.parameters[0]! * Math.sqrt(1000), a.parameters[0]!)).toBeLessThan(1e-11);
  expect(relative(b.covariance[0]![1]! * 1000, a.covariance[0]![1]!)).toBeLessThan(1e-9);
});

test("doubling all errors doubles the errors of the couplings and quarters chi-square", () => {
  const a = findMinima(squaredForms(PLANE, PLANE_SQUARES, PLANE_SIGMAS)).minima[0]!;
  const doubled = PLANE_SIGMAS.map((value) => 2 * value);
  const b = findMinima(squaredForms(PLANE, PLANE_SQUARES, doubled)).minima[0]!;
  expect(relative(4 * b.chi2, a.chi2)).toBeLessThan(1e-11);
  expect(relative(b.covariance[1]![1]!, 4 * a.covariance[1]![1]!)).toBeLessThan(1e-9);
});

test("two unmixed multiplets give the product of their minima, each with its own sign", () => {
  const left = [
    [1, 0],
    [1, -2],
  ];
  const forms = [...left.map((row) => [...row, 0, 0]), ...left.map((row) => [0, 0, ...row])];
  const problem = squaredForms(forms, [1, 0.04, 9, 1], [0.1, 0.01, 0.1, 0.1]);
  const { minima } = findMinima(problem);
  const pairs = minima.map(({ parameters: [a, b, c, d] }) =>
    [a, b, c, d].map((value) => value!.toFixed(6)).join(" "),
  );
  expect(pairs.sort()).toEqual([
    "1.000000 0.400000 3.000000 1.000000",
    "1.000000 0.400000 3.000000 2.000000",
    "1.000000 0.600000 3.000000 1.000000",
    "1.000000 0.600000 3.000000 2.000000",
  ]);
});

test("more couplings than constraints are reported as one degenerate valley with its direction, not as many minima", () => {
  const forms = [
    [1, 0, 0],
    [0, 1, 1],
    [1, 2, 2],
  ];
  const { minima } = findMinima(squaredForms(forms, [1, 4, 25], [0.1, 0.1, 0.1]), { deltaChi2: Infinity });
  expect(minima[0]!.verdicts.covariancePositiveDefinite).toBe(false);
  expect(minima[0]!.verdicts.degenerateDirections).toHaveLength(1);
  const [direction] = minima[0]!.verdicts.degenerateDirections;
  expect(Math.abs(direction![0]!)).toBeLessThan(1e-9);
  expect(Math.abs(direction![1]! + direction![2]!)).toBeLessThan(1e-9);
  expect(Math.hypot(...direction!)).toBeCloseTo(1, 12);
  // In the two determined combinations there are two minima, as a profile over their plane says.
  const plane = minimaOfPlaneProfile(
    squaredForms(
      [
        [1, 0],
        [0, 1],
        [1, 2],
      ],
      [1, 4, 25],
      [0.1, 0.1, 0.1],
    ),
  );
  expect(minima).toHaveLength(plane.length);
  expect(minima[0]!.ndf).toBe(1);
});

test("a curved valley is one valley too: a coupling and a normalisation of which only the product is measured", () => {
  const problem: MinimaProblem = {
    parameterNames: ["g", "n"],
    couplingCount: 1,
    forms: [[1]],
    amplitudeTargets: [{ form: 0, amplitude: 2, sigma: 0.1 }],
    nuisanceStarts: [1],
    bounds: [
      { lower: Number.NEGATIVE_INFINITY, upper: Number.POSITIVE_INFINITY },
      { lower: 0.1, upper: 10 },
    ],
    residuals: ([g, n]) => [((g! * n!) ** 2 - 4) / 0.4],
  };
  const { minima, otherMinima } = findMinima(problem);
  expect([minima.length, otherMinima]).toEqual([1, 0]);
  expect(minima[0]!.verdicts.degenerateDirections).toHaveLength(1);
});

/** Widths (c . g + 0.2 |g| z)^2 with one common z of unit prior: an additive theory error on one channel. */
const withTheoryError: MinimaProblem = {
  parameterNames: ["g1", "g2", "z"],
  couplingCount: 2,
  forms: PLANE,
  amplitudeTargets: PLANE.map((_, form) => ({
    form,
    amplitude: Math.sqrt(PLANE_SQUARES[form]!),
    sigma: 0.1,
  })),
  nuisanceStarts: [0],
  residuals: ([g1, g2, z]) => [
    ...PLANE.map(([a, b], k) => {
      const breaking = k === 2 ? 0.2 * Math.hypot(g1!, g2!) * z! : 0;
      return ((a! * g1! + b! * g2! + breaking) ** 2 - PLANE_SQUARES[k]!) / PLANE_SIGMAS[k]!;
    }),
    z!,
  ],
};

test("a nuisance parameter that must turn with the sign of the couplings is turned with it", () => {
  const { minima } = findMinima(withTheoryError, { deltaChi2: Infinity });
  expect(minima.length).toBeGreaterThan(1);
  for (const { parameters, chi2 } of minima) {
    expect(parameters[0]!).toBeGreaterThan(0);
    const sum = withTheoryError.residuals(parameters).reduce((total, value) => total + value * value, 0);
    expect(relative(sum, chi2)).toBeLessThan(1e-12);
    const mirrored = withTheoryError.residuals(parameters.map((value) => -value));
    expect(
      relative(
        mirrored.reduce((total, value) => total + value * value, 0),
        chi2,
      ),
    ).toBeLessThan(1e-12);
  }
});

test("a prior that prefers one sign makes both signs be searched, and neither is turned", () => {
  const base = squaredForms([[1]], [4], [0.4]);
  const problem: MinimaProblem = {
    ...base,
    residuals: ([g]) => [(g! * g! - 4) / 0.4, (g! + 1) / 2],
    jacobian: undefined!,
  };
  const { jacobian: _, ...withoutJacobian } = problem;
  const { minima } = findMinima(withoutJacobian);
  expect(minima.map(({ parameters }) => Math.sign(parameters[0]!))).toEqual([-1, 1]);
  expect(minima[0]!.chi2).toBeLessThan(minima[1]!.chi2);
});

test("the saddle between two minima, where a fit may rest, is not listed", () => {
  // Squares of g1 + g2 and g1 - g2 are both 4: minima at (2, 0) and (0, 2), a saddle at (1, 1).
  const problem = squaredForms(
    [
      [1, 1],
      [1, -1],
    ],
    [4, 4],
    [0.1, 0.1],
  );
  expect(levenbergMarquardt(problem, [1, 1]).verdicts.converged).toBe(true);
  const { minima, otherMinima } = findMinima(problem);
  const found = minima.map(({ parameters }) =>
    parameters.map((value) => Math.abs(value).toFixed(6)).join(" "),
  );
  expect(found.sort()).toEqual(["0.000000 2.000000", "2.000000 0.000000"]);
  expect(otherMinima).toBe(0);
});

test("an amplitude measured below zero has its minimum at 0, found although J^T J vanishes there", () => {
  const { minima } = findMinima(
    squaredForms(
      [
        [1, 0],
        [0, 1],
      ],
      [1, -0.2],
      [0.1, 0.1],
    ),
  );
  expect(minima).toHaveLength(1);
  const { parameters, chi2, verdicts } = minima[0]!;
  expect(verdicts.converged).toBe(true);
  expect(Math.abs(parameters[1]!)).toBeLessThan(1e-6);
  expect(chi2).toBeCloseTo(4, 10);
});

test("minima beyond the stated distance in chi-square are counted, and Infinity lists them", () => {
  const problem = squaredForms(PLANE, PLANE_SQUARES, PLANE_SIGMAS);
  const all = findMinima(problem, { deltaChi2: Infinity });
  const near = findMinima(problem, { deltaChi2: 1 });
  expect(all.otherMinima).toBe(0);
  expect(near.minima.length).toBeLessThan(all.minima.length);
  expect(near.minima.length + near.otherMinima).toBe(all.minima.length);
});

test("a search that could need too many starts is refused beforehand with an estimate", () => {
  const forms = Array.from({ length: 30 }, (_, k) =>
    Array.from({ length: 6 }, (_, j) => Math.cos(k * (j + 1))),
  );
  const problem = squaredForms(
    forms,
    forms.map(() => 1),
    forms.map(() => 1),
  );
  expect(() => findMinima(problem)).toThrow(
    new LimitError(
      "findMinima: 6 couplings with 30 forms need up to 4691072 starts, more than the limit of 20000. " +
        "Fix or leave out couplings, or raise the limit maximumStarts.",
    ),
  );
});

test("progress is reported after every fit, and a signal stops between two fits with its own reason", () => {
  const problem = squaredForms(PLANE, PLANE_SQUARES, PLANE_SIGMAS);
  const seen: number[][] = [];
  const { starts } = findMinima(problem, { onProgress: (done, total) => seen.push([done, total]) });
  expect(seen).toEqual(Array.from({ length: starts }, (_, k) => [k + 1, starts]));
  const stop = new AbortController();
  const onProgress = (done: number) => done === 3 && stop.abort(new Error("stopped by the user"));
  expect(() => findMinima(problem, { signal: stop.signal, onProgress })).toThrow(
    new Error("stopped by the user"),
  );
});

test("a problem that does not fit together is refused in words", () => {
  const problem = squaredForms(PLANE, PLANE_SQUARES, PLANE_SIGMAS);
  const cases: [Partial<MinimaProblem>, string][] = [
    [
      { forms: [[1, 0, 0]], amplitudeTargets: [] },
      "findMinima: forms 0: expected 2 finite numbers, one per coupling, got [1,0,0].",
    ],
    [
      { nuisanceStarts: [0] },
      "findMinima: nuisanceStarts: expected 0 numbers, one per name after the couplings, got [0].",
    ],
    [
      { amplitudeTargets: [{ form: 9, amplitude: 1, sigma: 1 }] },
      "findMinima: amplitudeTargets 0, form: expected an index below 4, got 9.",
    ],
    [
      { amplitudeTargets: [{ form: 0, amplitude: 1, sigma: 0 }] },
      "findMinima: amplitudeTargets 0, sigma: expected a finite number > 0, got 0.",
    ],
    [
      { residuals: () => [0, Number.NaN], amplitudeTargets: [] },
      "levenbergMarquardt: residual 1 at the start: expected a finite number, got NaN.",
    ],
  ];
  for (const [change, message] of cases) {
    expect(() => findMinima({ ...problem, ...change })).toThrow(new InputError(message));
  }
});

function relative(value: number, reference: number): number {
  return Math.abs(value - reference) / Math.abs(reference);
}
