import { couplet } from "../../gen/couplet.js";
import { withDoubles } from "../doubles.js";
import { requireWithin } from "../limits.js";
import type { ServedParent } from "../served.js";
import { requireMass } from "./mass.js";
import { type Method, method, type Snapshot } from "./method.js";

import v1 = couplet.v1;

/** Widths of all rows at some masses, as the answers have them. */
interface WidthsAnswer {
  readonly tableSha256: Uint8Array;
  readonly totalWidths: Float64Array;
  readonly widths: Float64Array;
  readonly fractions: Float64Array;
}

/** `EvaluateWidths`: widths and fractions at one mass. */
export const evaluateWidths: Method = method(
  "EvaluateWidths",
  false,
  v1.EvaluateWidthsRequest,
  ({ tableSha256, totalWidths, widths, fractions }: WidthsAnswer) => {
    const head = v1.EvaluateWidthsResponse.encode({ tableSha256, totalWidth: totalWidths[0]! }).finish();
    return withDoubles(head, [
      [3, widths],
      [4, fractions],
    ]);
  },
  ({ served }: Snapshot, request) => {
    const parent = served.parent(request.parent);
    const message = widthsAt(parent, [request.mass], () => "mass");
    return { message, rowsEvaluated: message.widths.length };
  },
);

/** The answers to a batch; its two messages have the same fields. */
function batchResponse({ tableSha256, totalWidths, widths, fractions }: WidthsAnswer): Uint8Array {
  return withDoubles(v1.EvaluateWidthsBatchResponse.encode({ tableSha256 }).finish(), [
    [2, totalWidths],
    [3, widths],
    [4, fractions],
  ]);
}

/** `EvaluateWidthsBatch`: the same at many masses. */
export const evaluateWidthsBatch: Method = method(
  "EvaluateWidthsBatch",
  false,
  v1.EvaluateWidthsBatchRequest,
  batchResponse,
  batchOfWidths,
);

/** `EvaluateWidthsStream`: a stream of batches. */
export const evaluateWidthsStream: Method = method(
  "EvaluateWidthsStream",
  true,
  v1.EvaluateWidthsStreamRequest,
  batchResponse,
  batchOfWidths,
);

function batchOfWidths(
  { served, limits }: Snapshot,
  request: { parent?: v1.ParentKey.$Properties | null; masses: number[] },
) {
  requireWithin("masses", limits.masses, request.masses.length, "masses", "Send them in several requests.");
  const parent = served.parent(request.parent);
  const message = widthsAt(parent, request.masses, (k) => `masses[${k}]`);
  return { message, rowsEvaluated: message.widths.length };
}

let space = new Float64Array(0);

/**
 * Room for one answer: totals, widths and fractions, with anything in them. Every call takes the same room and encodes its
 * answer before the next one comes; room of its own for each would be half of the server's time in garbage collection.
 */
function workSpace(masses: number, rows: number): [Float64Array, Float64Array, Float64Array] {
  const cells = masses * rows;
  if (space.length < masses + 2 * cells) space = new Float64Array(masses + 2 * cells);
  return [
    space.subarray(0, masses),
    space.subarray(masses, masses + cells),
    space.subarray(masses + cells, masses + 2 * cells),
  ];
}

function widthsAt(
  parent: ServedParent,
  masses: readonly number[],
  where: (index: number) => string,
): WidthsAnswer {
  const evaluator = parent.evaluator();
  const { rowCount } = evaluator;
  const [totalWidths, widths, fractions] = workSpace(masses.length, rowCount);
  for (let k = 0; k < masses.length; k++) requireMass(masses[k]!, k, where);
  evaluator.manyInto(masses, widths, totalWidths);
  for (let k = 0, row = 0; k < masses.length; k++) {
    const total = totalWidths[k]!;
    const inverse = total > 0 ? 1 / total : 0;
    for (const end = row + rowCount; row < end; row++) fractions[row] = widths[row]! * inverse;
  }
  return { tableSha256: parent.table.sha256, totalWidths, widths, fractions };
}
