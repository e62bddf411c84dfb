import type { FinishedColumns } from "../src/su3/engine/finished.js";

/** The finished factors as bytes, each as a sign byte and two varints: the yardstick of the benches, not a file format. */
export function varintBytes({ sign, num, den, big }: FinishedColumns): Uint8Array {
  let bytes = new Uint8Array(8 * sign.length + 64);
  let length = 0;
  const writeNumber = (value: number) => {
    let rest = value;
    while (rest > 0x7fffffff) {
      const upper = Math.floor(rest / 128);
      bytes[length++] = rest - upper * 128 + 128;
      rest = upper;
    }
    for (; rest > 127; rest >>>= 7) bytes[length++] = (rest & 127) | 128;
    bytes[length++] = rest;
  };
  const writeBig = (value: bigint) => {
    let rest = value;
    for (; rest > 127n; rest >>= 7n) bytes[length++] = Number(rest & 127n) | 128;
    bytes[length++] = Number(rest);
  };
  for (let i = 0; i < sign.length; i++) {
    if (length + 64 > bytes.length) {
      const larger = new Uint8Array(2 * bytes.length);
      larger.set(bytes);
      bytes = larger;
    }
    bytes[length++] = sign[i]! + 1;
    const fraction = num[i] === 0 && sign[i] !== 0 ? big.get(i)! : undefined;
    if (fraction === undefined) {
      writeNumber(num[i]!);
      writeNumber(den[i]!);
    } else {
      writeBig(fraction.num);
      writeBig(fraction.den);
    }
  }
  return bytes.subarray(0, length);
}
