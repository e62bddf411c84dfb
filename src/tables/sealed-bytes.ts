import { createHash } from "node:crypto";
import { InputError, TableError } from "../errors.js";

/** What a table file can hold; the first field of the file says which. */
export const TABLE_KINDS = ["couplet.v1.DecayTables", "couplet.v1.FactorTable"] as const;

/** Full name of the message in a table file. */
export type TableKind = (typeof TABLE_KINDS)[number];

// Field 1000, wire type 2, as a varint; then the length of a SHA-256.
const SEAL_HEAD = Buffer.from([0xc2, 0x3e, 0x20]);
const SEAL_LENGTH = SEAL_HEAD.length + 32;

/**
 * A table's bytes with the digest appended as its last field: SHA-256 of every byte before that field.
 *
 * @param body - the encoded message without its `sha256` field
 */
export function sealBytes(body: Uint8Array): Uint8Array {
  return Buffer.concat([body, SEAL_HEAD, createHash("sha256").update(body).digest()]);
}

/**
 * The kind of a sealed table, after its digest has been checked on the bytes as read.
 *
 * @param file - the file's name, for messages
 * @throws InputError if the file is not one of ours at all
 * @throws TableError if it is one of ours and damaged
 */
export function checkSeal(bytes: Uint8Array, file: string): TableKind {
  const kind = kindOf(bytes);
  if (kind === undefined) {
    throw new InputError(
      `${file}: expected a table file written by Couplet, got something else (${bytes.length} bytes). Give a .pb file that \`couplet tables\` or \`couplet factors --out\` wrote.`,
    );
  }
  const body = bytes.subarray(0, bytes.length - SEAL_LENGTH);
  const seal = Buffer.from(bytes.subarray(bytes.length - SEAL_LENGTH));
  const digest = createHash("sha256").update(body).digest();
  if (bytes.length < SEAL_LENGTH || !seal.equals(Buffer.concat([SEAL_HEAD, digest]))) {
    throw new TableError(
      `${file}: the file is damaged: its digest does not match its content (${bytes.length} bytes). Nothing was read; get a fresh copy or write the table again.`,
    );
  }
  return kind;
}

/** The digest of a sealed table, in hexadecimal. */
export function digestOf(sealed: Uint8Array): string {
  return Buffer.from(sealed.subarray(sealed.length - 32)).toString("hex");
}

function kindOf(bytes: Uint8Array): TableKind | undefined {
  return TABLE_KINDS.find((kind) => {
    const head = Buffer.concat([Buffer.from([0x0a, kind.length]), Buffer.from(kind)]);
    return head.equals(bytes.subarray(0, head.length));
  });
}
