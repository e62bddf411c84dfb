import { getCouplings } from "./couplings.js";
import { drawChannels, drawChannelsStream } from "./draws.js";
import { getIsoscalarFactors } from "./factors.js";
import type { Method } from "./method.js";
import { getDecayTable, listTables } from "./tables.js";
import { evaluateWidths, evaluateWidthsBatch, evaluateWidthsStream } from "./widths.js";

/** Every call of `couplet.v1.SidecarService`. */
export const METHODS: readonly Method[] = [
  listTables,
  getDecayTable,
  getCouplings,
  getIsoscalarFactors,
  evaluateWidths,
  evaluateWidthsBatch,
  evaluateWidthsStream,
  drawChannels,
  drawChannelsStream,
];
