import { type RefitThreadData, Refitter } from "./refit.js";
import { fillSome } from "./shared-rows.js";

/** What a thread of `pseudoExperiments` does: fits until nobody has rows to take. */
export function fillRows({ task, rows }: RefitThreadData): void {
  const refitter = new Refitter(task);
  while (fillSome(rows, (index, row) => refitter.write(index, row)));
}
