import { uniformFloat64 } from "pure-rand/distribution/uniformFloat64";
import { xoroshiro128plus } from "pure-rand/generator/xoroshiro128plus";
import { expect, test } from "vitest";
import { signCellBound, signCells } from "../../src/fit/sign-cells.js";

const SEED = 20240611;

/** The sign patterns that random directions meet, one of each pair: an independent, slow count. */
function patternsByChance(forms: number[][], dimension: number, samples: number): Set<string> {
  const random = xoroshiro128plus(SEED);
  const seen = new Set<string>();
  for (let i = 0; i < samples; i++) {
    const point = Array.from({ length: dimension }, () => uniformFloat64(random) - 0.5);
    seen.add(patternOf(forms, point));
  }
  return seen;
}

function patternOf(forms: number[][], point: readonly number[]): string {
  const signs = forms.map((form) => Math.sign(form.reduce((sum, value, j) => sum + value * point[j]!, 0)));
  const first = signs.find((sign) => sign !== 0)!;
  return signs.map((sign) => (sign * first > 0 ? "+" : sign === 0 ? "0" : "-")).join("");
}

test("the cells of n lines through the origin of a plane are n pairs", () => {
  const forms = [0.1, 0.5, 1.2, 2, 2.9].map((angle) => [Math.cos(angle), Math.sin(angle)]);
  expect(signCells(forms, 2)).toHaveLength(5);
});

test("the coordinate hyperplanes of p dimensions make 2^(p-1) pairs of cells", () => {
  for (let p = 1; p <= 6; p++) {
    const axes = Array.from({ length: p }, (_, i) => Array.from({ length: p }, (_, j) => (i === j ? 1 : 0)));
    expect(signCells(axes, p)).toHaveLength(2 ** (p - 1));
  }
});

test("the braid arrangement x_i = x_j of p letters has p!/2 pairs of cells, although it is not in general position", () => {
  const braid = (p: number) => {
    const forms: number[][] = [];
    for (let i = 0; i < p; i++) {
      for (let j = i + 1; j < p; j++)
        forms.push(Array.from({ length: p }, (_, k) => (k === i ? 1 : k === j ? -1 : 0)));
    }
    return forms;
  };
  expect([2, 3, 4, 5].map((p) => signCells(braid(p), p).length)).toEqual([1, 3, 12, 60]);
});

test(`random forms in general position reach the bound, and random directions (seed ${SEED}) meet no other pattern`, () => {
  const random = xoroshiro128plus(SEED);
  for (const [n, p] of [
    [4, 2],
    [6, 3],
    [7, 4],
    [9, 3],
    [8, 5],
  ] as const) {
    const forms = Array.from({ length: n }, () =>
      Array.from({ length: p }, () => uniformFloat64(random) - 0.5),
    );
    const found = new Set(signCells(forms, p).map((point) => patternOf(forms, point)));
    expect(found.size).toBe(signCellBound(forms, p));
    expect([...patternsByChance(forms, p, 20_000)].filter((pattern) => !found.has(pattern))).toEqual([]);
  }
});

test("parallel, zero and rank-deficient forms are counted once, and no point lies on a wall", () => {
  const forms = [
    [1, 1, 0],
    [-2, -2, 0],
    [0, 0, 0],
    [1, -1, 0],
  ];
  const found = signCells(forms, 3);
  expect(found.map((point) => patternOf(forms, point)).sort()).toEqual(["+-0+", "+-0-"]);
  expect(signCells([[0, 0]], 2)).toEqual([]);
});
