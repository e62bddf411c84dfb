import {
  type ChannelCredentials,
  Client,
  type ClientDuplexStream,
  credentials,
  Metadata,
} from "@grpc/grpc-js";
import { couplet } from "../../gen/couplet.js";

import v1 = couplet.v1;

const SERVICE = "/couplet.v1.SidecarService";

/** The phase convention this client's user can interpret. */
const CONVENTION = "deswart-v1";

/** What a generator does when a served table is not the one its job was prepared for. */
export class WrongTableError extends Error {}

/** A message class of the generated code. */
interface Codec<Message, Written> {
  encode(message: Written): { finish(): Uint8Array };
  decode(bytes: Uint8Array): Message;
}

/**
 * A client of `couplet serve`, doing what an event generator does: it checks convention and digest once, then asks for
 * widths in a stream and for draws in batches.
 *
 * @example
 * const sidecar = new SidecarClient("127.0.0.1:50610");
 * const table = await sidecar.check();
 */
export class SidecarClient {
  readonly #client: Client;
  #table: Uint8Array = new Uint8Array();

  /**
   * @param address - `HOST:PORT` or `unix:PATH`
   * @param channel - TLS credentials; without them the connection is in the open
   */
  constructor(
    address: string,
    channel: ChannelCredentials = credentials.createInsecure(),
    private readonly deadlineMs = 10_000,
  ) {
    this.#client = new Client(address, channel);
  }

  close(): void {
    this.#client.close();
  }

  /**
   * Checks the server before any number of it is used, and binds every later call to one decay table.
   *
   * @param sha256 - digest of the table the job was prepared for, in hexadecimal; without it the only table served
   * @throws WrongTableError if it is not served, or its convention is not ours
   */
  async check(sha256?: string): Promise<v1.ServedTable.$Properties> {
    const { tables } = await this.listTables();
    const decays = tables.filter(({ kind }) => kind === "couplet.v1.DecayTables");
    const hex = (table: v1.ServedTable.$Properties) => Buffer.from(table.sha256 ?? []).toString("hex");
    const wanted = decays.filter((table) => sha256 === undefined || hex(table) === sha256);
    const [table] = wanted;
    if (table === undefined || wanted.length > 1) {
      const served = decays.map((one) => `${hex(one)} (${one.file})`).join(", ");
      throw new WrongTableError(
        `expected ${sha256 ?? "one decay table"}, got ${served}. Start the sidecar with the job's table, or give its digest.`,
      );
    }
    if (table.header?.convention !== CONVENTION)
      throw new WrongTableError(`expected convention ${CONVENTION}, got ${table.header?.convention}`);
    this.#table = table.sha256 ?? new Uint8Array();
    return table;
  }

  listTables(): Promise<v1.ListTablesResponse> {
    return this.#unary("ListTables", v1.ListTablesRequest, v1.ListTablesResponse, {});
  }

