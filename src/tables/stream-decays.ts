import { createHash } from "node:crypto";
import { closeSync, fstatSync, openSync, readSync } from "node:fs";
import { Reader } from "protobufjs/minimal";
import { InputError, TableError } from "../errors.js";
import { couplet } from "../gen/couplet.js";
import { requireKnownHeader } from "./check-header.js";
import { requireWhole } from "./decode-decays.js";
import { DECAYS_SCHEMA_MINOR } from "./encode-decays.js";
import { unreadable } from "./read-input.js";
import { requireSealed, SEAL_LENGTH, sealOf } from "./sealed-bytes.js";

import v1 = couplet.v1;

/** A decay table that stays in its file: all but the parents, and these one by one. */
export interface DecayFile {
  /** Header, fit, externals and replicas; its `parents` are empty. */
  readonly head: v1.DecayTables;
  /**
   * The parents in the order of the file, each read when it is asked for.
   * @throws TableError for a parent whose rows do not add up
   */
  parents(): Generator<v1.Parent>;
  /** Lets go of the file. */
  close(): void;
}

/** Number of the field `parents` in `DecayTables`. */
const PARENTS = 4;
/** Bytes read at a time. */
const CHUNK = 1 << 20;
/** No tag and length of a field are longer. */
const LONGEST_HEAD = 20;

/**
 * Opens a decay table of any size: its digest is checked over the whole file first, then memory holds one parent at a
 * time. A file that is replaced meanwhile, as `couplet tables` does it, does not change what is read.
 *
 * @throws InputError for a file that cannot be read or is no decay table of ours; TableError if it is damaged or too new
 */
export function openDecays(path: string): DecayFile {
  const file = opened(path);
  try {
    const size = fstatSync(file).size;
    requireDecays(file, size, path);
    const fields = fieldsOf(file, size, path);
    const others = fields
      .filter(({ number }) => number !== PARENTS)
      .map((field) => bytesAt(file, field, path));
    const head = decoded(path, () => v1.DecayTables.decode(Buffer.concat(others)));
    requireKnownHeader(head.header, DECAYS_SCHEMA_MINOR, path);
    return {
      head,
      *parents() {
        for (const field of fields) {
          if (field.number !== PARENTS) continue;
          const bytes = bytesAt(file, field, path);
          const [parent] = decoded(path, () => v1.DecayTables.decode(bytes).parents);
          requireWhole(parent!, path);
          yield parent!;
        }
      },
      close: () => closeSync(file),
    };
  } catch (error) {
    closeSync(file);
    throw error;
  }
}

/** A field of the file's message, tag and length included. */
interface Field {
  readonly number: number;
  readonly start: number;
  readonly end: number;
}

function opened(path: string): number {
  try {
    const file = openSync(path, "r");
    if (fstatSync(file).isFile()) return file;
    closeSync(file);
  } catch (cause) {
    throw unreadable(path, cause);
  }
  throw new InputError(`${path}: expected a file, got a folder or a device. Check the path.`);
}

function requireDecays(file: number, size: number, path: string): void {
  const hash = createHash("sha256");
  const body = Math.max(0, size - SEAL_LENGTH);
  for (let at = 0; at < body; at += CHUNK) {
    hash.update(bytesAt(file, { start: at, end: Math.min(body, at + CHUNK) }, path));
  }
  const seal = bytesAt(file, { start: body, end: size }, path);
  const sealed = Buffer.from(sealOf(hash.digest())).equals(seal);
  const start = bytesAt(file, { start: 0, end: Math.min(size, 64) }, path);
  const kind = requireSealed({ start, length: size, sealed }, path);
  if (kind === "couplet.v1.DecayTables") return;
  throw new InputError(
    `${path}: expected couplet.v1.DecayTables, got ${kind}. Give a file of the kind expected.`,
  );
}

function fieldsOf(file: number, size: number, path: string): Field[] {
  const fields: Field[] = [];
  for (let start = 0; start < size; ) {
    const reader = Reader.create(bytesAt(file, { start, end: Math.min(size, start + LONGEST_HEAD) }, path));
    const field = decoded(path, () => {
      const tag = reader.uint32();
      // Every field of the message is a text, a message or bytes.
      if ((tag & 7) !== 2) throw new Error(`wire type ${tag & 7} in field ${tag >>> 3}`);
      const length = reader.uint32();
      const end = start + reader.pos + length;
      if (end > size) throw new Error(`field ${tag >>> 3} ends behind the file`);
      return { number: tag >>> 3, start, end };
    });
    fields.push(field);
    start = field.end;
  }
  return fields;
}

function bytesAt(
  file: number,
  { start, end }: { readonly start: number; readonly end: number },
  path: string,
): Buffer {
  const bytes = Buffer.allocUnsafe(end - start);
  let done = 0;
  while (done < bytes.length) {
    const count = readSync(file, bytes, done, bytes.length - done, start + done);
    if (count === 0)
      throw new TableError(
        `${path}: expected ${end} bytes or more, got ${start + done}: the file became shorter while it was read. Read it again.`,
      );
    done += count;
  }
  return bytes;
}

function decoded<T>(path: string, decode: () => T): T {
  try {
    return decode();
  } catch (cause) {
    throw new TableError(
      `${path}: expected a message couplet.v1.DecayTables, got bytes that are none (${(cause as Error).message}). The file was written by something else; write it again.`,
      { cause },
    );
  }
}
