import { createPrivateKey, generateKeyPairSync, type KeyObject, randomBytes, sign } from "node:crypto";

/** A certificate with its key, in PEM, made for one test run. */
export interface Identity {
  readonly certificate: string;
  readonly key: string;
}

/** An authority that issues certificates to tests; nothing of it outlives the run. */
export interface Authority extends Identity {
  issue(options?: { readonly notBefore?: Date; readonly notAfter?: Date; readonly host?: string }): Identity;
}

const DAY = 24 * 3600 * 1000;

/** A new authority of a name. */
export function authority(name: string): Authority {
  const { publicKey, privateKey } = generateKeyPairSync("ec", { namedCurve: "P-256" });
  const lifetime = { notBefore: new Date(Date.now() - DAY), notAfter: new Date(Date.now() + DAY) };
  const root = signed({ issuer: name, subject: name, publicKey, by: privateKey, ca: true, ...lifetime });
  return {
    certificate: root,
    key: privateKey.export({ type: "pkcs8", format: "pem" }) as string,
    issue({ notBefore = lifetime.notBefore, notAfter = lifetime.notAfter, host = "localhost" } = {}) {
      const own = generateKeyPairSync("ec", { namedCurve: "P-256" });
      const subject = { issuer: name, subject: host, publicKey: own.publicKey, by: privateKey, ca: false };
      return {
        certificate: signed({ ...subject, notBefore, notAfter }),
        key: own.privateKey.export({ type: "pkcs8", format: "pem" }) as string,
      };
    },
  };
}

interface Content {
  readonly issuer: string;
  readonly subject: string;
  readonly publicKey: KeyObject;
  readonly by: KeyObject;
  readonly ca: boolean;
  readonly notBefore: Date;
  readonly notAfter: Date;
}

/** An X.509 version 3 certificate with an ECDSA signature (RFC 5280), in PEM. */
function signed({ issuer, subject, publicKey, by, ca, notBefore, notAfter }: Content): string {
  const algorithm = der(0x30, oid("1.2.840.10045.4.3.2"));
  const alternativeNames = der(0x30, der(0x82, Buffer.from(subject)), der(0x87, Buffer.from([127, 0, 0, 1])));
  const constraints = der(0x30, ...(ca ? [der(0x01, Buffer.from([0xff]))] : []));
  const body = der(
    0x30,
    der(0xa0, der(0x02, Buffer.from([2]))),
    der(0x02, Buffer.concat([Buffer.from([1]), randomBytes(8)])),
    algorithm,
    commonName(issuer),
    der(0x30, time(notBefore), time(notAfter)),
    commonName(subject),
    publicKey.export({ type: "spki", format: "der" }),
    der(0xa3, der(0x30, extension("2.5.29.19", constraints), extension("2.5.29.17", alternativeNames))),
  );
  const signature = sign("sha256", body, createPrivateKey(by.export({ type: "pkcs8", format: "pem" })));
  const whole = der(0x30, body, algorithm, der(0x03, Buffer.from([0]), signature));
  const lines = whole.toString("base64").replace(/(.{64})/g, "$1\n");
  return `-----BEGIN CERTIFICATE-----\n${lines.trimEnd()}\n-----END CERTIFICATE-----\n`;
}

function extension(id: string, value: Buffer): Buffer {
  return der(0x30, oid(id), der(0x04, value));
}

function commonName(name: string): Buffer {
  return der(0x30, der(0x31, der(0x30, oid("2.5.4.3"), der(0x0c, Buffer.from(name)))));
}

/** UTCTime, to the second. */
function time(date: Date): Buffer {
  const digits = date.toISOString().replace(/[-:T]|\..*$/g, "");
  return der(0x17, Buffer.from(`${digits.slice(2)}Z`));
}

function oid(text: string): Buffer {
  const [a, b, ...rest] = text.split(".").map(Number) as [number, number, ...number[]];
  const bytes = [40 * a + b];
  for (const part of rest) {
    const septets = [part & 0x7f];
    for (let left = part >> 7; left > 0; left >>= 7) septets.unshift((left & 0x7f) | 0x80);
    bytes.push(...septets);
  }
  return der(0x06, Buffer.from(bytes));
}

/** A value of ITU-T X.690: tag, length, content. */
function der(tag: number, ...parts: readonly Buffer[]): Buffer {
  const content = Buffer.concat(parts);
  const { length } = content;
  const head = length < 128 ? [length] : length < 256 ? [0x81, length] : [0x82, length >> 8, length & 0xff];
  return Buffer.concat([Buffer.from([tag, ...head]), content]);
}
