import { join } from "node:path";
import type { Server } from "@grpc/grpc-js";
import { loadSync, type PackageDefinition } from "@grpc/proto-loader";
import { ReflectionService } from "@grpc/reflection";
import { protoPath as healthProto } from "grpc-health-check";

/** The schema's folder in this package. */
export function protoFolder(): string {
  return join(__dirname, "..", "..", "proto");
}

/** Adds server reflection (v1 and v1alpha) that knows the sidecar's service and the health service. */
export function addReflection(server: Server): void {
  const sidecar = loadSync(join("couplet", "v1", "sidecar.proto"), { includeDirs: [protoFolder()] });
  const definition: PackageDefinition = { ...sidecar, ...loadSync(healthProto) };
  new ReflectionService(definition).addToServer(server);
}
