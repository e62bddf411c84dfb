import type { Server } from "@grpc/grpc-js";
import { HealthImplementation } from "grpc-health-check";
import { SERVICE_NAME } from "./service.js";

/** Name under which the health service says whether the last replacement of the tables was taken. */
export const REPLACEMENT_HEALTH = "couplet.v1.Replacement";

/** The standard health service of a sidecar. */
export class SidecarHealth {
  readonly #health = new HealthImplementation({
    "": "SERVING",
    [SERVICE_NAME]: "SERVING",
    [REPLACEMENT_HEALTH]: "SERVING",
  });

  addToServer(server: Server): void {
    this.#health.addToServer(server);
  }

  /** Calls are answered from the old tables, so that only this name stops serving. */
  replacement(taken: boolean): void {
    this.#health.setStatus(REPLACEMENT_HEALTH, taken ? "SERVING" : "NOT_SERVING");
  }

  shuttingDown(): void {
    for (const name of ["", SERVICE_NAME, REPLACEMENT_HEALTH]) this.#health.setStatus(name, "NOT_SERVING");
  }
}
