/** A row of doubles for the encoder, which takes any list of numbers; with this kind alone, everywhere, it stays fast. */
export type Doubles = Float64Array & number[];

/** Doubles of a length, all 0. */
export function doubles(length: number): Doubles {
  return new Float64Array(length) as Doubles;
}
