import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { Writable } from "node:stream";
import { type ChannelCredentials, credentials, type ServiceError } from "@grpc/grpc-js";
import pino from "pino";
import { SidecarClient } from "../../src/clients/typescript/couplet-sidecar.js";
import { couplet } from "../../src/gen/couplet.js";
import { addressText, type ListenAddress } from "../../src/sidecar/address.js";
import { groundStateTables } from "../../src/sidecar/ground-state-tables.js";
import { type Sidecar, type SidecarOptions, startSidecar } from "../../src/sidecar/sidecar.js";
import { sealBytes } from "../../src/tables/sealed-bytes.js";

import v1 = couplet.v1;

/** Any free port of this machine. */
export const LOOPBACK: ListenAddress = { kind: "tcp", host: "127.0.0.1", port: 0 };

/** A sidecar in this process, with its log. */
export interface Running {
  readonly sidecar: Sidecar;
  readonly address: string;
  readonly port: number;
  /** Lines of the log so far. */
  readonly log: Record<string, unknown>[];
  client(channel?: ChannelCredentials): SidecarClient;
  stop(): Promise<void>;
}

/** Starts a sidecar for a test; without files it serves the built-in tables. */
export async function running(options: Partial<SidecarOptions> = {}): Promise<Running> {
  const log: Record<string, unknown>[] = [];
  const lines = new Writable({
    write(chunk, _encoding, done) {
      log.push(JSON.parse(String(chunk)) as Record<string, unknown>);
      done();
    },
  });
  const sidecar = await startSidecar({
    listen: LOOPBACK,
    files: builtInFiles(),
    log: pino({ level: "debug" }, lines),
    ...options,
  });
  const address = addressText(sidecar.address);
  const clients: SidecarClient[] = [];
  return {
    sidecar,
    address,
    port: sidecar.address.kind === "tcp" ? sidecar.address.port : 0,
    log,
    client(channel = credentials.createInsecure()) {
      const client = new SidecarClient(address, channel);
      clients.push(client);
      return client;
    },
    async stop() {
      for (const client of clients) client.close();
      await sidecar.drain(1000);
    },
  };
}

let files: string[] | undefined;

/** The built-in tables as files, made once: fitting them anew for every server would take most of the tests' time. */
export function builtInFiles(): string[] {
  if (files === undefined) {
    const folder = mkdtempSync(join(tmpdir(), "couplet-sidecar-"));
    process.once("exit", () => rmSync(folder, { recursive: true, force: true }));
    const [decays, couplings] = groundStateTables();
    files = [join(folder, "ground.decays.pb"), join(folder, "ground.couplings.pb")];
    writeFileSync(files[0]!, decays);
    writeFileSync(files[1]!, couplings);
  }
  return files;
}

/** A whole decay table that differs from another in its title alone, and so in its digest. */
export function retitled(bytes: Uint8Array, title: string): Uint8Array {
  const tables = v1.DecayTables.decode(bytes);
  tables.header.title = title;
  tables.sha256 = null;
  return sealBytes(v1.DecayTables.encode(tables).finish());
}

/** What a call that must fail failed with. */
export async function failure(call: Promise<unknown>): Promise<{ code: number; details: string }> {
  try {
    await call;
  } catch (error) {
    const { code, details } = error as ServiceError;
    return { code, details };
  }
  throw new Error("the call was answered");
}

/** Waits until something holds; fails after a time. */
export async function until(holds: () => boolean | Promise<boolean>, milliseconds = 30_000): Promise<void> {
  const end = Date.now() + milliseconds;
  while (!(await holds())) {
    if (Date.now() > end) throw new Error(`not within ${milliseconds} ms: ${holds}`);
    await new Promise((resolve) => setTimeout(resolve, 10));
  }
}
