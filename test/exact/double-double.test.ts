import { expect, test } from "vitest";
import { multiplyDoubleDouble, productError, rootAsDoubleDouble } from "../../src/exact/double-double.js";
import { seededIntegers } from "../support/seeded-integers.js";

const seed = 4_711;

/** An exact integer multiple of 2^-1000 for a float64 of moderate size. */
function scaled(x: number): bigint {
  return x === 0 ? 0n : BigInt(x * 2 ** 200) * 2n ** 800n;
}

test(`productError is the exact rounding error (seed ${seed})`, () => {
  const random = seededIntegers(seed);
  for (let i = 0; i < 2000; i++) {
    const [a, b] = [Number(random.bigint(53)), Number(random.bigint(53))];
    expect(BigInt(a * b) + BigInt(productError(a, b))).toBe(BigInt(a) * BigInt(b));
  }
});

test(`roots have a relative error below 2^-105 and products one below 2^-102 (seed ${seed + 1})`, () => {
  const random = seededIntegers(seed + 1);
  for (let i = 0; i < 2000; i++) {
    const [num, den] = [random.bigint(40) + 1n, random.bigint(40) + 1n];
    const root = rootAsDoubleDouble(num, den);
    const exactSquare = (num * 2n ** 2000n) / den;
    const square = (scaled(root[0]) + scaled(root[1])) ** 2n;
    const error = square > exactSquare ? square - exactSquare : exactSquare - square;
    expect(error * 2n ** 104n < exactSquare).toBe(true);

    const product = multiplyDoubleDouble(root, root);
    const value = (scaled(product[0]) + scaled(product[1])) * 2n ** 1000n;
    const productDeviation = value > square ? value - square : square - value;
    expect(productDeviation * 2n ** 102n < square).toBe(true);
  }
});
