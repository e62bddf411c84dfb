import { LimitError } from "../errors.js";

/** What one client may ask of a server; see `Limits` in `sidecar.proto`. */
export interface SidecarLimits {
  /** Bytes of a request message. */
  readonly messageBytes: number;
  /** Masses in one request. */
  readonly masses: number;
  /** Draws in one request. */
  readonly draws: number;
  /** Isoscalar factors in one answer. */
  readonly factors: number;
  /** Streaming calls of one connection at the same time. */
  readonly streams: number;
  /** Bytes of answers one connection may leave untaken. */
  readonly untakenBytes: number;
  /** Connections at the same time; more are closed at once. */
  readonly connections: number;
}

/** The limits without options: every answer is made in some ten milliseconds, so that no client waits for another. */
export const DEFAULT_LIMITS: SidecarLimits = {
  messageBytes: 64 * 1024,
  masses: 1000,
  draws: 100_000,
  factors: 2000,
  streams: 1000,
  untakenBytes: 16 * 1024 * 1024,
  connections: 1000,
};

/** Throws LimitError in the one wording all limits share. */
export function requireWithin(where: string, limit: number, got: number, what: string, mend: string): void {
  if (got <= limit) return;
  throw new LimitError(`${where}: expected at most ${limit} ${what}, got ${got}. ${mend}`);
}
