import type { Hadron } from "../hadrons/hadron.js";
import { lineShapeChannels } from "../hadrons/line-shape-channels.js";

/** A row of a parent as far as it matters here. */
export interface NamedFinal {
  readonly id: string;
  readonly daughters: readonly Hadron[];
}

/** Hadrons narrower than this, in MeV, keep their name in a final state: an experiment sees them as particles. */
const NARROW_MEV = 1;

/** Final states of one row that are looked at, at most. */
const MOST_STATES = 5000;

/** What an unstable hadron decays to, by the names of its decays' daughters; empty for one that counts as stable. */
export type DecaysOf = (hadron: Hadron) => readonly (readonly Hadron[])[];

/**
 * Decays of unstable ground states by the isospin multiplet they are in: every pair of charge states of the right charge.
 *
 * @param memberOf - the name of a hadron's isospin multiplet
 */
export function groundStateDecays(memberOf: (name: string) => string): DecaysOf {
  return (hadron) => {
    if ((hadron.widthMeV ?? 0) < NARROW_MEV) return [];
    const channels = lineShapeChannels(memberOf(hadron.name))?.channels ?? [];
    return channels.flatMap(({ daughters: [first, second] }) =>
      first.hadrons.flatMap((a) =>
        second.hadrons.flatMap((b) => (a.charge + b.charge === hadron.charge ? [[a, b]] : [])),
      ),
    );
  };
}

/**
 * A pair of rows one of which contains the other, so that both together would count it twice; the first such pair.
 *
 * Row A contains row B if the daughters of B, decayed one after another by `decaysOf`, become those of A. Neutral kaons
 * are alike here, since K0 is K_S0 or K_L0.
 * @returns the containing row and the contained one, or undefined
 */
export function doubleCounted(
  rows: readonly NamedFinal[],
  decaysOf: DecaysOf,
): { whole: NamedFinal; part: NamedFinal } | undefined {
  const byKey = new Map<string, NamedFinal>();
  for (const row of rows) {
    const key = keyOf(row.daughters);
    const same = byKey.get(key);
    if (same !== undefined && !bothProjections(same, row)) return { whole: same, part: row };
    byKey.set(key, row);
  }
  for (const part of rows) {
    for (const key of reached(part.daughters, decaysOf)) {
      const whole = byKey.get(key);
      if (whole !== undefined) return { whole, part };
    }
  }
  return undefined;
}

/** K_S0 and K_L0, or K0 and K0bar, beside the same particles are different rows. */
function bothProjections(a: NamedFinal, b: NamedFinal): boolean {
  const kinds = (row: NamedFinal) =>
    row.daughters
      .map(({ name }) => name)
      .filter(isNeutralKaon)
      .sort();
  const isFlavour = (names: readonly string[]) => names.some((name) => name === "K0" || name === "K0bar");
  const [first, second] = [kinds(a), kinds(b)];
  return isFlavour(first) === isFlavour(second) && first.join() !== second.join();
}

function isNeutralKaon(name: string): boolean {
  return ["K0", "K0bar", "K_S0", "K_L0"].includes(name);
}

function keyOf(daughters: readonly Hadron[]): string {
  return daughters
    .map(({ name }) => (isNeutralKaon(name) ? "K0" : name))
    .sort()
    .join(" ");
}

/** Keys of all final states that daughters can decay to, without the one they are. */
function reached(daughters: readonly Hadron[], decaysOf: DecaysOf): Set<string> {
  const start = keyOf(daughters);
  const seen = new Set([start]);
  let front: readonly (readonly Hadron[])[] = [daughters];
  while (front.length > 0 && seen.size < MOST_STATES) {
    const next: (readonly Hadron[])[] = [];
    for (const state of front) {
      for (const [k, hadron] of state.entries()) {
        for (const products of decaysOf(hadron)) {
          const decayed = [...state.slice(0, k), ...products, ...state.slice(k + 1)];
          const key = keyOf(decayed);
          if (seen.has(key)) continue;
          seen.add(key);
          next.push(decayed);
        }
      }
    }
    front = next;
  }
  seen.delete(start);
  return seen;
}
