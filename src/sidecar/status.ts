import { status } from "@grpc/grpc-js";
import { InputError, LimitError, TableError } from "../errors.js";

/** How a call ended, as gRPC says it. */
export interface CallStatus {
  readonly code: status;
  readonly details: string;
}

/**
 * The status of a call that threw. The classes of Couplet's errors map as everywhere; anything else is a bug of ours, of
 * which the client learns no more than that.
 */
export function statusOf(error: unknown): CallStatus {
  if (error instanceof InputError) return { code: status.INVALID_ARGUMENT, details: error.message };
  if (error instanceof TableError) return { code: status.FAILED_PRECONDITION, details: error.message };
  if (error instanceof LimitError) return { code: status.RESOURCE_EXHAUSTED, details: error.message };
  return {
    code: status.INTERNAL,
    details: "This is a bug in Couplet; the server's log has the details. Please report it.",
  };
}
