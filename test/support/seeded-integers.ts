/** A seeded source of integers (xorshift32), so that a failing case can be run again. */
export interface SeededIntegers {
  /** An integer in [0, bound). */
  below(bound: number): number;
  /** An integer of at most `bits` binary digits. */
  bigint(bits: number): bigint;
}

/** A source that gives the same integers for the same seed, an integer other than 0. */
export function seededIntegers(seed: number): SeededIntegers {
  let state = seed | 0;
  const next = () => {
    state ^= state << 13;
    state ^= state >>> 17;
    state ^= state << 5;
    return state >>> 0;
  };
  return {
    below: (bound) => next() % bound,
    bigint: (bits) => {
      let value = 0n;
      for (let have = 0; have < bits; have += 32) value = (value << 32n) | BigInt(next());
      return value & ((1n << BigInt(bits)) - 1n);
    },
  };
}
