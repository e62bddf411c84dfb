/** Greatest common divisor of two integers, never negative; gcd(0, 0) = 0. */
export function gcd(a: bigint, b: bigint): bigint {
  let x = a < 0n ? -a : a;
  let y = b < 0n ? -b : b;
  while (y !== 0n) {
    if (x <= 0x1fffffffffffffn && y <= 0x1fffffffffffffn) return BigInt(gcdOfNumbers(Number(x), Number(y)));
    const rest = x % y;
    x = y;
    y = rest;
  }
  return x;
}

/**
 * Greatest common divisor of two integers 0 <= a, b < 2^53, held as numbers; gcd(0, 0) = 0.
 *
 * The quotient a / b of such integers never rounds up to an integer it does not reach, so every remainder is exact.
 */
export function gcdOfNumbers(a: number, b: number): number {
  let x = a;
  let y = b;
  while (y > 0x7fffffff || x > 0x7fffffff) {
    if (y === 0) return x;
    const rest = x - Math.floor(x / y) * y;
    x = y;
    y = rest;
  }
  return gcdOfSmall(x, y);
}

/** Greatest common divisor of two integers 0 <= a, b < 2^31; kept apart so that it compiles to 32-bit arithmetic. */
export function gcdOfSmall(a: number, b: number): number {
  let x = a | 0;
  let y = b | 0;
  while (y !== 0) {
    const rest = (x % y) | 0;
    x = y;
    y = rest;
  }
  return x;
}

/** Number of binary digits of an integer n >= 0; 0 for n = 0. */
export function bitLength(n: bigint): number {
  if (n === 0n) return 0;
  const hex = n.toString(16);
  return 4 * hex.length - (Math.clz32(Number.parseInt(hex.charAt(0), 16)) - 28);
}

/** Integer square root floor(sqrt(n)) of an integer n >= 0, by Newton's iteration from above. */
export function integerSquareRoot(n: bigint): bigint {
  if (n < 2n) return n;
  let root = 1n << BigInt((bitLength(n) + 1) >> 1);
  for (;;) {
    const next = (root + n / root) >> 1n;
    if (next >= root) return root;
    root = next;
  }
}

/** The exact square root of an integer n >= 0 where n is a perfect square, otherwise undefined. */
export function perfectSquareRoot(n: bigint): bigint | undefined {
  const root = integerSquareRoot(n);
  return root * root === n ? root : undefined;
}
