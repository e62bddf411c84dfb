import { uniformFloat64 } from "pure-rand/distribution/uniformFloat64";
import { xoroshiro128plus } from "pure-rand/generator/xoroshiro128plus";

/**
 * A source of independent standard normal numbers for one of many experiments, the same on every machine and thread.
 *
 * Seed and index are mixed so that no two experiments of one seed share a stream. Numbers by the polar method:
 * G. Marsaglia and T.A. Bray, SIAM Rev. 6 (1964) 260; mixing as in D. Lea et al., OOPSLA 2014, "SplittableRandom".
 * @param seed - of the whole run, a 32-bit integer
 * @param index - of the experiment
 */
export function normalNumbers(seed: number, index: number): () => number {
  const random = xoroshiro128plus(mixed((Math.imul(seed, 0x9e3779b9) + index) | 0));
  return () => {
    for (;;) {
      const x = 2 * uniformFloat64(random) - 1;
      const y = 2 * uniformFloat64(random) - 1;
      const square = x * x + y * y;
      if (square > 0 && square < 1) return x * Math.sqrt((-2 * Math.log(square)) / square);
    }
  };
}

/** A one-to-one scramble of 32-bit integers in which every bit of the input reaches every bit of the result. */
function mixed(value: number): number {
  let bits = value;
  bits = Math.imul(bits ^ (bits >>> 16), 0x85ebca6b);
  bits = Math.imul(bits ^ (bits >>> 13), 0xc2b2ae35);
  return bits ^ (bits >>> 16);
}
