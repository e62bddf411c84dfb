import { performance } from "node:perf_hooks";
import {
  type handleBidiStreamingCall,
  type handleUnaryCall,
  type ServiceDefinition,
  status,
  type UntypedServiceImplementation,
} from "@grpc/grpc-js";
import type { Logger } from "pino";
import { METHODS } from "./calls/index.js";
import type { Method, Snapshot } from "./calls/method.js";
import type { Clients } from "./clients.js";
import type { SidecarMetrics } from "./metrics.js";
import { type CallStatus, statusOf } from "./status.js";

/** Full name of the service. */
export const SERVICE_NAME = "couplet.v1.SidecarService";

/** Requests of one stream that may wait for their turn before the server stops reading more. */
const STREAM_WINDOW_BYTES = 64 * 1024;

/** What a waiting request takes beside its bytes, so that empty ones count too. */
const REQUEST_OVERHEAD_BYTES = 64;

/** What the calls share. */
export interface ServiceContext {
  snapshot(): Snapshot;
  readonly clients: Clients;
  readonly metrics: SidecarMetrics;
  readonly log: Logger;
  readonly methods?: readonly Method[];
}

/** The service for `Server.addService`: messages stay bytes there, so that each call decodes, refuses and counts itself. */
export function sidecarService(context: ServiceContext): [ServiceDefinition, UntypedServiceImplementation] {
  const methods = context.methods ?? METHODS;
  const same = (bytes: Buffer) => bytes;
  const framed = (answer: Outgoing) => {
    answer.framed = true;
    return answer.bytes as Buffer;
  };
  const definition = methods.map(({ name, streaming }) => [
    name,
    {
      path: `/${SERVICE_NAME}/${name}`,
      requestStream: streaming,
      responseStream: streaming,
      requestSerialize: same,
      requestDeserialize: same,
      responseSerialize: framed,
      responseDeserialize: same,
    },
  ]);
  const handlers = methods.map((method) => [
    method.name,
    method.streaming ? streamHandler(method, context) : unaryHandler(method, context),
  ]);
  return [Object.fromEntries(definition), Object.fromEntries(handlers)];
}

/** Whether nobody waits for an answer any more. */
function isOver(call: { readonly cancelled: boolean; getDeadline(): Date | number }): boolean {
  return call.cancelled || Number(call.getDeadline()) <= Date.now();
}

/** An answer handed to the transport, which copies it into a frame when it asks for its bytes. */
interface Outgoing {
  bytes: Uint8Array;
  framed: boolean;
}

/**
 * Hands an answer over. The next answer may take the space of its bytes again, so that those not copied at once, as grpc-js
 * does when nothing waits before them, are copied here.
 */
function send(bytes: Uint8Array, write: (answer: Outgoing) => void): void {
  const answer = { bytes, framed: false };
  write(answer);
  if (!answer.framed) answer.bytes = Buffer.from(bytes);
}

function unaryHandler(method: Method, context: ServiceContext): handleUnaryCall<Buffer, Outgoing> {
  const { clients, metrics } = context;
  return (call, respond) => {
    const started = performance.now();
    const client = clients.of(call.getPeer());
    if (isOver(call)) {
      metrics.ended(method.name, status.CANCELLED, performance.now() - started);
      return;
    }
    try {
      client.requireRoom();
      const { bytes, rowsEvaluated, draws } = method.answer(context.snapshot(), call.request);
      client.leave(bytes.length);
      // grpc-js says `cancelled` when a call is over for any reason, which includes: its answer was taken.
      call.once("cancelled", () => client.taken(bytes.length));
      metrics.worked(rowsEvaluated, draws);
      metrics.ended(method.name, status.OK, performance.now() - started);
      send(bytes, (answer) => respond(null, answer));
    } catch (error) {
      const refusal = refusalOf(error, method, context);
      metrics.ended(method.name, refusal.code, performance.now() - started);
      respond(refusal);
    }
  };
}

function streamHandler(method: Method, context: ServiceContext): handleBidiStreamingCall<Buffer, Outgoing> {
  const { clients, metrics } = context;
  return (call) => {
    const started = performance.now();
    const client = clients.of(call.getPeer());
    const snapshot = context.snapshot();
    // Requests wait here and not as answers, which are twenty times as long: the next is answered when one is taken.
    let requests: Buffer[] = [];
    let requestBytes = 0;
    let answering = false;
    let answerBytes = 0;
    let ended = false;
    let code = status.OK;
    const refuse = (error: unknown) => {
      const refusal = refusalOf(error, method, context);
      code = refusal.code;
      call.emit("error", refusal);
    };
    try {
      client.openStream();
    } catch (error) {
      call.once("cancelled", () => metrics.ended(method.name, code, performance.now() - started));
      refuse(error);
      return;
    }
    metrics.streams.inc();
    call.once("cancelled", () => {
      client.closeStream();
      metrics.streams.dec();
      // A client that leaves looks like one that ends its requests, unless answers were still on their way to it.
      const lost = answering || requests.length > 0 || !call.writableFinished;
      metrics.ended(
        method.name,
        code === status.OK && lost ? status.CANCELLED : code,
        performance.now() - started,
      );
      client.taken(answerBytes);
      answerBytes = 0;
      requests = [];
    });
    const taken = () => {
      client.taken(answerBytes);
      answerBytes = 0;
      answering = false;
      answerNext();
    };
    const answerNext = () => {
      if (answering || code !== status.OK || isOver(call)) return;
      const request = requests.shift();
      if (request === undefined) {
        if (ended) call.end();
        return;
      }
      requestBytes -= request.length + REQUEST_OVERHEAD_BYTES;
      if (requestBytes <= STREAM_WINDOW_BYTES / 2 && call.isPaused()) call.resume();
      try {
        client.requireRoom();
        const { bytes, rowsEvaluated, draws } = method.answer(snapshot, request);
        metrics.worked(rowsEvaluated, draws);
        answering = true;
        answerBytes = bytes.length;
        client.leave(answerBytes);
        send(bytes, (answer) => call.write(answer, taken));
      } catch (error) {
        refuse(error);
      }
    };
    call.on("data", (request: Buffer) => {
      if (code !== status.OK) return;
      requests.push(request);
      requestBytes += request.length + REQUEST_OVERHEAD_BYTES;
      if (requestBytes > STREAM_WINDOW_BYTES) call.pause();
      answerNext();
    });
    call.on("end", () => {
      ended = true;
      answerNext();
    });
  };
}

/** The status of a call that threw; a bug of ours is logged with its stack, since the client does not get it. */
function refusalOf(error: unknown, method: Method, { log, metrics }: ServiceContext): CallStatus {
  const refusal = statusOf(error);
  if (refusal.code === status.INTERNAL)
    log.error({ err: error, call: method.name }, "a call failed by a bug");
  else log.debug({ call: method.name, status: status[refusal.code], details: refusal.details }, "refused");
  if (refusal.code === status.RESOURCE_EXHAUSTED) metrics.limited.inc();
  return refusal;
}
