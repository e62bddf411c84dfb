import { createServer, type Server, type Socket } from "node:net";
import type { Server as GrpcServer, ServerCredentials } from "@grpc/grpc-js";
import type { Clients } from "./clients.js";

/**
 * A listening server of our own whose connections go to gRPC: so that each is known by a name from its first byte to
 * its last, their number is bounded, and the last ones can be ended.
 */
export class Connections {
  readonly server: Server;
  readonly #sockets = new Set<Socket>();
  #unixCount = 0;

  constructor(
    grpc: GrpcServer,
    credentials: ServerCredentials,
    options: { clients: Clients; most: number; onCount(open: number): void; onDrop(): void },
  ) {
    const injector = grpc.createConnectionInjector(credentials);
    // A client may close its half early and still take its answers.
    this.server = createServer({ allowHalfOpen: true, noDelay: true }, (socket) => {
      const peer = this.#peerOf(socket);
      this.#sockets.add(socket);
      options.clients.connected(peer);
      options.onCount(this.#sockets.size);
      socket.once("close", () => {
        this.#sockets.delete(socket);
        options.clients.disconnected(peer);
        options.onCount(this.#sockets.size);
      });
      // gRPC ends the connection itself; without a listener a reset by the peer would end the process.
      socket.on("error", () => socket.destroy());
      injector.injectConnection(socket);
    });
    this.server.maxConnections = options.most;
    this.server.on("drop", options.onDrop);
  }

  /** Takes no new connections; the open ones stay. */
  stopListening(): void {
    this.server.close();
  }

  /** Ends every open connection at once. */
  destroyAll(): void {
    for (const socket of this.#sockets) socket.destroy();
  }

  /** The name `call.getPeer()` gives: address and port, or for Unix sockets, which have none, a number of ours. */
  #peerOf(socket: Socket): string {
    if (socket.remoteAddress !== undefined) return `${socket.remoteAddress}:${socket.remotePort}`;
    this.#unixCount++;
    const peer = `unix:${this.#unixCount}`;
    Object.defineProperty(socket, "remoteAddress", { value: peer });
    return peer;
  }
}
