import { describe, expect, test } from "vitest";
import { partialWidthMeV } from "../../src/widths/partial-width.js";
import { widthModel } from "../../src/widths/width-model.js";
import type { WidthModelOptions } from "../../src/widths/width-model-definition.js";

/**
 * One coupling for the decuplet, fixed by Delta -> N pi = 117 MeV, and the three other open widths that follow.
 * Expected numbers: worked out once with an independent program from the same masses; regression values, not data.
 * Coefficients: 10 -> 8 x 8 isoscalar factors squared, J. J. de Swart, Rev. Mod. Phys. 35 (1963) 916.
 */
const MASSES_MEV = {
  Delta: 1232,
  "Sigma*": 1384.6,
  "Xi*": 1533.4,
  N: 938.919,
  Lambda: 1115.683,
  Sigma: 1193.154,
  Xi: 1318.285,
  pi: 138.039,
};
const VERTEX = {
  L: 1,
  parent: { twoJ: 3, parity: 1 },
  daughters: [
    { twoJ: 1, parity: 1 },
    { twoJ: 0, parity: -1 },
  ],
} as const;
const CHANNELS = [
  ["Sigma*", "Lambda", 1 / 4],
  ["Sigma*", "Sigma", 1 / 6],
  ["Xi*", "Xi", 1 / 4],
] as const;

const LADDERS: [string, WidthModelOptions, number, number[]][] = [
  ["a", { n: 2 }, 30.234056, [35.508, 4.928, 11.566]],
  ["a", { n: 1 }, 24.54063, [39.906, 5.538, 14.395]],
  ["b", { rangeMeV: 350, nucleonMassMeV: 938.919 }, 4.552473, [41.925, 7.005, 17.176]],
  // R = 1/GeV and 5/GeV.
  ["c", { radiusFm: 0.1973269804 }, 25.808807, [40.227, 5.737, 14.792]],
  ["c", { radiusFm: 5 * 0.1973269804 }, 2.249801, [43.926, 9.197, 20.789]],
  ["d", { scaleMeV: 139.57 }, 9.460496, [47.147, 6.956, 19.991]],
];

function widthMeV(
  id: string,
  options: WidthModelOptions,
  parent: string,
  baryon: string,
  amplitudeSquared: number,
): number {
  const mass = MASSES_MEV as Record<string, number>;
  const decay = {
    parentMeV: mass[parent]!,
    firstMeV: mass[baryon]!,
    secondMeV: mass["pi"]!,
    identicalDaughters: false,
  };
  return partialWidthMeV(widthModel(id, options), amplitudeSquared, decay, VERTEX);
}

describe("decuplet ladder", () => {
  test.each(LADDERS)(
    "model %s with %j gives the known coupling and widths",
    (id, options, couplingSquared, widths) => {
      const squared = 117 / widthMeV(id, options, "Delta", "N", 1 / 2);
      // Compared at the last digit the independent program printed.
      expect(squared).toBeCloseTo(couplingSquared, 6);
      CHANNELS.forEach(([parent, baryon, cSquared], k) => {
        expect(widthMeV(id, options, parent, baryon, squared * cSquared)).toBeCloseTo(widths[k]!, 3);
      });
    },
  );

  test("f^2/4 pi of Delta++ -> p pi+ is 0.3764 in model d with the mass of the charged pion as scale", () => {
    const fSquared = 117 / widthMeV("d", { scaleMeV: 139.57 }, "Delta", "N", 1);
    expect(fSquared / (4 * Math.PI)).toBeCloseTo(0.3764, 4);
  });
});
