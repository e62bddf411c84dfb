import { lstatSync, unlinkSync } from "node:fs";
import { type AddressInfo, connect, type Server } from "node:net";
import { InputError } from "../errors.js";
import { addressText, type ListenAddress } from "./address.js";

/**
 * Makes a server listen. A socket file that nobody listens at any more is removed first.
 *
 * @param option - the option the address came from, for messages
 * @returns the address in use, with its port
 * @throws InputError if the address is taken or cannot be used
 */
export async function listenAt(
  server: Server,
  address: ListenAddress,
  option: string,
): Promise<ListenAddress> {
  if (address.kind === "unix") await removeStaleSocket(address, option);
  return new Promise((resolve, reject) => {
    const failed = (cause: NodeJS.ErrnoException) => reject(refusal(address, option, cause));
    server.once("error", failed);
    server.listen(address.kind === "unix" ? { path: address.path } : { ...address }, () => {
      server.removeListener("error", failed);
      resolve(
        address.kind === "unix" ? address : { ...address, port: (server.address() as AddressInfo).port },
      );
    });
  });
}

function refusal(address: ListenAddress, option: string, cause: NodeJS.ErrnoException): InputError {
  const text = addressText(address);
  const taken = cause.code === "EADDRINUSE";
  const message = taken
    ? `${option}: expected a free address, got ${text}, where another process listens. Stop it, or choose another address.`
    : `${option}: could not listen at ${text}: ${cause.message}. Choose another address.`;
  return new InputError(message, { cause });
}

async function removeStaleSocket(address: { kind: "unix"; path: string }, option: string): Promise<void> {
  const found = lstatSync(address.path, { throwIfNoEntry: false });
  if (found === undefined) return;
  if (!found.isSocket()) {
    throw new InputError(
      `${option}: expected a place for a socket, got ${addressText(address)}, where something else is. Choose another path.`,
    );
  }
  if (await isAnswered(address.path)) throw refusal(address, option, takenError());
  unlinkSync(address.path);
}

function takenError(): NodeJS.ErrnoException {
  return Object.assign(new Error("the socket is answered"), { code: "EADDRINUSE" });
}

/** Whether a process listens at a socket file; one that is refused was left behind. */
function isAnswered(path: string): Promise<boolean> {
  return new Promise((resolve) => {
    const probe = connect(path);
    probe.once("connect", () => {
      probe.destroy();
      resolve(true);
    });
    probe.once("error", (error: NodeJS.ErrnoException) => resolve(error.code !== "ECONNREFUSED"));
  });
}
