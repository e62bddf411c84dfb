import { describe, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { rootToNumber } from "../../src/exact/signed-root.js";
import { clebschGordan } from "../../src/su2/clebsch-gordan.js";
import { breakupMomentumMeV } from "../../src/widths/breakup-momentum.js";
import { widthModel } from "../../src/widths/width-model.js";
import type { SpinParity, Vertex } from "../../src/widths/width-model-definition.js";

/**
 * Closed widths against sums over explicit spin states, the momentum along z, where all components that matter are
 * real. Gamma = q/(8 pi M^2) sum |A|^2 / (2J + 1).
 */
const cg = (...labels: Parameters<typeof clebschGordan>) => rootToNumber(clebschGordan(...labels));

/** Component z...z of the polarisation tensor of rank n with projection m, built up from vectors one by one. */
function tensorAlongZ(n: number, m: number): number {
  if (Math.abs(m) > n) return 0;
  if (n === 0) return 1;
  // Only the vector of projection 0 has a component along z.
  return Math.abs(m) > n - 1 ? 0 : cg(2 * n - 2, 2 * m, 2, 0, 2 * n, 2 * m) * tensorAlongZ(n - 1, m);
}

/** Sum over spins of |ubar(p) {1 or gamma_5} u_z...z|^2 q^2n, for a parent of spin n + 1/2 at rest. */
function spinorSum(n: number, withGamma5: boolean, M: number, m: number, q: number): number {
  const E = Math.hypot(m, q);
  let sum = 0;
  for (let twoM = -(2 * n + 1); twoM <= 2 * n + 1; twoM += 2) {
    for (const twoS of [1, -1]) {
      const twoMn = twoM - twoS;
      if (Math.abs(twoMn) > 2 * n) continue;
      const component = cg(2 * n, twoMn, 1, twoS, 2 * n + 1, twoM) * tensorAlongZ(n, twoMn / 2);
      // Dirac spinors: upper part sqrt(E+m) chi, lower part sigma.p/sqrt(E+m) chi, with sigma.p = q times the sign of s.
      const overlap = withGamma5 ? (twoS * q) / Math.sqrt(E + m) : Math.sqrt(E + m);
      sum += (component * overlap * Math.sqrt(2 * M) * q ** n) ** 2;
    }
  }
  return sum;
}

const BARYON: SpinParity = { twoJ: 1, parity: 1 };
const SPINLESS: SpinParity = { twoJ: 0, parity: -1 };
const VECTOR: SpinParity = { twoJ: 2, parity: -1 };

describe("model d against spinors", () => {
  const [M, m, meson] = [1675, 939, 138];
  const q = breakupMomentumMeV(M, m, meson);
  const model = widthModel("d", { scaleMeV: 1000 });

  test.each([
    [1, 0],
    [1, 1],
    [3, 1],
    [3, 2],
    [5, 2],
    [5, 3],
    [7, 3],
    [7, 4],
  ])("spin %i/2 in the wave L = %i", (twoJ, L) => {
    const n = (twoJ - 1) / 2;
    const sum = spinorSum(n, L === n + 1, M, m, q) / 1000 ** (2 * n);
    const expected = (q / (8 * Math.PI * M ** 2)) * (sum / (twoJ + 1));
    const vertex: Vertex = { L, parent: { twoJ, parity: 1 }, daughters: [BARYON, SPINLESS] };
    expect(model.kinematicFactorMeV(M, m, meson, vertex) / expected).toBeCloseTo(1, 12);
  });

  test.each([
    // Sums over spinors by an independent program, in GeV, scale 1 GeV, coupling 1; regression values.
    [1, 1, 4.175458e-3],
    [1, 0, 5.443655e-2],
    [3, 1, 5.758262e-3],
    [3, 2, 4.416772e-4],
    [5, 3, 5.606438e-5],
    [5, 2, 7.309262e-4],
  ])("spin %i/2, L = %i: the number of an independent program", (twoJ, L, expectedGeV) => {
    const vertex: Vertex = { L, parent: { twoJ, parity: 1 }, daughters: [BARYON, SPINLESS] };
    expect(model.kinematicFactorMeV(M, m, meson, vertex) / 1000 / expectedGeV).toBeCloseTo(1, 6);
  });

  test("refuses spins it has no formula for, and a wave that does not fit", () => {
    const vector: Vertex = { L: 1, parent: { twoJ: 3, parity: 1 }, daughters: [BARYON, VECTOR] };
    expect(() => model.kinematicFactorMeV(M, m, meson, vector)).toThrow(
      new InputError(
        "width model d: twice the spins: expected a half-integer spin into 1/2 and 0, got [3,1,2]. " +
          "The baryon comes first. Use models a to c for other spins.",
      ),
    );
    const wave: Vertex = { L: 3, parent: { twoJ: 3, parity: 1 }, daughters: [BARYON, SPINLESS] };
    expect(() => model.kinematicFactorMeV(M, m, meson, wave)).toThrow(
      new InputError("width model d: L: expected 1 or 2 for a parent of spin 3/2, got 3. Check the spins."),
    );
    expect(() => model.kinematicFactorMeV(M, m, meson, { L: 1 })).toThrow(
      new InputError(
        'width model d: vertex: expected spins of parent and daughters, got "none". ' +
          "Give spin and parity of all three.",
      ),
    );
  });
});

type FourVector = readonly [number, number, number, number];

const TRANSVERSE: readonly FourVector[] = [
  [0, 1, 0, 0],
  [0, 0, 1, 0],
];
const AT_REST: readonly FourVector[] = [...TRANSVERSE, [0, 0, 0, 1]];

/** Polarisations of a vector of mass m moving along z with momentum q (of either sign); two for a photon. */
function polarisations(m: number, q: number): readonly FourVector[] {
  return m === 0 ? TRANSVERSE : [...TRANSVERSE, [q / m, 0, 0, Math.hypot(m, q) / m]];
}

const product = (a: FourVector, b: FourVector) => a[0] * b[0] - a[1] * b[1] - a[2] * b[2] - a[3] * b[3];

/** eps_mnab a^m b^n c^a d^b: the determinant of the four vectors, by expansion along the first row. */
function determinant(rows: readonly (readonly number[])[]): number {
  if (rows.length === 0) return 1;
  const [first, ...others] = rows as [readonly number[], ...(readonly number[])[]];
  return first.reduce((sum, entry, k) => {
    const minor = others.map((row) => row.filter((_, column) => column !== k));
    return sum + (k % 2 === 0 ? 1 : -1) * entry * determinant(minor);
  }, 0);
}

const squares = (amplitudes: readonly number[]) => amplitudes.reduce((sum, a) => sum + a * a, 0);
const pairs = (
  a: readonly FourVector[],
  b: readonly FourVector[],
  f: (x: FourVector, y: FourVector) => number,
) => a.flatMap((x) => b.map((y) => f(x, y)));

describe("model e against polarisation sums", () => {
  const [M, m1, m2] = [1230, 775, 138];
  const q = breakupMomentumMeV(M, m1, m2);
  const model = widthModel("e");
  const p1: FourVector = [Math.hypot(m1, q), 0, 0, q];
  const p2: FourVector = [Math.hypot(m2, q), 0, 0, -q];
  const P: FourVector = [M, 0, 0, 0];
  const difference: FourVector = [p1[0] - p2[0], 0, 0, 2 * q];

  const cases: [string, Vertex, string, number][] = [
    [
      "vector to two spinless",
      { L: 1, parent: VECTOR, daughters: [SPINLESS, SPINLESS] },
      "1",
      squares(AT_REST.map((eps) => product(eps, difference))),
    ],
    [
      "tensor to two spinless",
      { L: 2, parent: { twoJ: 4, parity: 1 }, daughters: [SPINLESS, SPINLESS] },
      "1/MeV",
      squares([-2, -1, 0, 1, 2].map((m) => tensorAlongZ(2, m) * q * q)),
    ],
    [
      "vector to vector and spinless",
      { L: 1, parent: VECTOR, daughters: [VECTOR, SPINLESS] },
      "1/MeV",
      squares(pairs(AT_REST, polarisations(m1, q), (eps, eps1) => determinant([eps, P, eps1, p1]))),
    ],
    [
      "scalar to two spinless",
      { L: 0, parent: { twoJ: 0, parity: 1 }, daughters: [SPINLESS, SPINLESS] },
      "MeV",
      1,
    ],
    [
      "axial vector to vector and spinless",
      { L: 0, parent: { twoJ: 2, parity: 1 }, daughters: [VECTOR, SPINLESS] },
      "MeV",
      squares(pairs(AT_REST, polarisations(m1, q), product)),
    ],
    [
      "spinless to two vectors",
      { L: 1, parent: SPINLESS, daughters: [VECTOR, VECTOR] },
      "1/MeV",
      squares(
        pairs(polarisations(m1, q), polarisations(m2, -q), (eps1, eps2) => determinant([eps1, p1, eps2, p2])),
      ),
    ],
  ];

  test.each(cases)("%s", (_, vertex, unit, sum) => {
    const expected = (q / (8 * Math.PI * M ** 2)) * (sum / (vertex.parent!.twoJ + 1));
    expect(model.kinematicFactorMeV(M, m1, m2, vertex) / expected).toBeCloseTo(1, 12);
    expect(model.amplitudeUnit(vertex)).toBe(unit);
  });

  test("a photon takes the place of the vector in vector to vector and spinless, with the same width", () => {
    const momentum = breakupMomentumMeV(782.66, 0, 134.9768);
    const moving: FourVector = [momentum, 0, 0, momentum];
    const sum = squares(
      pairs(AT_REST, polarisations(0, momentum), (eps, eps1) =>
        determinant([eps, [782.66, 0, 0, 0], eps1, moving]),
      ),
    );
    const vertex: Vertex = { L: 1, parent: VECTOR, daughters: [VECTOR, SPINLESS] };
    const expected = (momentum / (8 * Math.PI * 782.66 ** 2)) * (sum / 3);
    expect(model.kinematicFactorMeV(782.66, 0, 134.9768, vertex) / expected).toBeCloseTo(1, 12);
  });

  test("refuses a photon where the coupling is not gauge invariant, and spins it does not know", () => {
    const axial: Vertex = { L: 0, parent: { twoJ: 2, parity: 1 }, daughters: [VECTOR, SPINLESS] };
    expect(() => model.kinematicFactorMeV(1230, 0, 138, axial)).toThrow(
      new InputError(
        "width model e: mass of the vector daughter in MeV: expected a number > 0, got 0. " +
          "This coupling is not gauge invariant; there is none for a photon here.",
      ),
    );
    expect(() => model.amplitudeUnit({ ...axial, L: 2 })).toThrow(
      new InputError(
        "width model e: [twice the spins, L]: expected one of: vector to two spinless; tensor to two spinless; " +
          "vector to vector or photon and spinless; scalar to two spinless; axial vector to massive vector and " +
          "spinless; spinless to two vectors or photons, got [2,2,0,2]. Use models a to c for others.",
      ),
    );
  });
});
