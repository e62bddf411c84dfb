import { LimitError } from "../errors.js";
import { requireInteger } from "../require.js";
import { type Irrep, irrepDimension, irrepName, requireIrrep } from "./irrep.js";
import type { SeriesEntry } from "./product.js";
import { states } from "./state.js";

/** Multiplicities of weights, by `3Y,2I3`. */
type Character = ReadonlyMap<string, number>;

const LARGEST_DIMENSION = 1_000_000;

/**
 * The irreps in the symmetric power of an irrep: what n identical bosons of it can be. In the order of
 * `decomposeProduct`.
 *
 * Source: the weights of the power are those of multisets of n states; irreps are read off from the highest down.
 * @throws InputError unless n is an integer >= 1; LimitError above a million states
 * @example symmetricPower(octet, 2) // 1 + 8 + 27
 */
export function symmetricPower(irrep: Irrep, n: number): SeriesEntry[] {
  return power("symmetricPower", irrep, n, 1);
}

/**
 * The irreps in the antisymmetric power of an irrep: what n identical fermions of it can be; empty above its dimension.
 *
 * @throws InputError unless n is an integer >= 1; LimitError above a million states
 * @example antisymmetricPower(octet, 2) // 8 + 10 + 10bar
 */
export function antisymmetricPower(irrep: Irrep, n: number): SeriesEntry[] {
  return power("antisymmetricPower", irrep, n, -1);
}

function power(where: string, irrep: Irrep, n: number, symmetry: 1 | -1): SeriesEntry[] {
  requireIrrep(where, irrep);
  requireInteger(`${where}: n`, n, 1);
  const count = binomial(irrepDimension(irrep) + (symmetry === 1 ? n - 1 : 0), n);
  if (count > LARGEST_DIMENSION) {
    throw new LimitError(
      `${where}: expected at most ${LARGEST_DIMENSION} states, got ${count} in power ${n} of ${irrepName(irrep)}. Choose a smaller power.`,
    );
  }
  return decomposed(powerCharacter(irrep, n, symmetry));
}

/** The character of the power: states enter one after another, each any number of times, or at most once. */
function powerCharacter(irrep: Irrep, n: number, symmetry: 1 | -1): Character {
  const levels: Map<string, number>[] = Array.from({ length: n + 1 }, () => new Map());
  levels[0]!.set(weightKey(0, 0), 1);
  for (const { threeY, twoI3 } of states(irrep)) {
    // Upwards a state may enter again on top of itself; downwards it cannot.
    const order = Array.from({ length: n }, (_, i) => (symmetry === 1 ? i : n - 1 - i));
    for (const level of order) {
      for (const [key, count] of levels[level]!) {
        const [y, i3] = weightOf(key);
        const target = weightKey(y + threeY, i3 + twoI3);
        levels[level + 1]!.set(target, (levels[level + 1]!.get(target) ?? 0) + count);
      }
    }
  }
  return levels[n]!;
}

/** The irreps of a character: the highest weight left belongs to one, whose weights are then taken away. */
function decomposed(character: Character): SeriesEntry[] {
  const rest = new Map(character);
  const series: SeriesEntry[] = [];
  const highestFirst = [...rest.keys()].sort((a, b) => {
    const [[y1, i1], [y2, i2]] = [weightOf(a), weightOf(b)];
    return y2 - y1 || i2 - i1;
  });
  for (const key of highestFirst) {
    const multiplicity = rest.get(key)!;
    if (multiplicity === 0) continue;
    const [threeY, p] = weightOf(key);
    const irrep = { p, q: (threeY - p) / 2 };
    for (const state of states(irrep)) {
      const weight = weightKey(state.threeY, state.twoI3);
      rest.set(weight, rest.get(weight)! - multiplicity);
    }
    series.push({ irrep, multiplicity });
  }
  return series.sort((a, b) => irrepDimension(a.irrep) - irrepDimension(b.irrep) || b.irrep.p - a.irrep.p);
}

function weightKey(threeY: number, twoI3: number): string {
  return `${threeY},${twoI3}`;
}

function weightOf(key: string): [threeY: number, twoI3: number] {
  return key.split(",").map(Number) as [number, number];
}

function binomial(n: number, k: number): number {
  let value = 1;
  for (let i = 1; i <= k; i++) value = (value * (n - i + 1)) / i;
  return Math.max(0, Math.round(value));
}
