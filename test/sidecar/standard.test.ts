import { get } from "node:http";
import { Client, credentials } from "@grpc/grpc-js";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { health } from "./health.js";
import { LOOPBACK, type Running, running } from "./running.js";

let server: Running;

beforeAll(async () => {
  server = await running({ metrics: LOOPBACK });
});
afterAll(() => server.stop());

test.each(["", "couplet.v1.SidecarService", "couplet.v1.Replacement"])(
  "the health service says SERVING for %j",
  async (name) => {
    expect(await health(server.address, name)).toBe("SERVING");
  },
);

describe.each(["v1", "v1alpha"])("server reflection %s", (version) => {
  const ask = (request: Buffer): Promise<Buffer> => {
    const client = new Client(server.address, credentials.createInsecure());
    const path = `/grpc.reflection.${version}.ServerReflection/ServerReflectionInfo`;
    const call = client.makeBidiStreamRequest(
      path,
      (bytes: Buffer) => bytes,
      (bytes: Buffer) => bytes,
    );
    return new Promise((resolve, reject) => {
      call.once("error", reject);
      call.once("data", (bytes: Buffer) => {
        call.end();
        client.close();
        resolve(bytes);
      });
      call.write(request);
    });
  };

  test("lists the sidecar and the health service", async () => {
    // list_services = 7, empty.
    const names = (await ask(Buffer.from([0x3a, 0]))).toString("latin1");
    expect(names).toContain("couplet.v1.SidecarService");
    expect(names).toContain("grpc.health.v1.Health");
  });

  test("describes the sidecar with every call", async () => {
    const symbol = Buffer.from("couplet.v1.SidecarService");
    const file = await ask(Buffer.concat([Buffer.from([0x22, symbol.length]), symbol]));
    for (const call of ["ListTables", "GetCouplings", "EvaluateWidthsStream", "DrawChannelsStream"])
      expect(file.includes(call)).toBe(true);
  });
});

describe("metrics", () => {
  const fetchText = (path: string): Promise<{ status: number; type: string; text: string }> => {
    const { metricsAddress } = server.sidecar;
    const port = metricsAddress?.kind === "tcp" ? metricsAddress.port : 0;
    return new Promise((resolve, reject) => {
      get({ host: "127.0.0.1", port, path }, (response) => {
        let text = "";
        response.on("data", (chunk) => {
          text += String(chunk);
        });
        response.on("end", () =>
          resolve({ status: response.statusCode ?? 0, type: response.headers["content-type"] ?? "", text }),
        );
      }).on("error", reject);
    });
  };

  test("count calls, rows and draws in the Prometheus text format", async () => {
    const client = server.client();
    await client.widthsBatch("rho(770)0", [700, 800, 900]);
    await client.draw("rho(770)0", 1, 0, 50);
    await client.widths("nobody", 1).catch(() => undefined);
    const { status, type, text } = await fetchText("/metrics");
    const rows = (await client.decayTable("rho(770)0")).parent.rows.length;
    expect(status).toBe(200);
    expect(type).toMatch(/^text\/plain; version=0\.0\.4/);
    expect(text).toMatch(/^couplet_calls_total\{call="EvaluateWidthsBatch",status="OK"\} 1$/m);
    expect(text).toMatch(/^couplet_calls_total\{call="EvaluateWidths",status="INVALID_ARGUMENT"\} 1$/m);
    expect(text).toContain(`couplet_rows_evaluated_total ${3 * rows}\n`);
    expect(text).toMatch(/^couplet_draws_total 50$/m);
    expect(text).toMatch(/^couplet_call_seconds_bucket\{le="\+Inf",call="DrawChannels"\} 1$/m);
    expect(text).toMatch(/^couplet_connections_open \d+$/m);
    expect(text).toMatch(/^process_resident_memory_bytes \d+$/m);
  });

  test("have no other page", async () => {
    expect((await fetchText("/")).status).toBe(404);
  });

  test("are refused at an address others can reach", async () => {
    await expect(
      running({ metrics: { kind: "tcp", host: "0.0.0.0", port: 0 } }).then((other) => other.stop()),
    ).rejects.toThrow(
      "--metrics: expected a loopback address, got 0.0.0.0:0. Metrics are for this machine; let its monitoring agent pass them on.",
    );
  });
});
