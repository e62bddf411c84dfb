import { expect, test } from "vitest";
import { addressText, isLocal, parseAddress } from "../../src/sidecar/address.js";

test.each([
  ["127.0.0.1:50610", { kind: "tcp", host: "127.0.0.1", port: 50610 }, true],
  ["127.8.9.1:0", { kind: "tcp", host: "127.8.9.1", port: 0 }, true],
  ["localhost:1", { kind: "tcp", host: "localhost", port: 1 }, true],
  ["[::1]:50610", { kind: "tcp", host: "::1", port: 50610 }, true],
  ["unix:/run/couplet.sock", { kind: "unix", path: "/run/couplet.sock" }, true],
  ["unix:here.sock", { kind: "unix", path: "here.sock" }, true],
  ["0.0.0.0:50610", { kind: "tcp", host: "0.0.0.0", port: 50610 }, false],
  ["[::]:50610", { kind: "tcp", host: "::", port: 50610 }, false],
  ["128.0.0.1:50610", { kind: "tcp", host: "128.0.0.1", port: 50610 }, false],
  ["farm.example:50610", { kind: "tcp", host: "farm.example", port: 50610 }, false],
])("%s is read, written back and known as local or not", (text, address, local) => {
  const read = parseAddress("--listen", text);
  expect(read).toEqual(address);
  expect(addressText(read)).toBe(text);
  expect(isLocal(read)).toBe(local);
});

test.each(["", "50610", "127.0.0.1", "127.0.0.1:", "127.0.0.1:99999", "::1:5", "[fe80]:1", "unix:", "a:b"])(
  "%j is refused",
  (text) => {
    expect(() => parseAddress("--listen", text)).toThrow(
      `--listen: expected HOST:PORT, [IPV6]:PORT or unix:PATH, got ${JSON.stringify(text)}. For instance 127.0.0.1:50610.`,
    );
  },
);
