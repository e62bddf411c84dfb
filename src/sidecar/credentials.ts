import { X509Certificate } from "node:crypto";
import { createSecureContext } from "node:tls";
import { ServerCredentials } from "@grpc/grpc-js";
import { InputError } from "../errors.js";
import { readInput } from "../tables/read-input.js";

/** All authorities of an operating system take a quarter of it. */
const MAX_PEM_BYTES = 2 ** 20;

/** Files for TLS, in PEM. */
export interface TlsFiles {
  /** The server's certificate, followed by the ones that lead to its authority. */
  readonly certificate: string;
  readonly key: string;
  /** Authorities of the clients' certificates; with it a client without one is refused. */
  readonly clientAuthorities?: string | undefined;
}

/** Credentials of a server, and the end of its certificate's life. */
export interface ServerIdentity {
  readonly credentials: ServerCredentials;
  readonly validTo?: Date;
}

/**
 * Credentials from files; without files a server in the open.
 *
 * @throws InputError for files that cannot be read, do not fit together, or a certificate that is not valid now
 */
export function serverIdentity(files: TlsFiles | undefined): ServerIdentity {
  if (files === undefined) return { credentials: ServerCredentials.createInsecure() };
  const cert = readPem("--tls-cert", files.certificate);
  const key = readPem("--tls-key", files.key);
  const ca =
    files.clientAuthorities === undefined ? null : readPem("--tls-client-ca", files.clientAuthorities);
  try {
    createSecureContext({ cert, key, ...(ca === null ? {} : { ca }) });
  } catch (cause) {
    const given = [files.certificate, files.key, files.clientAuthorities].filter((f) => f !== undefined);
    throw new InputError(
      `TLS: expected a certificate and its key in PEM, got ${given.join(", ")}, refused: ${(cause as Error).message}. Check that the files belong together.`,
      { cause },
    );
  }
  const validTo = requireValidNow(files.certificate, cert);
  const credentials = ServerCredentials.createSsl(ca, [{ private_key: key, cert_chain: cert }], ca !== null);
  return { credentials, validTo };
}

function requireValidNow(file: string, certificate: Buffer): Date {
  const { validFrom, validTo } = new X509Certificate(certificate);
  const now = Date.now();
  if (now >= Date.parse(validFrom) && now <= Date.parse(validTo)) return new Date(validTo);
  throw new InputError(
    `--tls-cert: expected a certificate that is valid now, got ${file}, valid from ${validFrom} to ${validTo}. Renew it.`,
  );
}

function readPem(option: string, file: string): Buffer {
  return readInput(file, { where: `${option}: ${file}`, maxBytes: MAX_PEM_BYTES });
}
