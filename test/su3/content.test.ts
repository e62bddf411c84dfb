import { describe, expect, test } from "vitest";
import { LimitError } from "../../src/errors.js";
import { addRoots } from "../../src/exact/root-sum.js";
import {
  equalRoots,
  formatRoot,
  multiplyRoots,
  negateRoot,
  parseRoot,
  type SignedRoot,
} from "../../src/exact/signed-root.js";
import waveFunctions from "../../src/published/close-1979-quark-wave-functions.json";
import { publishedIsoscalarTables } from "../../src/published/isoscalar-tables.js";
import { type PathContent, productContent, type StateContent } from "../../src/su3/content.js";
import { irrepName, parseIrrep, sameIrrep } from "../../src/su3/irrep.js";

const content = (factors: string, into?: string): PathContent[] =>
  productContent(factors.split(" ").map(parseIrrep), into === undefined ? undefined : parseIrrep(into));

/** Terms as text, `{ ud: "sqrt(1/2)" }`, with an antiquark's letter in capitals. */
function lettered({ terms }: StateContent, factors: string): Record<string, string> {
  const irreps = factors.split(" ");
  return Object.fromEntries(
    terms.map(({ quarks, value }) => [
      quarks.map((index, k) => (irreps[k] === "3" ? "uds" : "UDS").charAt(index)).join(""),
      formatRoot(value),
    ]),
  );
}

function scalarProduct(a: StateContent, b: StateContent): string {
  const roots = a.terms.flatMap(({ quarks, value }) =>
    b.terms
      .filter((term) => term.quarks.join() === quarks.join())
      .map((term) => multiplyRoots(value, term.value)),
  );
  return addRoots(roots).map(formatRoot).join(" + ");
}

