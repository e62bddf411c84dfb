import pino from "pino";
import { refuse } from "../require.js";
import { parseAddress } from "../sidecar/address.js";
import type { TlsFiles } from "../sidecar/credentials.js";
import { type Sidecar, startSidecar } from "../sidecar/sidecar.js";
import { integerOption } from "./integer-option.js";

/** Options of `couplet serve` as the command line gives them. */
export interface ServeOptions {
  readonly listen: string;
  readonly metrics: string;
  readonly tlsCert?: string;
  readonly tlsKey?: string;
  readonly tlsClientCa?: string;
  readonly allowInsecureNetwork?: true;
  readonly drainSeconds: string;
  readonly logLevel: string;
}

const LOG_LEVELS = ["debug", "info", "warn", "error"];

/** Answers are cut from blocks of this size, below what the C library maps anew for each: fewer of them to collect. */
const BUFFER_BLOCK_BYTES = 64 * 1024;

/** `couplet serve`: runs the sidecar until it is told to stop. */
export async function runServe(files: readonly string[], options: ServeOptions): Promise<void> {
  Buffer.poolSize = BUFFER_BLOCK_BYTES;
  const drainSeconds = integerOption("--drain-seconds", options.drainSeconds, 0, 3600);
  if (!LOG_LEVELS.includes(options.logLevel))
    refuse("--log-level", `one of ${LOG_LEVELS.join(", ")}`, options.logLevel);
  const log = pino({ level: options.logLevel, base: null }, pino.destination({ fd: 2, sync: true }));
  // Before anything else, so that no signal is lost between a start that succeeded and its handlers.
  const signals = new Signals(1000 * drainSeconds);
  const sidecar = await startSidecar({
    listen: parseAddress("--listen", options.listen),
    metrics: options.metrics === "none" ? undefined : parseAddress("--metrics", options.metrics),
    files,
    log,
    tls: tlsFiles(options),
    allowInsecureNetwork: options.allowInsecureNetwork === true,
  });
  // A call's state is its own, so an error that escaped one leaves the others whole: say it and live on.
  for (const event of ["uncaughtException", "unhandledRejection"] as const) {
    process.on(event, (error: unknown) => {
      sidecar.metrics.uncaught.inc();
      log.error({ err: error }, "an error escaped its call; this is a bug");
    });
  }
  await signals.runUntilStopped(sidecar);
}

function tlsFiles({ tlsCert, tlsKey, tlsClientCa }: ServeOptions): TlsFiles | undefined {
  if (tlsCert === undefined && tlsKey === undefined && tlsClientCa === undefined) return undefined;
  if (tlsCert === undefined || tlsKey === undefined)
    refuse("TLS", "--tls-cert and --tls-key together", [tlsCert, tlsKey, tlsClientCa]);
  return { certificate: tlsCert, key: tlsKey, clientAuthorities: tlsClientCa };
}

/** SIGTERM and SIGINT drain, a second one or one during the start stops at once; SIGHUP reads the files again. */
class Signals {
  #sidecar: Sidecar | undefined;
  #stopping = false;
  #stopped: () => void = () => {};

  constructor(private readonly drainMs: number) {
    // The command line's own handler leaves at once; here calls may run. A signal may wait for it since the modules were
    // loaded, and would be lost if for a moment nobody listened.
    const others = process.listeners("SIGINT");
    process.on("SIGINT", () => this.#stop(130));
    for (const other of others) process.off("SIGINT", other);
    process.on("SIGTERM", () => this.#stop(0));
    process.on("SIGHUP", () => this.#sidecar?.replaceTables());
  }

  runUntilStopped(sidecar: Sidecar): Promise<void> {
    this.#sidecar = sidecar;
    return new Promise((resolve) => {
      this.#stopped = resolve;
    });
  }

  #stop(exitCode: number): void {
    if (this.#sidecar === undefined || this.#stopping) process.exit(exitCode);
    this.#stopping = true;
    process.exitCode = exitCode;
    this.#sidecar.drain(this.drainMs).then(this.#stopped);
  }
}
