import { describe, expect, test } from "vitest";
import { type Operator, STRONG } from "../../src/couplings/operator.js";
import { reducedCouplings } from "../../src/couplings/reduced-coupling.js";
import { InputError } from "../../src/errors.js";
import { parseIrrep, sameIrrep } from "../../src/su3/irrep.js";
import { irrepMultiplicities } from "../../src/su3/product.js";
import { states } from "../../src/su3/state.js";
import { MASS_BREAKING, schemeOf } from "./schemes.js";

const names = (...scheme: Parameters<typeof schemeOf>) =>
  reducedCouplings(schemeOf(...scheme)).map(({ name }) => name);

describe("reduced couplings", () => {
  test("an octet has two to two octets, every other irrep of the product one", () => {
    expect(names("8", ["8", "8"])).toEqual(["g(8_1)", "g(8_2)"]);
    expect(["1", "10", "10bar", "27"].map((irrep) => names(irrep, ["8", "8"]))).toEqual([
      ["g(1)"],
      ["g(10)"],
      ["g(10bar)"],
      ["g(27)"],
    ]);
  });

  test("of three finals are told apart by the irreps they pass", () => {
    expect(names("10", ["8", "8", "8"])).toEqual(["g(8_1, 10)", "g(8_2, 10)", "g(10, 10)", "g(27, 10)"]);
    expect(names("8", ["3", "3", "3"])).toEqual(["g(6, 8)", "g(3bar, 8)"].sort());
  });

  test("their number is the multiplicity of the initial irrep in the product of the finals", () => {
    const cases: [string, string[]][] = [
      ["27", ["8", "8"]],
      ["35", ["10", "8"]],
      ["27", ["27", "8"]],
      ["64", ["27", "10"]],
      ["3bar", ["3bar", "8"]],
      ["15bar(1,2)", ["6", "8", "8"]],
      ["8", ["8", "8", "8"]],
    ];
    for (const [from, to] of cases) {
      const series = irrepMultiplicities(to.map(parseIrrep));
      const expected = series.find(({ irrep }) => sameIrrep(irrep, parseIrrep(from)))!.multiplicity;
      expect([from, to, names(from, to).length]).toEqual([from, to, expected]);
    }
  });

  test.each([
    ["8", ["8", "8"], 8],
    ["10", ["8", "8"], 4],
    ["10bar", ["8", "8"], 4],
    ["27", ["8", "8"], 6],
    ["1", ["8", "8"], 2],
    ["8", ["10", "8"], 4],
    ["10", ["10", "8"], 4],
  ])("first-order mass breaking adds to %s -> %j %i couplings", (from, to, count) => {
    expect(names(from, to, MASS_BREAKING)).toHaveLength(count);
  });

  // Charmed antitriplets by the operators 15, (2,1), and 6bar of a Cabibbo-allowed decay; counted with characters, the first line as
  // in C. Quigg, Z. Phys. C 4 (1980) 55 (from memory). Two equal octets keep the copies that are even under exchange.
  test.each([
    ["two equal octets", ["8", "8"], /(8_1|27|^1)\)$/, [2, 1]],
    ["two octets", ["8", "8"], /./, [4, 3]],
    ["an octet and a singlet", ["8", "1"], /./, [1, 1]],
    ["a decuplet and an octet", ["10", "8"], /./, [3, 1]],
  ] as const)("of a charmed antitriplet to %s there are so many by 15 and 6bar", (_, to, kept, counts) => {
    const operator = (irrep: string): Operator => ({
      name: irrep,
      parts: states(parseIrrep(irrep)).map((state) => ({ state, weight: 1 })),
      complex: true,
    });
    const found = ["2,1", "6bar"].map(
      (irrep) => names("3bar", to, operator(irrep)).filter((name) => kept.test(name)).length,
    );
    expect(found).toEqual(counts);
  });

  test("of another operator say where the initial state goes first", () => {
    expect(names("8", ["8", "8"], MASS_BREAKING)).toEqual([
      "h(1; 1)",
      "h(8_1; 8_1)",
      "h(8_1; 8_2)",
      "h(8_2; 8_1)",
      "h(8_2; 8_2)",
      "h(10; 10)",
      "h(10bar; 10bar)",
      "h(27; 27)",
    ]);
  });

  test("carry what identifies them, and a prefix where one is wanted", () => {
    const [first] = reducedCouplings(schemeOf("10", ["8", "8"]), "ground");
    expect(first).toEqual({
      name: "ground.g(10)",
      from: "10",
      operator: "strong",
      operatorIrrep: { p: 0, q: 0 },
      to: ["8", "8"],
      entry: { irrep: { p: 3, q: 0 }, copy: 1 },
      path: [{ irrep: { p: 3, q: 0 }, copy: 1 }],
      twoS: 1,
      L: 1,
      complex: false,
    });
  });

  test("a decay SU(3) forbids is refused with what the finals contain", () => {
    expect(() => reducedCouplings(schemeOf("1", ["10", "8"]))).toThrow(
      new InputError(
        "reducedCouplings: 1 by the operator strong: expected a product of flavours that meets " +
          '10 x 8 = 8, 10, 27, 35, got "1". SU(3) forbids this decay; check the irreps of the multiplets.',
      ),
    );
    expect(() => reducedCouplings({ ...schemeOf("8", ["8"]), operator: STRONG })).toThrow(
      new InputError('reducedCouplings: to: expected two multiplets or more, got ["8"].'),
    );
  });
});
