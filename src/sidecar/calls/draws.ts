import { createHash } from "node:crypto";
import { uniformFloat64 } from "pure-rand/distribution/uniformFloat64";
import { uniformInt } from "pure-rand/distribution/uniformInt";
import { xoroshiro128plusFromState } from "pure-rand/generator/xoroshiro128plus";
import type { RandomGenerator } from "pure-rand/types/RandomGenerator";
import { WHOLE } from "../../completion/parts-per-billion.js";
import { couplet } from "../../gen/couplet.js";
import { refuse } from "../../require.js";
import { requireWithin } from "../limits.js";
import type { ServedParent } from "../served.js";
import { requireMass } from "./mass.js";
import { type Method, method, type Snapshot } from "./method.js";

import v1 = couplet.v1;

/** `DrawChannels`: rows drawn with a seed of the caller. */
export const drawChannels: Method = method(
  "DrawChannels",
  false,
  v1.DrawChannelsRequest,
  v1.DrawChannelsResponse,
  batchOfDraws,
);

/** `DrawChannelsStream`: a stream of batches. */
export const drawChannelsStream: Method = method(
  "DrawChannelsStream",
  true,
  v1.DrawChannelsStreamRequest,
  v1.DrawChannelsStreamResponse,
  batchOfDraws,
);

function batchOfDraws(
  { served, limits }: Snapshot,
  request: v1.DrawChannelsRequest | v1.DrawChannelsStreamRequest,
) {
  const { count, masses } = request;
  if (count > 0 === masses.length > 0)
    refuse(
      "draws",
      "either a count or masses",
      `count ${count} and ${masses.length} masses`,
      "Give one of them.",
    );
  requireWithin("count", limits.draws, count, "draws", "Ask for several batches.");
  requireWithin("masses", limits.masses, masses.length, "masses", "Send them in several requests.");
  const parent = served.parent(request.parent);
  const random = randomOf(parent.name, String(request.seed), String(request.batch));
  const rows = count > 0 ? drawnAtNominalMass(parent, count, random) : drawnAt(parent, masses, random);
  return { message: { tableSha256: parent.table.sha256, rows }, draws: rows.length };
}

/** The random numbers of one batch; see `DrawChannelsRequest` in `sidecar.proto`. */
function randomOf(parent: string, seed: string, batch: string): RandomGenerator {
  const digest = createHash("sha256").update(`couplet-draws-v1/${parent}/${seed}/${batch}`).digest();
  return xoroshiro128plusFromState([0, 4, 8, 12].map((at) => digest.readInt32BE(at)));
}

function drawnAtNominalMass(
  { cumulativeParts }: ServedParent,
  count: number,
  random: RandomGenerator,
): number[] {
  return Array.from({ length: count }, () => firstAbove(cumulativeParts, uniformInt(random, 0, WHOLE - 1)));
}

function drawnAt(parent: ServedParent, masses: readonly number[], random: RandomGenerator): number[] {
  const evaluator = parent.evaluator();
  const widths = new Float64Array(evaluator.rowCount);
  return masses.map((massMeV, k) => {
    requireMass(massMeV, k, (index) => `masses[${index}]`);
    // One random number a draw, used or not, so that draws do not depend on one another.
    const u = uniformFloat64(random);
    const total = evaluator.widthsInto(massMeV, widths, 0);
    if (total === 0) return -1;
    let left = u * total;
    let lastOpen = -1;
    for (let row = 0; row < widths.length; row++) {
      if (widths[row]! === 0) continue;
      lastOpen = row;
      left -= widths[row]!;
      if (left < 0) return row;
    }
    // Rounding may leave a crumb above the last row.
    return lastOpen;
  });
}

/** Index of the first sum that is above a number; sums rise, and the last one is above it. */
function firstAbove(sums: Float64Array, value: number): number {
  let low = 0;
  let high = sums.length - 1;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (sums[middle]! > value) high = middle;
    else low = middle + 1;
  }
  return low;
}
