import { LimitError } from "../errors.js";
import type { SidecarLimits } from "./limits.js";

/** What one connection keeps busy at the moment. */
export class Client {
  #untakenBytes = 0;
  #streams = 0;

  constructor(private readonly limits: SidecarLimits) {}

  /**
   * Refuses work for a client that does not take the answers it has.
   *
   * @throws LimitError
   */
  requireRoom(): void {
    if (this.#untakenBytes <= this.limits.untakenBytes) return;
    throw new LimitError(
      `connection: expected at most ${this.limits.untakenBytes} bytes of answers that the client has not taken, got ${this.#untakenBytes}. Read the answers, or ask for less at a time.`,
    );
  }

  /** Notes the bytes of an answer handed to the transport; `taken` takes them off again. */
  leave(bytes: number): void {
    this.#untakenBytes += bytes;
  }

  taken(bytes: number): void {
    this.#untakenBytes -= bytes;
  }

  /**
   * Notes a streaming call; `closeStream` ends it.
   *
   * @throws LimitError if too many run
   */
  openStream(): void {
    if (this.#streams >= this.limits.streams) {
      throw new LimitError(
        `connection: expected at most ${this.limits.streams} streaming calls at a time, got one more. End some, or use several connections.`,
      );
    }
    this.#streams++;
  }

  closeStream(): void {
    this.#streams--;
  }

  /** Whether a streaming call runs, or an answer is on its way. */
  get busy(): boolean {
    return this.#streams > 0 || this.#untakenBytes > 0;
  }
}

/** The connections of a server, each a client of its own. */
export class Clients {
  readonly #byPeer = new Map<string, Client>();
  /** For connections the transport cannot tell apart: they share one client's limits. */
  readonly #others: Client;

  constructor(private readonly limits: SidecarLimits) {
    this.#others = new Client(limits);
  }

  connected(peer: string): void {
    this.#byPeer.set(peer, new Client(this.limits));
  }

  disconnected(peer: string): void {
    this.#byPeer.delete(peer);
  }

  of(peer: string): Client {
    return this.#byPeer.get(peer) ?? this.#others;
  }

  get busy(): boolean {
    return this.#others.busy || [...this.#byPeer.values()].some((client) => client.busy);
  }
}
