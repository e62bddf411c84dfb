/** Smallest 32-bit float that is not below a number > 0, so that a table reaches the end of its range. */
export function floatNotBelow(value: number): number {
  const nearest = Math.fround(value);
  return nearest >= value ? nearest : neighbour(nearest, 1);
}

/** Largest 32-bit float that is not above a number > 0, so that nothing drawn leaves the range. */
export function floatNotAbove(value: number): number {
  const nearest = Math.fround(value);
  return nearest <= value ? nearest : neighbour(nearest, -1);
}

/** The next 32-bit float above (1) or below (-1) a positive one: their bits count up as integers. */
function neighbour(float: number, step: 1 | -1): number {
  const floats = new Float32Array([float]);
  new Int32Array(floats.buffer)[0]! += step;
  return floats[0]!;
}
