import type { Server as WebServer } from "node:http";
import { Server } from "@grpc/grpc-js";
import type { Logger } from "pino";
import { CoupletError, InputError } from "../errors.js";
import { addressText, isLocal, type ListenAddress, requireSafe } from "./address.js";
import type { Method, Snapshot } from "./calls/method.js";
import { Clients } from "./clients.js";
import { Connections } from "./connections.js";
import { serverIdentity, type TlsFiles } from "./credentials.js";
import { SidecarHealth } from "./health.js";
import { DEFAULT_LIMITS, type SidecarLimits } from "./limits.js";
import { listenAt } from "./listener.js";
import { loadTables } from "./load-tables.js";
import { SidecarMetrics } from "./metrics.js";
import { addReflection } from "./reflection.js";
import { hex, type Served } from "./served.js";
import { sidecarService } from "./service.js";

/** How to run a sidecar. */
export interface SidecarOptions {
  readonly listen: ListenAddress;
  /** Table files; none: the built-in tables. */
  readonly files: readonly string[];
  readonly log: Logger;
  readonly tls?: TlsFiles | undefined;
  /** Serve other machines without TLS. */
  readonly allowInsecureNetwork?: boolean;
  /** Where to answer GET /metrics; a loopback address. */
  readonly metrics?: ListenAddress | undefined;
  readonly limits?: Partial<SidecarLimits>;
  /** Silence after which a connection is asked for a sign of life, and how long it has for one, in milliseconds. */
  readonly keepalive?: { readonly afterMs: number; readonly timeoutMs: number };
  /** The calls served, where they are not all of `sidecar.proto`. */
  readonly methods?: readonly Method[];
}

/** A running sidecar. */
export interface Sidecar {
  readonly address: ListenAddress;
  readonly metricsAddress?: ListenAddress | undefined;
  readonly metrics: SidecarMetrics;
  /** Reads the files again; a set with a damaged file is refused whole and the old one stays. Returns whether it was taken. */
  replaceTables(): boolean;
  /** Takes no new calls, waits for the running ones up to a time, then ends them. */
  drain(mostMs: number): Promise<void>;
}

/** How long a request that a client has sent before it heard of the end may take to come in. */
const DRAIN_MOMENT_MS = 500;

const KEEPALIVE = { afterMs: 30_000, timeoutMs: 10_000 };

/**
 * Starts a sidecar.
 *
 * @throws InputError or TableError if the tables, the certificates or the addresses cannot be used
 */
export async function startSidecar(options: SidecarOptions): Promise<Sidecar> {
  const { log } = options;
  requireSafe(options.listen, {
    tls: options.tls !== undefined,
    forced: options.allowInsecureNetwork === true,
  });
  requireLocalMetrics(options.metrics);
  const limits = { ...DEFAULT_LIMITS, ...options.limits };
  const { credentials, validTo } = serverIdentity(options.tls);
  const tables = new ReplaceableTables(options.files, limits, log);
  const metrics = new SidecarMetrics();
  const health = new SidecarHealth();
  const clients = new Clients(limits);
  const grpc = grpcServer(limits, options.keepalive ?? KEEPALIVE);
  const { methods } = options;
  const context = { snapshot: () => tables.snapshot, clients, metrics, log };
  grpc.addService(...sidecarService(methods === undefined ? context : { ...context, methods }));
  health.addToServer(grpc);
  addReflection(grpc);
  const connections = new Connections(grpc, credentials, {
    clients,
    most: limits.connections,
    onCount: (open) => metrics.connections.set(open),
    onDrop: () => metrics.dropped.inc(),
  });
  const web = metrics.webServer();
  const metricsAddress =
    options.metrics === undefined ? undefined : await listenAt(web, options.metrics, "--metrics");
  const address = await listenAt(connections.server, options.listen, "--listen").catch((error) => {
    web.close();
    throw error;
  });
  log.info(
    {
      address: addressText(address),
      metrics: metricsAddress === undefined ? "none" : addressText(metricsAddress),
      tls:
        options.tls === undefined
          ? "none"
          : options.tls.clientAuthorities === undefined
            ? "server"
            : "mutual",
      certificateValidTo: validTo,
      tables: describe(tables.snapshot.served),
    },
    "serving",
  );
  return {
    address,
    metricsAddress,
    metrics,
    replaceTables() {
      const taken = tables.replace();
      metrics.replaced(taken);
      health.replacement(taken);
      return taken;
    },
    drain: (mostMs) => drain({ grpc, connections, clients, web, health, log }, mostMs),
  };
}

