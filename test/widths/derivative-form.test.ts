import { describe, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { breakupMomentumMeV } from "../../src/widths/breakup-momentum.js";
import { partialWidthMeV } from "../../src/widths/partial-width.js";
import { widthModel } from "../../src/widths/width-model.js";
import type { Vertex } from "../../src/widths/width-model-definition.js";

/**
 * Model d with `derivativeForm` against the Lagrangian Bbar gamma^mu {1 or gamma_5} R d_mu phi: matrix elements of
 * the slashed momentum of the meson between explicit Dirac spinors, summed over spins. No Dirac equation is used.
 */
type Matrix = readonly (readonly number[])[];

// Dirac's representation; with all momenta along z, only real matrices and components occur.
const GAMMA_0: Matrix = [
  [1, 0, 0, 0],
  [0, 1, 0, 0],
  [0, 0, -1, 0],
  [0, 0, 0, -1],
];
const GAMMA_3: Matrix = [
  [0, 0, 1, 0],
  [0, 0, 0, -1],
  [-1, 0, 0, 0],
  [0, 1, 0, 0],
];
const GAMMA_5: Matrix = [
  [0, 0, 1, 0],
  [0, 0, 0, 1],
  [1, 0, 0, 0],
  [0, 1, 0, 0],
];

const times = (a: Matrix, v: readonly number[]) =>
  a.map((row) => row.reduce((sum, entry, k) => sum + entry * v[k]!, 0));

/** Dirac spinor of a mass and a momentum along z, normalised to ubar u = 2 mass. */
function spinor(massMeV: number, q: number, sign: 1 | -1): number[] {
  const root = Math.sqrt(Math.hypot(massMeV, q) + massMeV);
  const [upper, lower] = [root, (sign * q) / root];
  return sign === 1 ? [upper, 0, lower, 0] : [0, upper, 0, lower];
}

/** Width for f = 1 in MeV: q/(8 pi M^2) times the mean over spins of |ubar(p) slash(k) Gamma u(P)|^2 / m_s^2. */
function derivativeWidthMeV(M: number, m: number, meson: number, withGamma5: boolean, scale: number): number {
  const q = breakupMomentumMeV(M, m, meson);
  // The meson's momentum is P - p: its energy, and -q along z.
  const energy = Math.hypot(meson, q);
  let sum = 0;
  for (const parent of [1, -1] as const) {
    const u = spinor(M, 0, parent);
    const chosen = withGamma5 ? times(GAMMA_5, u) : u;
    const [time, space] = [times(GAMMA_0, chosen), times(GAMMA_3, chosen)];
    const slashed = time.map((entry, k) => energy * entry + q * space[k]!);
    for (const daughter of [1, -1] as const) {
      const bar = times(GAMMA_0, spinor(m, q, daughter));
      sum += bar.reduce((amplitude, entry, k) => amplitude + entry * slashed[k]!, 0) ** 2;
    }
  }
  return (q / (8 * Math.PI * M ** 2)) * (sum / 2 / scale ** 2);
}

const MASSES = [
  [1535, 938.9, 138],
  [1535, 938.9, 547.9],
  [1650, 1115.7, 495.6],
  [1440, 938.9, 138],
  [2800, 938.9, 1.5],
] as const;

const scaleMeV = 139.57;
const plain = widthModel("d", { scaleMeV });
const derivative = widthModel("d", { scaleMeV, derivativeForm: 1 });

function vertexOf(parent: 1 | -1, baryon: 1 | -1, meson: 1 | -1, L: number, twoJ = 1): Vertex {
  return {
    L,
    parent: { twoJ, parity: parent },
    daughters: [
      { twoJ: 1, parity: baryon },
      { twoJ: 0, parity: meson },
    ],
  };
}

describe.each([
  ["1/2- to 1/2+ 0-", vertexOf(-1, 1, -1, 0)],
  ["1/2+ to 1/2+ 0+", vertexOf(1, 1, 1, 0)],
  ["1/2+ to 1/2- 0-", vertexOf(1, -1, -1, 0)],
  ["1/2+ to 1/2+ 0-", vertexOf(1, 1, -1, 1)],
  ["1/2- to 1/2- 0-", vertexOf(-1, -1, -1, 1)],
])("%s", (_, vertex) => {
  const takesGamma5 = vertex.L === 1;
  const g = (f: number, M: number, m: number) => (f * (takesGamma5 ? M + m : M - m)) / scaleMeV;

  test.each(MASSES)("%f -> %f %f: K is the sum over spins", (M, m, meson) => {
    const expected = derivativeWidthMeV(M, m, meson, takesGamma5, scaleMeV);
    expect(derivative.kinematicFactorMeV(M, m, meson, vertex) / expected).toBeCloseTo(1, 11);
    // With the other Dirac matrix it is another number, so that the comparison means something.
    expect(derivative.kinematicFactorMeV(M, m, meson, vertex)).not.toBeCloseTo(
      derivativeWidthMeV(M, m, meson, !takesGamma5, scaleMeV),
      3,
    );
  });

  /**
   * Equivalence of pseudoscalar and pseudovector coupling on the mass shell: F. J. Dyson, Phys. Rev. 73 (1948) 929;
   * K. M. Case, Phys. Rev. 76 (1949) 14; provenance: memory. Here with the masses of unlike baryons.
   */
  test.each(MASSES)("%f -> %f %f: f/m_P = g/(M -+ m) gives the width of g", (M, m, meson) => {
    const decay = { parentMeV: M, firstMeV: m, secondMeV: meson, identicalDaughters: false };
    const byMeson = widthModel("d", { scaleMeV: meson, derivativeForm: 1 });
    const coupling = 2.5;
    const f = (coupling * meson) / (takesGamma5 ? M + m : M - m);
    const widths = [
      partialWidthMeV(byMeson, f ** 2, decay, vertex),
      partialWidthMeV(plain, coupling ** 2, decay, vertex),
    ];
    expect(widths[0]).toBeGreaterThan(0);
    expect(Math.abs(widths[0]! / widths[1]! - 1)).toBeLessThan(1e-10);
  });

  test("with the parent's mass, the width runs as that of the running g", () => {
    const [M, m, meson] = MASSES[0];
    for (const mass of [M - 300, M - 20, M + 20, M + 900]) {
      const ratio =
        derivative.kinematicFactorMeV(mass, m, meson, vertex) /
        derivative.kinematicFactorMeV(M, m, meson, vertex);
      const plainRatio =
        plain.kinematicFactorMeV(mass, m, meson, vertex) / plain.kinematicFactorMeV(M, m, meson, vertex);
      const expected = plainRatio * (g(1, mass, m) / g(1, M, m)) ** 2;
      expect(ratio / expected).toBeCloseTo(1, 12);
      const atMass = derivativeWidthMeV(mass, m, meson, takesGamma5, scaleMeV);
      expect((ratio * derivativeWidthMeV(M, m, meson, takesGamma5, scaleMeV)) / atMass).toBeCloseTo(1, 11);
    }
  });
});

describe("the option derivativeForm", () => {
  test("is 0 by default: no derivative for spin 1/2, and no scale in K", () => {
    expect(plain.options).toEqual({ scaleMeV, derivativeForm: 0 });
    const other = widthModel("d", { scaleMeV: 1000, derivativeForm: 0 });
    const vertex = vertexOf(-1, 1, -1, 0);
    expect(other.kinematicFactorMeV(1535, 938.9, 138, vertex)).toBe(
      plain.kinematicFactorMeV(1535, 938.9, 138, vertex),
    );
  });

  test.each([
    [3, 1],
    [3, 2],
    [5, 2],
    [5, 3],
  ])("changes nothing for spin %i/2 with L = %i", (twoJ, L) => {
    const vertex = vertexOf(1, 1, 1, L, twoJ);
    const K = plain.kinematicFactorMeV(1675, 939, 138, vertex);
    expect(K).toBeGreaterThan(0);
    expect(derivative.kinematicFactorMeV(1675, 939, 138, vertex)).toBe(K);
  });

  test("leaves the coupling without a unit", () => {
    expect(derivative.amplitudeUnit(vertexOf(-1, 1, -1, 0))).toBe("1");
  });

  test.each([0.5, 2, -1])("is refused as %f", (derivativeForm) => {
    expect(() => widthModel("d", { derivativeForm })).toThrow(
      new InputError(
        `width model d: derivativeForm: expected an integer from 0 to 1, got ${derivativeForm}. It is 1 for a derivative ` +
          "in the coupling of a parent of spin 1/2, 0 for none; without effect for higher spins, whose couplings have " +
          "derivatives in any case; the default is 0.",
      ),
    );
  });

  test("belongs to model d alone", () => {
    expect(() => widthModel("a", { derivativeForm: 1 })).toThrow(
      new InputError(
        'width model a: option: expected an option among n, referenceMomentumMeV, referenceMassMeV, got "derivativeForm". ' +
          "Remove it or mend its name.",
      ),
    );
  });
});
