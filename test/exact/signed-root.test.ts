import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { gcd } from "../../src/exact/integer.js";
import { rational } from "../../src/exact/rational.js";
import {
  divideRoots,
  equalRoots,
  formatRoot,
  multiplyRoots,
  negateRoot,
  ONE_ROOT,
  parseRoot,
  rootOfSignedSquare,
  rootToNumber,
  rootToRational,
  type SignedRoot,
  signedRoot,
  signedSquare,
  ZERO_ROOT,
} from "../../src/exact/signed-root.js";

const seed = 20_240_503;
const someRoot = fc
  .tuple(
    fc.constantFrom(-1, 0, 1),
    fc.bigInt({ min: 0n, max: 2n ** 60n }),
    fc.bigInt({ min: 1n, max: 2n ** 60n }),
  )
  .map(([sign, num, den]) => signedRoot(sign, num, den));

function isCanonical({ sign, num, den }: SignedRoot): boolean {
  return sign === 0 ? num === 0n && den === 1n : num > 0n && den > 0n && gcd(num, den) === 1n;
}

describe("signed roots", () => {
  test("products and quotients are canonical, and undo each other", () => {
    fc.assert(
      fc.property(someRoot, someRoot, (a, b) => {
        const product = multiplyRoots(a, b);
        const undone = b.sign === 0 || equalRoots(divideRoots(product, b), a);
        return isCanonical(product) && product.sign === ((a.sign * b.sign) as number) && undone;
      }),
      { seed, numRuns: 300 },
    );
  });

  test("zero has one form, whatever it is made from", () => {
    for (const zero of [
      signedRoot(0, 3, 4),
      signedRoot(-1, 0, 4),
      rootOfSignedSquare(rational(0)),
      negateRoot(ZERO_ROOT),
    ]) {
      expect(zero).toEqual({ sign: 0, num: 0n, den: 1n });
    }
  });

  test("signed squares and roots are each other's inverse", () => {
    fc.assert(
      fc.property(someRoot, (a) => equalRoots(rootOfSignedSquare(signedSquare(a)), a)),
      { seed },
    );
    expect(rootOfSignedSquare(rational(-9, 20))).toEqual({ sign: -1, num: 9n, den: 20n });
  });

  test("text reads back as the same root", () => {
    fc.assert(
      fc.property(someRoot, (a) => equalRoots(parseRoot(formatRoot(a)), a)),
      { seed, numRuns: 300 },
    );
  });

  test("text is a rational where the root is one", () => {
    const texts = ["-sqrt(3/20)", "sqrt(2)", "1/2", "-1", "0", "-sqrt(9/20)", "sqrt(1/2)", "-7/3"];
    expect(texts.map((text) => formatRoot(parseRoot(text)))).toEqual(texts);
    expect(formatRoot(parseRoot("-sqrt(4/16)"))).toBe("-1/2");
  });

  test("a root is a rational exactly when its square is the square of one", () => {
    expect(rootToRational(parseRoot("-3/7"))).toEqual(rational(-3, 7));
    expect(rootToRational(ZERO_ROOT)).toEqual(rational(0));
    expect(rootToRational(parseRoot("sqrt(4/7)"))).toBeUndefined();
    expect(rootToRational(parseRoot("sqrt(2)"))).toBeUndefined();
  });

  test("numbers carry the sign and are correctly rounded where Math.sqrt of a quotient is not", () => {
    expect([ZERO_ROOT, ONE_ROOT, negateRoot(ONE_ROOT)].map(rootToNumber)).toEqual([0, 1, -1]);
    expect(rootToNumber(parseRoot("-sqrt(2)"))).toBe(-Math.SQRT2);
    let differing = 0;
    for (let num = 1; num < 100; num++) {
      for (let den = 1; den < 100; den++) {
        if (rootToNumber(signedRoot(1, num, den)) !== Math.sqrt(num / den)) differing++;
      }
    }
    expect(differing).toBeGreaterThan(500);
  });

  test("text of any other form is refused", () => {
    expect(() => parseRoot("0.5")).toThrow(
      new InputError('parseRoot: expected a number such as -sqrt(3/20), sqrt(2), 1/2 or -1, got "0.5".'),
    );
    for (const text of ["", "sqrt(-1)", "sqrt(1/0)", "1/0", "sqrt(2", "2 sqrt(2)", "--1"]) {
      expect(() => parseRoot(text), text).toThrow(InputError);
    }
  });

  test("negative squares and bad denominators are refused", () => {
    expect(() => signedRoot(1, -2)).toThrow(
      new InputError("signedRoot: num: expected an integer >= 0, got -2. Carry the sign in `sign`."),
    );
    expect(() => signedRoot(1, 2, 0)).toThrow(
      new InputError("signedRoot: den: expected an integer > 0, got 0."),
    );
    expect(() => divideRoots(ONE_ROOT, ZERO_ROOT)).toThrow(
      new InputError("divideRoots: divisor: expected a root other than 0, got 0."),
    );
  });
});
