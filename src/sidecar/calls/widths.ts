import { couplet } from "../../gen/couplet.js";
import { type Doubles, doubles } from "../doubles.js";
import { requireWithin } from "../limits.js";
import type { ServedParent } from "../served.js";
import { requireMass } from "./mass.js";
import { type Method, method, type Snapshot } from "./method.js";

import v1 = couplet.v1;

/** `EvaluateWidths`: widths and fractions at one mass. */
export const evaluateWidths: Method = method(
  "EvaluateWidths",
  false,
  v1.EvaluateWidthsRequest,
  v1.EvaluateWidthsResponse,
  ({ served }: Snapshot, request) => {
    const parent = served.parent(request.parent);
    const { totalWidths, widths, fractions } = widthsAt(parent, [request.mass], () => "mass");
    return {
      message: { tableSha256: parent.table.sha256, totalWidth: totalWidths[0]!, widths, fractions },
      rowsEvaluated: widths.length,
    };
  },
);

/** `EvaluateWidthsBatch`: the same at many masses. */
export const evaluateWidthsBatch: Method = method(
  "EvaluateWidthsBatch",
  false,
  v1.EvaluateWidthsBatchRequest,
  v1.EvaluateWidthsBatchResponse,
  batchOfWidths,
);

/** `EvaluateWidthsStream`: a stream of batches. */
export const evaluateWidthsStream: Method = method(
  "EvaluateWidthsStream",
  true,
  v1.EvaluateWidthsStreamRequest,
  v1.EvaluateWidthsStreamResponse,
  batchOfWidths,
);

function batchOfWidths(
  { served, limits }: Snapshot,
  request: { parent?: v1.ParentKey.$Properties | null; masses: number[] },
) {
  requireWithin("masses", limits.masses, request.masses.length, "masses", "Send them in several requests.");
  const parent = served.parent(request.parent);
  const { totalWidths, widths, fractions } = widthsAt(parent, request.masses, (k) => `masses[${k}]`);
  return {
    message: { tableSha256: parent.table.sha256, totalWidths, widths, fractions },
    rowsEvaluated: widths.length,
  };
}

function widthsAt(
  parent: ServedParent,
  masses: readonly number[],
  where: (index: number) => string,
): { totalWidths: Doubles; widths: Doubles; fractions: Doubles } {
  const evaluator = parent.evaluator();
  const { rowCount } = evaluator;
  const totalWidths = doubles(masses.length);
  const widths = doubles(masses.length * rowCount);
  const fractions = doubles(widths.length);
  for (const [k, massMeV] of masses.entries()) {
    requireMass(massMeV, k, where);
    const start = k * rowCount;
    const total = evaluator.widthsInto(massMeV, widths, start);
    totalWidths[k] = total;
    if (total === 0) continue;
    for (let row = start; row < start + rowCount; row++) fractions[row] = widths[row]! / total;
  }
  return { totalWidths, widths, fractions };
}
