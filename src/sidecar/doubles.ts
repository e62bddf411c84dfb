import { endianness } from "node:os";

/** Lists of doubles by the number of their field. */
export type DoubleLists = readonly (readonly [field: number, values: Float64Array])[];

/** Whether doubles lie in memory as they go over the wire. */
const IS_LITTLE_ENDIAN = endianness() === "LE";

let space = Buffer.alloc(0);

/**
 * A message with packed `repeated double` fields after its others: the bytes the generated encoder would write, which takes
 * each number by itself and is ten times slower. Nothing is written for an empty list.
 *
 * @param head - the encoded other fields
 * @param lists - fields from 1 to 15
 * @returns bytes of a space that the next message takes again: new ones for each would cost more than writing them
 */
export function withDoubles(head: Uint8Array, lists: DoubleLists): Uint8Array {
  const filled = lists.filter(([, values]) => values.length > 0);
  const size = filled.reduce((sum, [, { byteLength }]) => sum + 1 + varintSize(byteLength) + byteLength, 0);
  if (space.length < head.length + size) space = Buffer.alloc(head.length + size);
  const bytes = space.subarray(0, head.length + size);
  bytes.set(head);
  let at = head.length;
  for (const [field, values] of filled) {
    bytes[at++] = (field << 3) | 2;
    let left = values.byteLength;
    for (; left > 0x7f; left >>>= 7) bytes[at++] = (left & 0x7f) | 0x80;
    bytes[at++] = left;
    if (IS_LITTLE_ENDIAN) {
      bytes.set(new Uint8Array(values.buffer, values.byteOffset, values.byteLength), at);
      at += values.byteLength;
    } else for (const value of values) at = bytes.writeDoubleLE(value, at);
  }
  return bytes;
}

function varintSize(value: number): number {
  return Math.max(1, Math.ceil((32 - Math.clz32(value)) / 7));
}
