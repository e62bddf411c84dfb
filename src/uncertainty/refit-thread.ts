import { workerData } from "node:worker_threads";
import { type RefitThreadData, Refitter } from "./refit.js";
import { fillSome } from "./shared-rows.js";

// The body of a thread of `pseudoExperiments`: the one file of this room that works when it is loaded, and therefore
// one that no other file imports.
const { task, rows } = workerData as RefitThreadData;
const refitter = new Refitter(task);
while (fillSome(rows, (index, row) => refitter.write(index, row)));
