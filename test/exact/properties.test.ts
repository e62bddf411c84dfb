import fc from "fast-check";
import { describe, test } from "vitest";
import { gcd, gcdOfNumbers, integerSquareRoot, perfectSquareRoot } from "../../src/exact/integer.js";
import {
  addRational,
  compareRationals,
  divideRational,
  equalRationals,
  formatRational,
  multiplyRational,
  parseRational,
  rational,
  rationalToNumber,
  subtractRational,
} from "../../src/exact/rational.js";
import { addRoots } from "../../src/exact/root-sum.js";
import {
  divideRoots,
  equalRoots,
  formatRoot,
  multiplyRoots,
  negateRoot,
  parseRoot,
  rootOfSignedSquare,
  rootToNumber,
  signedRoot,
  signedSquare,
} from "../../src/exact/signed-root.js";

const SEED = 77_101;
const options = { seed: SEED, numRuns: 400 };

const integer = fc.bigInt({ min: -(2n ** 80n), max: 2n ** 80n });
const positive = fc.bigInt({ min: 1n, max: 2n ** 80n });
const ratio = fc.tuple(integer, positive).map(([n, d]) => rational(n, d));
const root = fc
  .tuple(fc.constantFrom(-1, 0, 1), positive, positive)
  .map(([sign, n, d]) => signedRoot(sign, n, d));

describe(`exact numbers obey their laws for random arguments (seed ${SEED})`, () => {
  test("rationals form a field in one canonical form", () => {
    fc.assert(
      fc.property(ratio, ratio, ratio, (a, b, c) => {
        const left = multiplyRational(a, addRational(b, c));
        const right = addRational(multiplyRational(a, b), multiplyRational(a, c));
        const back = addRational(subtractRational(a, b), b);
        const quotient = b.num === 0n ? a : multiplyRational(divideRational(a, b), b);
        return (
          equalRationals(left, right) &&
          equalRationals(back, a) &&
          equalRationals(quotient, a) &&
          gcd(left.num, left.den) === 1n &&
          left.den > 0n
        );
      }),
      options,
    );
  });

  test("the order of rationals is that of their differences, and of their doubles where these differ", () => {
    fc.assert(
      fc.property(ratio, ratio, (a, b) => {
        const order = compareRationals(a, b);
        const difference = subtractRational(a, b).num;
        const [x, y] = [rationalToNumber(a), rationalToNumber(b)];
        const sign = difference < 0n ? -1 : difference > 0n ? 1 : 0;
        return order === sign && (x === y || Math.sign(x - y) === order);
      }),
      options,
    );
  });

  test("numbers come back from their text, and from their signed square", () => {
    fc.assert(
      fc.property(ratio, root, (a, r) => {
        const known = equalRoots(rootOfSignedSquare(signedSquare(r)), r);
        return (
          equalRationals(parseRational(formatRational(a)), a) &&
          equalRoots(parseRoot(formatRoot(r)), r) &&
          known
        );
      }),
      options,
    );
  });

  test("roots multiply as their squares do, and divide back", () => {
    fc.assert(
      fc.property(root, root, (a, b) => {
        const product = multiplyRoots(a, b);
        const square = multiplyRational(rational(a.num, a.den), rational(b.num, b.den));
        const squared = product.sign === 0 || (product.num === square.num && product.den === square.den);
        const back = b.sign === 0 || equalRoots(divideRoots(product, b), a);
        return product.sign === a.sign * b.sign && squared && back;
      }),
      options,
    );
  });

  test("a sum of roots has the double of its parts, and cancels exactly", () => {
    fc.assert(
      fc.property(fc.array(root, { maxLength: 5 }), (roots) => {
        const total = roots.reduce((sum, r) => sum + rootToNumber(r), 0);
        const size = roots.reduce((sum, r) => sum + Math.abs(rootToNumber(r)), 0);
        const summed = addRoots(roots).reduce((sum, r) => sum + rootToNumber(r), 0);
        const nothing = addRoots([...roots, ...roots.map(negateRoot)]);
        return Math.abs(total - summed) <= 1e-12 * size && nothing.length === 0;
      }),
      options,
    );
  });

  test("square roots of integers are exact from below", () => {
    fc.assert(
      fc.property(fc.bigInt({ min: 0n, max: 2n ** 300n }), (n) => {
        const r = integerSquareRoot(n);
        return r * r <= n && (r + 1n) * (r + 1n) > n && perfectSquareRoot(r * r) === r;
      }),
      options,
    );
  });

  test("greatest common divisors divide, and agree between numbers and BigInt", () => {
    fc.assert(
      fc.property(fc.maxSafeNat(), fc.maxSafeNat(), (a, b) => {
        const g = gcdOfNumbers(a, b);
        const divides =
          g === 0 ? a === 0 && b === 0 : BigInt(a) % BigInt(g) === 0n && BigInt(b) % BigInt(g) === 0n;
        return divides && BigInt(g) === gcd(BigInt(a), BigInt(b));
      }),
      options,
    );
  });

  test("doubles keep the order and sign of roots", () => {
    fc.assert(
      fc.property(root, root, (a, b) => {
        const [x, y] = [rootToNumber(a), rootToNumber(b)];
        const order = compareRationals(signedSquare(a), signedSquare(b));
        return x === y || Math.sign(x - y) === order;
      }),
      options,
    );
  });
});
