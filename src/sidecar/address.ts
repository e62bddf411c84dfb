import { BlockList, isIP } from "node:net";
import { InputError } from "../errors.js";
import { refuse } from "../require.js";

/** A place to listen at. Port 0: any free one. */
export type ListenAddress =
  | { readonly kind: "tcp"; readonly host: string; readonly port: number }
  | { readonly kind: "unix"; readonly path: string };

/**
 * Reads `HOST:PORT`, `[IPV6]:PORT` or `unix:PATH`.
 *
 * @param option - the option's name, for messages
 * @throws InputError for text of another form
 */
export function parseAddress(option: string, text: string): ListenAddress {
  const path = /^unix:(?:\/\/)?(.+)$/.exec(text)?.[1];
  if (path !== undefined) return { kind: "unix", path };
  const [, v6, plain, portText] = /^(?:\[([^\]]+)\]|([^:]+)):(\d{1,5})$/.exec(text) ?? [];
  const port = Number(portText);
  if (portText === undefined || port > 65_535 || (v6 !== undefined && isIP(v6) !== 6))
    refuse(option, "HOST:PORT, [IPV6]:PORT or unix:PATH", text, "For instance 127.0.0.1:50610.");
  return { kind: "tcp", host: (v6 ?? plain)!, port };
}

/** An address as users write it. */
export function addressText(address: ListenAddress): string {
  if (address.kind === "unix") return `unix:${address.path}`;
  return isIP(address.host) === 6 ? `[${address.host}]:${address.port}` : `${address.host}:${address.port}`;
}

/** Whether only this machine can reach an address. Names other than `localhost` count as others'. */
export function isLocal(address: ListenAddress): boolean {
  if (address.kind === "unix" || address.host === "localhost") return true;
  const family = isIP(address.host);
  if (family === 0) return false;
  const loopback = new BlockList();
  loopback.addSubnet("127.0.0.0", 8, "ipv4");
  loopback.addAddress("::1", "ipv6");
  return loopback.check(address.host, family === 6 ? "ipv6" : "ipv4");
}

/**
 * Refuses to serve other machines in the open.
 *
 * @throws InputError for an address that is not local, without TLS and without the option that forces it
 */
export function requireSafe(address: ListenAddress, options: { tls: boolean; forced: boolean }): void {
  if (isLocal(address) || options.tls || options.forced) return;
  throw new InputError(
    `--listen: expected a loopback address or a Unix socket, since there is no TLS, got ${addressText(address)}. Give --tls-cert and --tls-key, or force it with --allow-insecure-network.`,
  );
}
