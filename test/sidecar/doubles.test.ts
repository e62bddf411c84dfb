import { expect, test } from "vitest";
import { couplet } from "../../src/gen/couplet.js";
import { withDoubles } from "../../src/sidecar/doubles.js";

const Response = couplet.v1.EvaluateWidthsBatchResponse;

test.each([0, 1, 15, 16, 127, 2047, 2048, 5000])(
  "a list of %i doubles is encoded as the generated code does",
  (length) => {
    const head = { tableSha256: Uint8Array.from({ length: 32 }, (_, k) => k) };
    const totalWidths = Float64Array.from({ length }, (_, k) => Math.sin(k) * 10 ** (k % 300));
    // A part of a larger array, and values whose every bit counts.
    const widths = Float64Array.of(
      9,
      0,
      -0,
      Number.MIN_VALUE,
      Number.NaN,
      Number.POSITIVE_INFINITY,
      1 / 3,
    ).subarray(1);
    const ours = withDoubles(Response.encode(head).finish(), [
      [2, totalWidths],
      [3, widths],
    ]);
    const theirs = Response.encode({ ...head, totalWidths: [...totalWidths], widths: [...widths] }).finish();
    expect(Buffer.from(ours)).toEqual(Buffer.from(theirs));
  },
);
