import { createServer, type Server } from "node:http";
import { status } from "@grpc/grpc-js";
import { Counter, collectDefaultMetrics, Gauge, Histogram, Registry } from "prom-client";

/** Upper edges in seconds: from a single query to the largest answer the limits allow. */
const SECONDS = [0.0001, 0.0003, 0.001, 0.003, 0.01, 0.03, 0.1, 0.3, 1, 3];

/** Numbers about one server in the Prometheus text format. */
export class SidecarMetrics {
  readonly registry = new Registry();
  readonly streams = this.#gauge("couplet_streams_open", "Streaming calls that run now");
  readonly connections = this.#gauge("couplet_connections_open", "Connections open now");
  readonly replacementRefused = this.#gauge(
    "couplet_replacement_refused",
    "1 while the last replacement of the tables was refused, else 0",
  );
  readonly limited = this.#counter("couplet_limit_refusals_total", "Calls refused by a limit");
  readonly dropped = this.#counter(
    "couplet_connections_dropped_total",
    "Connections closed for being too many",
  );
  readonly uncaught = this.#counter(
    "couplet_uncaught_errors_total",
    "Errors that no call caught; each is a bug",
  );
  // Counted with every answer, told when they are asked for.
  #rows = 0;
  #draws = 0;
  readonly #replacements = new Counter({
    name: "couplet_replacements_total",
    help: "Replacements of the tables, by whether they were taken",
    labelNames: ["result"],
    registers: [this.registry],
  });
  readonly #calls = new Counter({
    name: "couplet_calls_total",
    help: "Calls that ended, by name and status",
    labelNames: ["call", "status"],
    registers: [this.registry],
  });
  readonly #seconds = new Histogram({
    name: "couplet_call_seconds",
    help: "Time from a call's request to its answer; for streams, to the end of the call",
    labelNames: ["call"],
    buckets: SECONDS,
    registers: [this.registry],
  });
  // Label sets are few; looking one up anew for every call would cost as much as a small answer.
  readonly #callCounters = new Map<string, Counter.Internal>();
  readonly #callTimers = new Map<string, Histogram.Internal<"call">>();

  constructor() {
    collectDefaultMetrics({ register: this.registry });
    this.#told("couplet_rows_evaluated_total", "Rows evaluated at a mass", () => this.#rows);
    this.#told("couplet_draws_total", "Decay channels drawn", () => this.#draws);
  }

  /** Notes that a call ended. */
  ended(call: string, code: status, milliseconds: number): void {
    const key = `${call} ${code}`;
    let counter = this.#callCounters.get(key);
    if (counter === undefined) {
      counter = this.#calls.labels({ call, status: status[code] });
      this.#callCounters.set(key, counter);
    }
    counter.inc();
    let timer = this.#callTimers.get(call);
    if (timer === undefined) {
      timer = this.#seconds.labels({ call });
      this.#callTimers.set(call, timer);
    }
    timer.observe(milliseconds / 1000);
  }

  /** Notes the work of an answer. */
  worked(rows: number, draws: number): void {
    this.#rows += rows;
    this.#draws += draws;
  }

  /** Notes a replacement of the tables. */
  replaced(taken: boolean): void {
    this.#replacements.inc({ result: taken ? "taken" : "refused" });
    this.replacementRefused.set(taken ? 0 : 1);
  }

  /** A web server that answers GET /metrics; it does not listen yet. */
  webServer(): Server {
    return createServer((request, response) => {
      if (request.method !== "GET" || request.url?.split("?")[0] !== "/metrics") {
        response.writeHead(404, { "content-type": "text/plain" }).end("GET /metrics\n");
        return;
      }
      this.registry.metrics().then(
        (text) => response.writeHead(200, { "content-type": this.registry.contentType }).end(text),
        () => response.writeHead(500).end(),
      );
    });
  }

  #gauge(name: string, help: string): Gauge {
    return new Gauge({ name, help, registers: [this.registry] });
  }

  #told(name: string, help: string, value: () => number): void {
    const collect = function (this: Counter) {
      this.reset();
      this.inc(value());
    };
    new Counter({ name, help, registers: [this.registry], collect });
  }

  #counter(name: string, help: string): Counter {
    return new Counter({ name, help, registers: [this.registry] });
  }
}
