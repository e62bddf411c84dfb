import type { Irrep } from "../../src/su3/irrep.js";

/** All irreps with p + q <= n. */
export function irrepsUpTo(n: number): Irrep[] {
  return Array.from({ length: n + 1 }, (_, sum) =>
    Array.from({ length: sum + 1 }, (_, q) => ({ p: sum - q, q })),
  ).flat();
}
