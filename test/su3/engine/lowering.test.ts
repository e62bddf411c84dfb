import { describe, expect, test } from "vitest";
import { InternalError } from "../../../src/errors.js";
import { productBlocks } from "../../../src/su3/engine/blocks.js";
import { leadingCopies } from "../../../src/su3/engine/copies.js";
import { exactInteger } from "../../../src/su3/engine/finished.js";
import { leadingMultiplet } from "../../../src/su3/engine/leading.js";
import { type Links, productLinks } from "../../../src/su3/engine/links.js";
import { irrepLayout, loweredCopy } from "../../../src/su3/engine/lowering.js";
import { patternNumber } from "../../../src/su3/engine/patterns.js";
import { solveProduct } from "../../../src/su3/engine/solution.js";
import { stepBig } from "../../../src/su3/engine/steps.js";
import type { Irrep } from "../../../src/su3/irrep.js";
import { decomposeProduct } from "../../../src/su3/product.js";

const PRODUCTS: [Irrep, Irrep][] = [
  [
    { p: 3, q: 2 },
    { p: 2, q: 2 },
  ],
  [
    { p: 4, q: 1 },
    { p: 1, q: 3 },
  ],
  [
    { p: 5, q: 0 },
    { p: 0, q: 4 },
  ],
];

function octetInOctets() {
  const octet = { p: 1, q: 1 };
  const product = productBlocks(octet, octet);
  const [leading] = leadingCopies(product, leadingMultiplet(product, octet, 2));
  return {
    octet,
    product,
    links: productLinks(product),
    layout: irrepLayout(product, octet),
    leading: leading!,
  };
}

describe("the recursion", () => {
  test("reaches every multiplet alike by its own path and by a T-step from the one before", () => {
    let steps = 0;
    for (const [left, right] of PRODUCTS) {
      const { product, copies } = solveProduct(left, right, decomposeProduct(left, right));
      const links = productLinks(product);
      for (const lowered of copies) {
        const { patterns, blocks } = lowered.layout;
        const vector = (m: number) =>
          Array.from({ length: blocks[m]!.size }, (_, c) => exactInteger(lowered, m, c));
        for (let m = 0; m < blocks.length; m++) {
          const [k, l] = [patterns.k[m]!, patterns.l[m]!];
          const to = patternNumber(patterns, k, l + 1);
          if (to < 0 || k === l) continue;
          const link = links.from(blocks[m]!, "T")!;
          expect(stepBig(link, [...vector(m), 0n]).big.slice(0, -1)).toEqual(vector(to));
          steps++;
        }
      }
    }
    expect(steps).toBeGreaterThan(300);
  });

  test("is refused where a step below the lowest multiplet does not vanish", () => {
    const { octet, product, links, layout, leading } = octetInOctets();
    loweredCopy(product, links, layout, leading, 1);
    const wrong = { ...leading, y: leading.y.map((value, c) => (c === 1 ? value + 1n : value)) };
    expect(() => loweredCopy(product, links, layout, wrong, 1)).toThrow(
      new InternalError(
        `loweredCopy: a step below the lowest multiplet of (${octet.p},${octet.q}) does not vanish. This is a bug in Couplet; please report it with the command you ran.`,
      ),
    );
  });

  test("is refused where another path gives other factors", () => {
    const { product, links, layout, leading } = octetInOctets();
    const lowest = layout.blocks[patternNumber(layout.patterns, layout.irrep.q, 0)]!;
    const wrong: Links = {
      from: (source, step) => {
        const link = links.from(source, step);
        if (link === undefined || source !== lowest || step !== "T") return link;
        return { ...link, coefficients: link.coefficients.map((value, i) => (i % 4 < 2 ? -value : value)) };
      },
    };
    expect(() => loweredCopy(product, wrong, layout, leading, 1)).toThrow(
      new InternalError(
        "loweredCopy: two paths to the multiplet 1 of (1,1) give different factors. This is a bug in Couplet; please report it with the command you ran.",
      ),
    );
  });

  test("tells how far it has come, in factors, and ends with all of them", () => {
    const [left, right] = PRODUCTS[0]!;
    const told: [number, number][] = [];
    const { count, copies } = solveProduct(left, right, decomposeProduct(left, right), (done, total) =>
      told.push([done, total]),
    );
    expect(told.length).toBe(copies.length);
    expect(told.at(-1)).toEqual([count, count]);
    expect(told.every(([done], i) => i === 0 || done > told[i - 1]![0])).toBe(true);
  });
});
