/**
 * A piece of work that uses nothing of Couplet: numbers, typed arrays, BigInt and a map, some milliseconds of it.
 *
 * Times of cases are given as multiples of it, measured in the same run, so that they travel between machines.
 * @returns a number that is always the same
 */
export function yardstick(): number {
  const values = new Float64Array(20_000);
  let state = 77_001;
  for (let i = 0; i < values.length; i++) {
    state ^= state << 13;
    state ^= state >>> 17;
    state ^= state << 5;
    values[i] = state >>> 0;
  }
  let sum = 0;
  for (let i = 1; i < values.length; i++) sum = (sum + gcd(values[i - 1]!, values[i]!)) % 1_000_003;
  let product = 1n;
  for (let i = 0; i < 300; i++) product = (product * BigInt(values[i]!)) % 2n ** 521n;
  const counts = new Map<string, number>();
  for (let i = 0; i < 3000; i++) {
    const key = `${values[i]! % 7},${values[i]! % 11}`;
    counts.set(key, (counts.get(key) ?? 0) + 1);
  }
  return sum + Number(product % 1_000_003n) + counts.size;
}

function gcd(a: number, b: number): number {
  let [x, y] = [a, b];
  while (y !== 0) [x, y] = [y, x % y];
  return x;
}
