import { InputError, TableError } from "../../src/errors.js";

/** What a reader did with changed bytes: the class it threw, or `accepted`. */
export type Outcome = "not ours" | "damaged" | "accepted" | "crashed";

/** What a reader makes of some bytes. */
export function outcome(read: (bytes: Uint8Array) => unknown, bytes: Uint8Array): Outcome {
  try {
    read(bytes);
    return "accepted";
  } catch (error) {
    if (error instanceof InputError) return "not ours";
    return error instanceof TableError ? "damaged" : "crashed";
  }
}

/** Every file that differs from `bytes` in one byte, with the place of that byte; each is valid until the next. */
export function* changedBytes(
  bytes: Uint8Array,
  values: readonly number[],
): Generator<{ readonly place: number; readonly bytes: Uint8Array }> {
  const changed = Uint8Array.from(bytes);
  for (let place = 0; place < bytes.length; place++) {
    for (const change of values) {
      changed[place] = bytes[place]! ^ change;
      yield { place, bytes: changed };
    }
    changed[place] = bytes[place]!;
  }
}