describe("content of states in quarks", () => {
  test("the octet mesons are u sbar, d sbar; u dbar, (d dbar - u ubar)/sqrt2, -d ubar; ...", () => {
    // J. J. de Swart, Rev. Mod. Phys. 35 (1963) 916: V-spin and isospin positive; provenance: memory.
    const [octet] = content("3 3bar", "8");
    expect(octet!.states.map((state) => lettered(state, "3 3bar"))).toEqual([
      { uS: "1" },
      { dS: "1" },
      { uD: "1" },
      { uU: "-sqrt(1/2)", dD: "sqrt(1/2)" },
      { dU: "-1" },
      { uU: "-sqrt(1/6)", dD: "-sqrt(1/6)", sS: "sqrt(2/3)" },
      { sD: "1" },
      { sU: "-1" },
    ]);
  });

  test.each(waveFunctions.rows)("$name by the $by is the textbook's, up to the sign of the state", (row) => {
    const found = content("3 3 3", row.irrep)
      .find(({ path }) => irrepName(path.path[0]!.irrep) === row.by)!
      .states.find(
        ({ state }) => state.threeY === row.threeY && state.twoI === row.twoI && state.twoI3 === row.twoI3,
      )!;
    const published = Object.entries(row.terms).filter(([, text]) => text !== undefined);
    const sign = lettered(found, "3 3 3")[published[0]![0]]!.startsWith("-") ? -1 : 1;
    const turned = found.terms.map((term) => ({
      ...term,
      value: sign !== (published[0]![1].startsWith("-") ? -1 : 1) ? negateRoot(term.value) : term.value,
    }));
    expect(lettered({ ...found, terms: turned }, "3 3 3")).toEqual(Object.fromEntries(published));
  });

  test("shares by the last constituent are the squares of the quark-model isoscalar factors", () => {
    const tables = publishedIsoscalarTables().filter(({ name }) => name.startsWith("quark-model"));
    expect(tables).toHaveLength(4);
    let compared = 0;
    for (const table of tables) {
      const isBaryon = irrepName(table.left) === "6";
      const factors = isBaryon ? "3 3 3" : "3 3bar";
      const paths = content(factors, irrepName(table.irrep)).filter(
        ({ path }) => !isBaryon || sameIrrep(path.path[0]!.irrep, table.left),
      );
      for (const { threeY, twoI, threeY2, value } of table.rows) {
        const state = paths[0]!.states.find((s) => s.state.threeY === threeY && s.state.twoI === twoI)!;
        const isStrange = Math.abs(threeY2) === 2;
        const share = state.terms
          .filter(({ quarks }) => (quarks.at(-1) === 2) === isStrange)
          .map((term) => multiplyRoots(term.value, term.value));
        const square = multiplyRoots(value, value);
        expect(addRoots(share).map(formatRoot), `${table.name}: ${state.state.threeY}`).toEqual([
          formatRoot(square),
        ]);
        compared++;
      }
    }
    expect(compared).toBe(19);
  });

  test.each(["3 3", "3bar 3", "3 3 3", "3 3bar 3", "3 3 3bar 3bar", "3 3 3 3"])(
    "the states of %s are orthonormal and as many as the products",
    (factors) => {
      const all = content(factors).flatMap(({ states }) => states);
      expect(all).toHaveLength(3 ** factors.split(" ").length);
      for (const [i, a] of all.entries()) {
        for (const b of all.slice(i)) expect(scalarProduct(a, b)).toBe(a === b ? "1" : "");
      }
    },
  );

  test("the singlet of three colours changes sign under every exchange of two of them", () => {
    const [{ states }] = content("3 3 3", "1") as [PathContent];
    const value = (...quarks: number[]): SignedRoot | undefined =>
      states[0]!.terms.find((term) => term.quarks.join() === quarks.join())?.value;
    for (const a of [0, 1, 2]) {
      for (const b of [0, 1, 2]) {
        for (const c of [0, 1, 2]) {
          const direct = value(a, b, c);
          const exchanged = [value(b, a, c), value(a, c, b), value(c, b, a)];
          if (new Set([a, b, c]).size < 3) expect(direct).toBeUndefined();
          else for (const other of exchanged) expect(equalRoots(direct!, negateRoot(other!))).toBe(true);
        }
      }
    }
    expect(formatRoot(multiplyRoots(value(0, 1, 2)!, value(0, 1, 2)!))).toBe("1/6");
  });

  test("the singlet of a quark and an antiquark has equal parts of every flavour", () => {
    const [{ states }] = content("3 3bar", "1") as [PathContent];
    expect(lettered(states[0]!, "3 3bar")).toEqual({
      uU: "-sqrt(1/3)",
      dD: "-sqrt(1/3)",
      sS: "-sqrt(1/3)",
    });
  });

  test("charge, hypercharge and isospin projection are those of the constituents", () => {
    for (const { states } of content("3 3 3bar")) {
      for (const { state, terms } of states) {
        for (const { quarks } of terms) {
          const signed = quarks.map((index, k) => ({ index, sign: k === 2 ? -1 : 1 }));
          const sum = (ofQuark: readonly number[]) =>
            signed.reduce((total, { index, sign }) => total + sign * ofQuark[index]!, 0);
          expect([sum([1, 1, -2]), sum([1, -1, 0])]).toEqual([state.threeY, state.twoI3]);
        }
      }
    }
  });

  test("other factors, other irreps and too many factors are refused", () => {
    expect(() => content("6 3")).toThrow(
      'productContent: factor: expected 3 or 3bar, a quark or an antiquark, got "6". Write other irreps as products of quarks: a 6 is in 3 3, an 8 in 3 3bar.',
    );
    expect(() => content("3 3", "8")).toThrow(
      'productContent: into: expected an irrep of the product (3bar, 6), got "8".',
    );
    expect(() => content("3 3 3 3 3 3 3 3")).toThrow(
      new LimitError("productContent: expected at most 7 factors, got 8. Write the content of fewer quarks."),
    );
  });

  test("parsed values are the published ones", () => {
    // A guard of the data: every published state is normalised.
    for (const { name, terms } of waveFunctions.rows) {
      const values = Object.values(terms).filter((text) => text !== undefined);
      const squares = values.map((text) => multiplyRoots(parseRoot(text), parseRoot(text)));
      expect(addRoots(squares).map(formatRoot), name).toEqual(["1"]);
    }
  });
});
