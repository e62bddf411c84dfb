import { InputError } from "../../errors.js";
import type { SidecarLimits } from "../limits.js";
import type { Served } from "../served.js";

/** What a call sees of the server; the same to its end, whatever is replaced meanwhile. */
export interface Snapshot {
  readonly served: Served;
  readonly limits: SidecarLimits;
  /** Why the last replacement of the tables was refused; empty if it was not. */
  readonly refusedReplacement: string;
}

/** One call of the service: bytes in, bytes out, and between them a pure function of the snapshot and the request. */
export interface Method {
  /** As in `sidecar.proto`, e.g. `EvaluateWidths`. */
  readonly name: string;
  /** Requests and answers come as streams, one answer to each request. */
  readonly streaming: boolean;
  /** @throws the four errors of `errors.ts` */
  answer(snapshot: Snapshot, request: Uint8Array): Answer;
}

/** An encoded answer, and the work it took, for the metrics. */
export interface Answer {
  /** Perhaps in a space that the next answer takes again. */
  readonly bytes: Uint8Array;
  readonly rowsEvaluated: number;
  readonly draws: number;
}

/** What reads requests; the generated message classes do. */
interface Decoder<Message> {
  decode(bytes: Uint8Array): Message;
}

/** What writes answers: a generated message class, or a function. */
type Encoder<Message> =
  | { encode(message: Message): { finish(): Uint8Array } }
  | ((message: Message) => Uint8Array);

/** Builds a method from its messages and its answer as a message. */
export function method<Request, Response>(
  name: string,
  streaming: boolean,
  request: Decoder<Request>,
  response: Encoder<Response>,
  answer: (
    snapshot: Snapshot,
    request: Request,
  ) => { message: Response; rowsEvaluated?: number; draws?: number },
): Method {
  const encode = "encode" in response ? (message: Response) => response.encode(message).finish() : response;
  return {
    name,
    streaming,
    answer(snapshot, bytes) {
      const { message, rowsEvaluated = 0, draws = 0 } = answer(snapshot, decoded(name, request, bytes));
      return { bytes: encode(message), rowsEvaluated, draws };
    },
  };
}

function decoded<Request>(name: string, request: Decoder<Request>, bytes: Uint8Array): Request {
  try {
    return request.decode(bytes);
  } catch (cause) {
    throw new InputError(
      `${name}: expected a couplet.v1.${name}Request message, got ${bytes.length} bytes that are none (${(cause as Error).message}). Use the schema of this server's version.`,
      { cause },
    );
  }
}
