import { seededUniform } from "./squared-forms.js";

/** A seeded source of standard normal numbers, by the polar method. */
export function seededNormal(seed: number): () => number {
  const uniform = seededUniform(seed);
  return () => {
    for (;;) {
      const [x, y] = [uniform(), uniform()];
      const square = x * x + y * y;
      if (square > 0 && square < 1) return x * Math.sqrt((-2 * Math.log(square)) / square);
    }
  };
}
