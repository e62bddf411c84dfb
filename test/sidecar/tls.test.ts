import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { credentials } from "@grpc/grpc-js";
import { afterAll, afterEach, beforeAll, expect, test } from "vitest";
import { type Authority, authority, type Identity } from "./certificates.js";
import { failure, type Running, running } from "./running.js";

const UNAVAILABLE = 14;
let folder: string;
let ours: Authority;
let other: Authority;
let server: Running | undefined;

beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), "couplet-tls-"));
  ours = authority("Couplet test authority");
  other = authority("Another authority");
});
afterAll(() => rmSync(folder, { recursive: true, force: true }));
afterEach(async () => {
  await server?.stop();
  server = undefined;
});

const YESTERDAY = new Date(Date.now() - 24 * 3600 * 1000);
const LAST_WEEK = new Date(Date.now() - 7 * 24 * 3600 * 1000);

function file(name: string, text: string): string {
  const path = join(folder, name);
  writeFileSync(path, text, { mode: 0o600 });
  return path;
}

function tls(identity: Identity, clientAuthority?: Authority) {
  return {
    certificate: file("server.crt", identity.certificate),
    key: file("server.key", identity.key),
    clientAuthorities: clientAuthority && file("clients.crt", clientAuthority.certificate),
  };
}

function channel(root: Authority, own?: Identity) {
  return credentials.createSsl(
    Buffer.from(root.certificate),
    own && Buffer.from(own.key),
    own && Buffer.from(own.certificate),
  );
}

const askOf = (one: Running, ...args: Parameters<typeof channel>) =>
  one.client(channel(...args)).widths("rho(770)0", 800);

test("with TLS a client that knows the authority is answered; others and plain ones are not", async () => {
  server = await running({ tls: tls(ours.issue()) });
  expect((await askOf(server, ours)).totalWidth).toBeGreaterThan(0);
  expect((await failure(askOf(server, other))).code).toBe(UNAVAILABLE);
  expect((await failure(server.client().widths("rho(770)0", 800))).code).toBe(UNAVAILABLE);
  expect((await askOf(server, ours)).totalWidth).toBeGreaterThan(0);
});

test("with mutual TLS a client needs a valid certificate of the clients' authority", async () => {
  server = await running({ tls: tls(ours.issue(), ours) });
  expect((await askOf(server, ours, ours.issue())).totalWidth).toBeGreaterThan(0);
  const refused = {
    none: undefined,
    "of another authority": other.issue(),
    expired: ours.issue({ notBefore: LAST_WEEK, notAfter: YESTERDAY }),
  };
  for (const own of Object.values(refused))
    expect((await failure(askOf(server, ours, own))).code).toBe(UNAVAILABLE);
  expect((await askOf(server, ours, ours.issue())).totalWidth).toBeGreaterThan(0);
});

test("a client refuses a server whose certificate is for another host", async () => {
  server = await running({
    tls: tls({ ...ours.issue({ host: "elsewhere.invalid" }) }),
    listen: { kind: "tcp", host: "localhost", port: 0 },
  });
  expect((await failure(askOf(server, ours))).code).toBe(UNAVAILABLE);
});

test("an expired certificate, a key of another one and files that are none are refused at the start", async () => {
  const expired = tls(ours.issue({ notBefore: LAST_WEEK, notAfter: YESTERDAY }));
  await expect(running({ tls: expired })).rejects.toThrow(
    /^--tls-cert: expected a certificate that is valid now, got .+server\.crt, valid from .+ to .+\. Renew it\.$/,
  );
  const mixed = tls({ certificate: ours.issue().certificate, key: ours.issue().key });
  await expect(running({ tls: mixed })).rejects.toThrow(
    /^TLS: expected a certificate and its key in PEM, got .+, refused: .*key values mismatch\. Check that the files belong together\.$/,
  );
  await expect(running({ tls: tls({ certificate: "none", key: "none" }) })).rejects.toThrow(
    /^TLS: expected a certificate and its key in PEM/,
  );
  await expect(running({ tls: { certificate: "/nowhere/a.crt", key: "/nowhere/a.key" } })).rejects.toThrow(
    "--tls-cert: /nowhere/a.crt: could not be read: ENOENT: no such file or directory. Check the path.",
  );
});

test("an address others can reach needs TLS, or to be forced", async () => {
  const everywhere = { kind: "tcp", host: "0.0.0.0", port: 0 } as const;
  await expect(running({ listen: everywhere })).rejects.toThrow(
    "--listen: expected a loopback address or a Unix socket, since there is no TLS, got 0.0.0.0:0. Give --tls-cert and --tls-key, or force it with --allow-insecure-network.",
  );
  server = await running({ listen: everywhere, allowInsecureNetwork: true });
  await server.stop();
  server = await running({ listen: everywhere, tls: tls(ours.issue()) });
});
