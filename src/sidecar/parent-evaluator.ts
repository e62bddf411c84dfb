/**
 * Partial widths of one parent's rows as functions of the parent's mass: all that the sidecar knows of their physics.
 */
export interface ParentEvaluator {
  /** Number of rows, in the order of the decay table. */
  readonly rowCount: number;
  /**
   * Writes the partial width of every row at a mass into `widths` from `offset` on, and returns their sum, in MeV.
   *
   * Each is >= 0 and finite, 0 below threshold.
   * @param massMeV - from above 0 to 10^6
   */
  widthsInto(massMeV: number, widths: number[], offset: number): number;
}
