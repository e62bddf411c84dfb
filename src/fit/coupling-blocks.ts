type Vector = readonly number[];

/** Couplings that meet in a form, directly or through others; the sign of a whole block is usually free. */
export interface CouplingBlock {
  /** Indices into the couplings, ascending. */
  readonly couplings: readonly number[];
  /** Indices into the forms. */
  readonly forms: readonly number[];
}

/**
 * The couplings parted into blocks connected by the forms; a coupling in no form is a block of its own.
 *
 * @param forms - rows of `couplingCount` numbers
 */
export function couplingBlocks(forms: readonly Vector[], couplingCount: number): CouplingBlock[] {
  const label = Array.from({ length: couplingCount }, (_, j) => j);
  for (const form of forms) {
    const members = form.flatMap((value, j) => (value === 0 ? [] : [label[j]!]));
    const least = Math.min(...members);
    for (let j = 0; j < couplingCount; j++) if (members.includes(label[j]!)) label[j] = least;
  }
  return [...new Set(label)].map((block) => ({
    couplings: label.flatMap((other, j) => (other === block ? [j] : [])),
    forms: forms.flatMap((form, k) => (label[form.findIndex((value) => value !== 0)] === block ? [k] : [])),
  }));
}

/** The parameters with the signs of one block's couplings turned. */
export function flipBlock(parameters: Vector, block: CouplingBlock): number[] {
  return parameters.map((value, j) => (block.couplings.includes(j) ? -value : value));
}

/**
 * Whether a block stands in the sign this project reports: its first coupling that is not negligible (above 1e-6 of
 * the block's largest) is positive.
 */
export function standsInReportedSign(parameters: Vector, block: CouplingBlock): boolean {
  const values = block.couplings.map((j) => parameters[j]!);
  const largest = Math.max(...values.map(Math.abs));
  return (values.find((value) => Math.abs(value) > 1e-6 * largest) ?? 0) >= 0;
}
