/** Rows of numbers that several threads fill in, and the number of the next row to take. */
export interface SharedRows {
  readonly count: number;
  readonly length: number;
  readonly numbers: SharedArrayBuffer;
  /** Two 32-bit integers: rows taken, rows done. */
  readonly counters: SharedArrayBuffer;
}

/** Rows of zeros; a row has `length` numbers. */
export function sharedRows(count: number, length: number): SharedRows {
  return {
    count,
    length,
    numbers: new SharedArrayBuffer(8 * count * length),
    counters: new SharedArrayBuffer(8),
  };
}

/** One row as a view into the shared numbers. */
export function rowAt(rows: SharedRows, index: number): Float64Array {
  return new Float64Array(rows.numbers, 8 * index * rows.length, rows.length);
}

/** Rows a thread takes at a time. */
const ROWS_AT_A_TIME = 4;

/** Takes a few rows that nobody has taken and fills them; says whether there may be more. */
export function fillSome(rows: SharedRows, write: (index: number, row: Float64Array) => void): boolean {
  const counters = new Int32Array(rows.counters);
  const first = Atomics.add(counters, 0, ROWS_AT_A_TIME);
  const last = Math.min(first + ROWS_AT_A_TIME, rows.count);
  for (let index = first; index < last; index++) {
    write(index, rowAt(rows, index));
    Atomics.add(counters, 1, 1);
  }
  return last < rows.count;
}

/** Rows that are filled. */
export function rowsDone(rows: SharedRows): number {
  return Atomics.load(new Int32Array(rows.counters), 1);
}
