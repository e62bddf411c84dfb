import { describe, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { formatRoot, multiplyRoots, signedRoot } from "../../src/exact/signed-root.js";
import { clebschGordan } from "../../src/su2/clebsch-gordan.js";
import { isTriad, sixJ } from "../../src/su2/six-j.js";
import { sumOfRoots } from "../support/sum-of-roots.js";

const LARGEST = 4;
const spins = Array.from({ length: LARGEST + 1 }, (_, i) => i);
const wide = Array.from({ length: 2 * LARGEST + 1 }, (_, i) => i);

describe("SU(2) 6j symbols", () => {
  test("equal printed values", () => {
    // A.R. Edmonds, Angular Momentum in Quantum Mechanics (1957), table 5 formulas evaluated (provenance: memory).
    expect(formatRoot(sixJ(1, 1, 2, 1, 1, 2))).toBe("1/6");
    expect(formatRoot(sixJ(1, 1, 0, 1, 1, 0))).toBe("-1/2");
    expect(formatRoot(sixJ(2, 2, 2, 2, 2, 2))).toBe("1/6");
    expect(formatRoot(sixJ(4, 4, 4, 4, 4, 4))).toBe("-3/70");
    expect(formatRoot(sixJ(2, 2, 4, 2, 2, 4))).toBe("1/30");
  });

  test(`are orthogonal in their third and sixth spins, exactly, up to 2j = ${LARGEST}`, () => {
    for (const a of spins)
      for (const b of spins)
        for (const c of spins)
          for (const d of spins)
            for (const e of wide.filter((x) => isTriad(a, b, x) && isTriad(c, d, x)))
              for (const e2 of wide.filter((x) => isTriad(a, b, x) && isTriad(c, d, x))) {
                const terms = wide.map((f) =>
                  multiplyRoots(
                    signedRoot(1, (e + 1) * (e2 + 1) * (f + 1) ** 2),
                    multiplyRoots(sixJ(a, b, e, c, d, f), sixJ(a, b, e2, c, d, f)),
                  ),
                );
                expect(formatRoot(sumOfRoots(terms))).toBe(e === e2 ? "1" : "0");
              }
  });

  test("are the overlaps of two orders of coupling three spins", () => {
    for (const [a, b, c, d] of [
      [1, 2, 1, 2],
      [2, 2, 2, 2],
      [3, 1, 2, 2],
    ] as const) {
      for (const e of wide.filter((x) => isTriad(a, b, x) && isTriad(x, c, d))) {
        for (const f of wide.filter((x) => isTriad(b, c, x) && isTriad(a, x, d))) {
          const terms = [];
          for (let ma = -a; ma <= a; ma += 2) {
            for (let mb = -b; mb <= b; mb += 2) {
              const mc = d - ma - mb;
              if (Math.abs(mc) > c || Math.abs(ma + mb) > e || Math.abs(mb + mc) > f) continue;
              const left = multiplyRoots(
                clebschGordan(a, ma, b, mb, e, ma + mb),
                clebschGordan(e, ma + mb, c, mc, d, d),
              );
              const right = multiplyRoots(
                clebschGordan(b, mb, c, mc, f, mb + mc),
                clebschGordan(a, ma, f, mb + mc, d, d),
              );
              terms.push(multiplyRoots(left, right));
            }
          }
          const sign = ((a + b + c + d) / 2) % 2 === 0 ? 1 : -1;
          const expected = multiplyRoots(signedRoot(sign, (e + 1) * (f + 1)), sixJ(a, b, e, c, d, f));
          expect(sumOfRoots(terms)).toEqual(expected);
        }
      }
    }
  });

  test("obey Racah's sum rule: sum over f of (-1)^(e+f+g) (2f+1) {a b e; c d f} {a c g; b d f} = {a b e; d c g}", () => {
    let checked = 0;
    for (const a of spins)
      for (const b of spins)
        for (const c of spins)
          for (const d of spins)
            for (const e of wide.filter((x) => isTriad(a, b, x) && isTriad(c, d, x)))
              for (const g of wide.filter((x) => isTriad(a, c, x) && isTriad(b, d, x))) {
                const terms = wide
                  .filter((f) => isTriad(a, d, f) && isTriad(b, c, f))
                  .map((f) => {
                    const pair = multiplyRoots(sixJ(a, b, e, c, d, f), sixJ(a, c, g, b, d, f));
                    const weight = signedRoot(((e + f + g) / 2) % 2 === 0 ? 1 : -1, (f + 1) ** 2);
                    return multiplyRoots(weight, pair);
                  });
                expect(sumOfRoots(terms)).toEqual(sixJ(a, b, e, d, c, g));
                checked++;
              }
    expect(checked).toBeGreaterThan(500);
  });

  test("do not change when columns change places, or two columns are turned over", () => {
    const value = formatRoot(sixJ(3, 2, 3, 2, 3, 4));
    expect(value).not.toBe("0");
    const others = [
      sixJ(2, 3, 3, 3, 2, 4),
      sixJ(3, 3, 2, 2, 4, 3),
      sixJ(2, 2, 4, 3, 3, 3),
      sixJ(3, 3, 4, 2, 2, 3),
    ];
    expect(others.map(formatRoot)).toEqual([value, value, value, value]);
  });

  test("vanish outside the triangles, and refuse what is no spin", () => {
    expect(formatRoot(sixJ(2, 2, 6, 2, 2, 2))).toBe("0");
    expect(formatRoot(sixJ(1, 1, 1, 1, 1, 1))).toBe("0");
    expect(() => sixJ(2, 2, 2, 2, -2, 2)).toThrow(
      new InputError("sixJ: twoJ5: expected an integer >= 0, got -2. Spins are given doubled."),
    );
  });
});