  /** Rows and daughters of a parent; widths, fractions and draws are in the order of the rows. */
  decayTable(parent: string): Promise<v1.GetDecayTableResponse> {
    return this.#unary("GetDecayTable", v1.GetDecayTableRequest, v1.GetDecayTableResponse, {
      parent: this.key(parent),
    });
  }

  couplings(family: v1.VertexFamily.$Properties): Promise<v1.GetCouplingsResponse> {
    return this.#unary("GetCouplings", v1.GetCouplingsRequest, v1.GetCouplingsResponse, { family });
  }

  isoscalarFactors(
    request: v1.GetIsoscalarFactorsRequest.$Properties,
  ): Promise<v1.GetIsoscalarFactorsResponse> {
    return this.#unary(
      "GetIsoscalarFactors",
      v1.GetIsoscalarFactorsRequest,
      v1.GetIsoscalarFactorsResponse,
      request,
    );
  }

  /** Widths and fractions at one mass in MeV. */
  widths(parent: string, mass: number): Promise<v1.EvaluateWidthsResponse> {
    return this.#unary("EvaluateWidths", v1.EvaluateWidthsRequest, v1.EvaluateWidthsResponse, {
      parent: this.key(parent),
      mass,
    });
  }

  /** The same at many masses. */
  widthsBatch(parent: string, masses: number[]): Promise<v1.EvaluateWidthsBatchResponse> {
    return this.#unary("EvaluateWidthsBatch", v1.EvaluateWidthsBatchRequest, v1.EvaluateWidthsBatchResponse, {
      parent: this.key(parent),
      masses,
    });
  }

  /** `count` draws at the nominal mass; the same seed and batch give the same rows. */
  draw(parent: string, seed: number, batch: number, count: number): Promise<v1.DrawChannelsResponse> {
    return this.#draw({ parent: this.key(parent), seed, batch, count });
  }

  /** One draw at each mass in MeV. */
  drawAt(parent: string, seed: number, batch: number, masses: number[]): Promise<v1.DrawChannelsResponse> {
    return this.#draw({ parent: this.key(parent), seed, batch, masses });
  }

  /** A stream of width queries that stays open for a job; end it with `end()`. */
  widthsStream(): QueryStream<v1.EvaluateWidthsStreamRequest.$Properties, v1.EvaluateWidthsStreamResponse> {
    return this.#stream(
      "EvaluateWidthsStream",
      v1.EvaluateWidthsStreamRequest,
      v1.EvaluateWidthsStreamResponse,
    );
  }

  /** A stream of draws that stays open for a job; end it with `end()`. */
  drawsStream(): QueryStream<v1.DrawChannelsStreamRequest.$Properties, v1.DrawChannelsStreamResponse> {
    return this.#stream("DrawChannelsStream", v1.DrawChannelsStreamRequest, v1.DrawChannelsStreamResponse);
  }

  /** The key of a parent in the table that was checked, for the requests of a stream. */
  key(parent: string): v1.ParentKey.$Properties {
    return { name: parent, tableSha256: this.#table };
  }

  #draw(request: v1.DrawChannelsRequest.$Properties): Promise<v1.DrawChannelsResponse> {
    return this.#unary("DrawChannels", v1.DrawChannelsRequest, v1.DrawChannelsResponse, request);
  }

  #unary<Request, Response>(
    name: string,
    request: Codec<unknown, Request>,
    response: Codec<Response, never>,
    message: Request,
  ): Promise<Response> {
    return new Promise((resolve, reject) => {
      this.#client.makeUnaryRequest(
        `${SERVICE}/${name}`,
        (value: Request) => Buffer.from(request.encode(value).finish()),
        (bytes: Buffer) => response.decode(bytes),
        message,
        new Metadata(),
        { deadline: Date.now() + this.deadlineMs },
        (error, value) => (error === null ? resolve(value as Response) : reject(error)),
      );
    });
  }

  #stream<Request, Response>(
    name: string,
    request: Codec<unknown, Request>,
    response: Codec<Response, never>,
  ): QueryStream<Request, Response> {
    const call = this.#client.makeBidiStreamRequest(
      `${SERVICE}/${name}`,
      (value: Request) => Buffer.from(request.encode(value).finish()),
      (bytes: Buffer) => response.decode(bytes),
    );
    return new QueryStream(call);
  }
}

/** A stream that answers each request in order; several may be on their way at a time. */
export class QueryStream<Request, Response> {
  readonly #waiting: { resolve(response: Response): void; reject(error: Error): void }[] = [];
  #failure: Error | undefined;

  constructor(private readonly call: ClientDuplexStream<Request, Response>) {
    call.on("data", (response: Response) => this.#waiting.shift()?.resolve(response));
    call.on("error", (error: Error) => this.#fail(error));
    call.on("end", () => this.#fail(new Error("the server ended the stream")));
  }

  /** Sends a request; resolves with its answer. */
  ask(request: Request): Promise<Response> {
    return new Promise((resolve, reject) => {
      if (this.#failure !== undefined) {
        reject(this.#failure);
        return;
      }
      this.#waiting.push({ resolve, reject });
      this.call.write(request);
    });
  }

  /** No more requests; answers on their way still come. */
  end(): void {
    this.call.end();
  }

  /** Gives up at once, with everything on its way. */
  cancel(): void {
    this.call.cancel();
  }

  #fail(error: Error): void {
    this.#failure ??= error;
    for (const { reject } of this.#waiting.splice(0)) reject(this.#failure);
  }
}
