import { createHash } from "node:crypto";
import { InputError, TableError } from "../errors.js";

/** What a table file can hold; the first field of the file says which. */
export const TABLE_KINDS = [
  "couplet.v1.CouplingTables",
  "couplet.v1.DecayTables",
  "couplet.v1.FactorTable",
] as const;

/** Full name of the message in a table file. */
export type TableKind = (typeof TABLE_KINDS)[number];

// Field 1000, wire type 2, as a varint; then the length of a SHA-256.
const SEAL_HEAD = Buffer.from([0xc2, 0x3e, 0x20]);
/** Bytes of the last field, which holds the digest. */
export const SEAL_LENGTH = SEAL_HEAD.length + 32;

/** The last field of a file whose other bytes have this SHA-256. */
export function sealOf(digest: Uint8Array): Uint8Array {
  return Buffer.concat([SEAL_HEAD, digest]);
}

/**
 * A table's bytes with the digest appended as its last field: SHA-256 of every byte before that field.
 *
 * @param body - the encoded message without its `sha256` field
 */
export function sealBytes(body: Uint8Array): Uint8Array {
  return Buffer.concat([...sealedPieces([body])]);
}

/** The same piece by piece, for a table too large to hold: the digest is computed on the way. */
export function* sealedPieces(body: Iterable<Uint8Array>): Generator<Uint8Array> {
  const hash = createHash("sha256");
  for (const piece of body) {
    hash.update(piece);
    yield piece;
  }
  yield sealOf(hash.digest());
}

/**
 * The kind of a sealed table, after its digest has been checked on the bytes as read.
 *
 * @param file - the file's name, for messages
 * @throws InputError if the file is not one of ours at all
 * @throws TableError if it is one of ours and damaged
 */
export function checkSeal(bytes: Uint8Array, file: string): TableKind {
  return requireSealed({ start: bytes, length: bytes.length, sealed: hasSeal(bytes) }, file);
}

/**
 * The kind of a table whose digest has been looked at elsewhere; `start` has at least its first 64 bytes, or all.
 *
 * @throws InputError and TableError as `checkSeal`
 */
export function requireSealed(
  { start, length, sealed }: { start: Uint8Array; length: number; sealed: boolean },
  file: string,
): TableKind {
  const kind = kindOf(start);
  if (kind !== undefined && sealed) return kind;
  if (kind !== undefined) {
    throw new TableError(
      `${file}: the file is damaged: its digest does not match its content (${length} bytes). Nothing was read; get a fresh copy or write the table again.`,
    );
  }
  if (sealed && hasHead(start, "couplet.v")) {
    throw new TableError(
      `${file}: expected one of ${TABLE_KINDS.join(", ")}, got a table of another kind. Read it with a newer Couplet.`,
    );
  }
  throw new InputError(
    `${file}: expected a table file written by Couplet, got something else (${length} bytes). Give a .pb file that \`couplet tables\`, \`couplet couplings --out\` or \`couplet factors --out\` wrote.`,
  );
}

/**
 * The message in a sealed table of a given kind.
 *
 * @param decode - the message's decoder
 * @throws InputError if the file is not one of ours, or of another kind; TableError if it is damaged
 */
export function openSealed<T>(
  bytes: Uint8Array,
  file: string,
  wanted: TableKind,
  decode: (bytes: Uint8Array) => T,
): T {
  const kind = checkSeal(bytes, file);
  if (kind !== wanted)
    throw new InputError(`${file}: expected ${wanted}, got ${kind}. Give a file of the kind expected.`);
  try {
    return decode(bytes);
  } catch (cause) {
    throw new TableError(
      `${file}: expected a message ${wanted}, got bytes that are none (${(cause as Error).message}). The file was written by something else; write it again.`,
      { cause },
    );
  }
}

/** Whether the last field is the digest of every byte before it. */
function hasSeal(bytes: Uint8Array): boolean {
  if (bytes.length < SEAL_LENGTH) return false;
  const body = bytes.subarray(0, bytes.length - SEAL_LENGTH);
  const digest = createHash("sha256").update(body).digest();
  return Buffer.from(sealOf(digest)).equals(bytes.subarray(body.length));
}

/** The digest of a sealed table, in hexadecimal. */
export function digestOf(sealed: Uint8Array): string {
  return Buffer.from(sealed.subarray(sealed.length - 32)).toString("hex");
}

function kindOf(bytes: Uint8Array): TableKind | undefined {
  return TABLE_KINDS.find((kind) => bytes[1] === kind.length && hasHead(bytes, kind));
}

/** Whether the first field is a text that starts so. */
function hasHead(bytes: Uint8Array, start: string): boolean {
  return bytes[0] === 0x0a && Buffer.from(start).equals(bytes.subarray(2, 2 + start.length));
}