/** The tables of now, and their replacement. */
class ReplaceableTables {
  snapshot: Snapshot;

  constructor(
    private readonly files: readonly string[],
    limits: SidecarLimits,
    private readonly log: Logger,
  ) {
    this.snapshot = { served: loadTables(files), limits, refusedReplacement: "" };
  }

  replace(): boolean {
    if (this.files.length === 0) {
      this.log.info("no files to read again: the tables are built in");
      return true;
    }
    try {
      this.snapshot = { ...this.snapshot, served: loadTables(this.files), refusedReplacement: "" };
      this.log.info({ tables: describe(this.snapshot.served) }, "tables replaced");
      return true;
    } catch (error) {
      const reason = error instanceof CoupletError ? error.message : String(error);
      this.snapshot = { ...this.snapshot, refusedReplacement: reason };
      this.log.error(
        { err: error, tables: describe(this.snapshot.served) },
        "replacement refused; the old tables stay",
      );
      return false;
    }
  }
}

function describe({ decays, couplings }: Served): { file: string; kind: string; sha256: string }[] {
  return [...decays, ...couplings].map(({ file, sha256, message }) => ({
    file,
    kind: message.kind,
    sha256: hex(sha256),
  }));
}

function grpcServer(limits: SidecarLimits, keepalive: { afterMs: number; timeoutMs: number }): Server {
  return new Server({
    "grpc.max_receive_message_length": limits.messageBytes,
    // Above the limit of streaming calls, so that one more is refused in words instead of waiting at the client.
    "grpc.max_concurrent_streams": limits.streams + 500,
    "grpc.keepalive_time_ms": keepalive.afterMs,
    "grpc.keepalive_timeout_ms": keepalive.timeoutMs,
    "grpc.enable_channelz": 0,
  });
}

function requireLocalMetrics(address: ListenAddress | undefined): void {
  if (address === undefined || isLocal(address)) return;
  throw new InputError(
    `--metrics: expected a loopback address, got ${addressText(address)}. Metrics are for this machine; let its monitoring agent pass them on.`,
  );
}

interface Draining {
  readonly grpc: Server;
  readonly connections: Connections;
  readonly clients: Clients;
  readonly web: WebServer;
  readonly health: SidecarHealth;
  readonly log: Logger;
}

async function drain(draining: Draining, mostMs: number): Promise<void> {
  const { grpc, connections, web, health, log } = draining;
  log.info({ mostMs }, "draining");
  health.shuttingDown();
  connections.stopListening();
  if (!(await callsEnded(draining, mostMs)))
    log.warn("calls still ran at the end of the time to drain; they were ended");
  grpc.forceShutdown();
  connections.destroyAll();
  web.close();
  web.closeAllConnections();
  log.info("stopped");
}

/**
 * Waits for the end of the running calls; false if they take longer than a time. Watches of the health service never
 * end by themselves: after a moment for requests on their way, only the sidecar's own calls count.
 */
function callsEnded({ grpc, clients }: Draining, mostMs: number): Promise<boolean> {
  return new Promise((resolve) => {
    const end = (ended: boolean) => {
      clearTimeout(timer);
      clearInterval(poll);
      resolve(ended);
    };
    const timer = setTimeout(() => end(!clients.busy), mostMs);
    const poll = setInterval(() => {
      if (!clients.busy) end(true);
    }, DRAIN_MOMENT_MS);
    grpc.tryShutdown(() => end(true));
  });
}
