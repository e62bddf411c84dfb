import { credentials, makeGenericClientConstructor, type ServiceDefinition } from "@grpc/grpc-js";
import { service as healthService } from "grpc-health-check";

/** Serving status under a name, by the standard health service. */
export function health(address: string, name: string): Promise<string> {
  const Health = makeGenericClientConstructor(healthService as unknown as ServiceDefinition, "Health");
  const client = new Health(address, credentials.createInsecure());
  const check = client["check"] as unknown as (
    request: { service: string },
    done: (error: Error | null, response: { status: string }) => void,
  ) => void;
  return new Promise((resolve, reject) => {
    check.call(client, { service: name }, (error, response) => {
      client.close();
      if (error === null) resolve(response.status);
      else reject(error);
    });
  });
}
