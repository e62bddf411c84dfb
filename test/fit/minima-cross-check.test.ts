import { expect, test } from "vitest";
import { curvatureAt } from "../../src/fit/curvature.js";
import { findMinima } from "../../src/fit/minima.js";
import { minimaByChance, minimaOfPlaneProfile, randomProblem, seededUniform } from "./squared-forms.js";

const FIRST_SEED = 20240701;

/** Relative distance of two points, up to the overall sign. */
function apart(a: readonly number[], b: readonly number[]): number {
  const difference = (sign: number) => Math.hypot(...a.map((value, j) => value - sign * b[j]!));
  return Math.min(difference(1), difference(-1)) / Math.hypot(...a);
}

test(`for two couplings the search finds exactly the minima of the profile over the angle (seeds from ${FIRST_SEED})`, () => {
  let total = 0;
  for (let seed = FIRST_SEED; seed < FIRST_SEED + 30; seed++) {
    const uniform = seededUniform(seed);
    const { problem } = randomProblem(uniform, 2, 2 + (seed % 9), 1 + (seed % 3));
    const found = findMinima(problem, { deltaChi2: Number.POSITIVE_INFINITY }).minima;
    const scanned = minimaOfPlaneProfile(problem, 20_000).sort((a, b) => a.chi2 - b.chi2);
    expect([seed, found.length]).toEqual([seed, scanned.length]);
    for (const { angle } of scanned) {
      if (angle === null) continue;
      const direction = [Math.cos(angle), Math.sin(angle)];
      const met = found.some(({ parameters }) => {
        const length = Math.hypot(...parameters);
        return (
          apart(
            parameters.map((value) => value / length),
            direction,
          ) < 3e-4
        );
      });
      expect([seed, angle, met]).toEqual([seed, angle, true]);
    }
    total += found.length;
  }
  console.log(`two couplings: ${total} minima in 30 problems, all as the profile has them`);
});

test(`for 2, 3 and 4 couplings with 4 to 10 observables random starts find no minimum that the search misses (seeds from ${FIRST_SEED})`, () => {
  const tally = { problems: 0, starts: 0, minima: 0, byChance: 0 };
  for (let seed = FIRST_SEED; seed < FIRST_SEED + 42; seed++) {
    const uniform = seededUniform(seed);
    const [couplings, observables] = [2 + (seed % 3), 4 + (Math.floor(seed / 3) % 7)];
    const { problem } = randomProblem(uniform, couplings, observables, 1 + (seed % 4));
    const { minima, starts } = findMinima(problem, { deltaChi2: Number.POSITIVE_INFINITY });
    const chance = minimaByChance(problem, uniform, 100, 1.5);
    const missed = chance.filter(
      (other) => !minima.some((m) => apart(m.parameters, other.parameters) < 1e-3),
    );
    expect([seed, missed]).toEqual([seed, []]);
    for (const { parameters, verdicts } of minima) {
      expect([seed, verdicts.converged]).toEqual([seed, true]);
      expect(curvatureAt(problem, parameters).eigenvalues[0]).toBeGreaterThan(0);
    }
    tally.problems++;
    tally.starts += starts;
    tally.minima += minima.length;
    tally.byChance += chance.length;
  }
  console.log(
    `${tally.problems} problems: ${tally.minima} minima from ${tally.starts} starts; ` +
      `${tally.byChance} of them by chance from ${100 * tally.problems}`,
  );
  expect(tally.minima).toBeGreaterThanOrEqual(tally.byChance);
}, 180_000);

test(`planted couplings come back from exact squares, with chi-square 0 (seeds from ${FIRST_SEED})`, () => {
  for (let seed = FIRST_SEED; seed < FIRST_SEED + 12; seed++) {
    const { problem, planted } = randomProblem(seededUniform(seed), 2 + (seed % 3), 8, 0);
    const best = findMinima(problem).minima[0]!;
    expect([seed, apart(best.parameters, planted) < 1e-9, best.chi2 < 1e-15]).toEqual([seed, true, true]);
  }
});
