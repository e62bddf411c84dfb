/** What goes with every table, in its header and wherever it is shown. */
export const CAUTIONS: readonly string[] = [
  "SU(3) predictions are good to 20-30 % in amplitude (40-60 % in width), and worse near thresholds. Errors from breaking take it as a part of the coupling strength |g|, so a channel that takes a quarter of |g|^2 has twice that part of its amplitude.",
  "Not for radiation-protection or medical dose work without review by those licensed to do it, under local rules.",
];
