/** What goes with every table, in its header and wherever it is shown. */
export const CAUTIONS: readonly string[] = [
  "SU(3) predictions are good to 20-30 % in amplitude (40-60 % in width), and worse near thresholds.",
  "Not for radiation-protection or medical dose work without review by those licensed to do it, under local rules.",
];
