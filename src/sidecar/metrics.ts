import { createServer, type Server } from "node:http";
import { status } from "@grpc/grpc-js";
import { Counter, collectDefaultMetrics, Gauge, type Metric, Registry } from "prom-client";

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
  readonly #calls = new Map<string, { readonly call: string; readonly code: status; count: number }>();
  readonly #seconds = new CallSeconds();

  constructor() {
    collectDefaultMetrics({ register: this.registry });
    this.registry.registerMetric(this.#seconds as unknown as Metric);
    const calls = this.#calls;
    new Counter({
      name: "couplet_calls_total",
      help: "Calls that ended, by name and status",
      labelNames: ["call", "status"],
      registers: [this.registry],
      collect() {
        this.reset();
        for (const { call, code, count } of calls.values()) this.inc({ call, status: status[code] }, count);
      },
    });
    this.#told("couplet_rows_evaluated_total", "Rows evaluated at a mass", () => this.#rows);
    this.#told("couplet_draws_total", "Decay channels drawn", () => this.#draws);
  }

  /** Notes that a call ended. */
  ended(call: string, code: status, milliseconds: number): void {
    const key = `${call} ${code}`;
    const known = this.#calls.get(key);
    if (known === undefined) this.#calls.set(key, { call, code, count: 1 });
    else known.count++;
    this.#seconds.observe(call, milliseconds / 1000);
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

/** Counts of one call's times: by bucket, each by itself, and above all; and their sum in seconds. */
interface Times {
  readonly counts: number[];
  seconds: number;
}

/**
 * A histogram that costs a call an addition. That of prom-client checks and hashes its labels with every value, a tenth
 * of a whole single query.
 */
class CallSeconds {
  readonly name = "couplet_call_seconds";
  readonly help = "Time from a call's request to its answer; for streams, to the end of the call";
  readonly type = "histogram";
  readonly aggregator = "sum";
  readonly #times = new Map<string, Times>();

  observe(call: string, seconds: number): void {
    let times = this.#times.get(call);
    if (times === undefined) {
      times = { counts: new Array<number>(SECONDS.length + 1).fill(0), seconds: 0 };
      this.#times.set(call, times);
    }
    let bucket = 0;
    while (bucket < SECONDS.length && seconds > SECONDS[bucket]!) bucket++;
    times.counts[bucket]!++;
    times.seconds += seconds;
  }

  /** What the registry asks a metric for. */
  async get() {
    const { name, help, type, aggregator } = this;
    const values = [...this.#times].flatMap(([call, { counts, seconds }]) => {
      let sum = 0;
      const buckets = [...SECONDS, "+Inf"].map((le, k) => {
        sum += counts[k]!;
        return { metricName: `${name}_bucket`, labels: { le, call }, value: sum };
      });
      return [
        ...buckets,
        { metricName: `${name}_sum`, labels: { call }, value: seconds },
        { metricName: `${name}_count`, labels: { call }, value: sum },
      ];
    });
    return { name, help, type, aggregator, values };
  }

  reset(): void {
    this.#times.clear();
  }
}
