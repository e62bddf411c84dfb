import { describe, expect, test } from "vitest";
import { COLOURS, FLAVOURS, superpositionText } from "../../src/cli/content.js";
import { productContent } from "../../src/su3/content.js";
import { parseIrrep } from "../../src/su3/irrep.js";

function texts(factors: string, into: string, letters = FLAVOURS): string[] {
  const irreps = factors.split(" ").map(parseIrrep);
  const [first] = productContent(irreps, parseIrrep(into));
  return first!.states.map((state) => superpositionText(state, irreps, letters));
}

describe("superpositions in words", () => {
  test("the common root and the sign of the state stand in front", () => {
    expect(texts("3 3", "3bar")).toEqual([
      "-sqrt(1/2) (ud - du)",
      "sqrt(1/2) (us - su)",
      "sqrt(1/2) (ds - sd)",
    ]);
    expect(texts("3 3bar", "8").slice(2, 6)).toEqual([
      "u dbar",
      "-sqrt(1/2) (u ubar - d dbar)",
      "-d ubar",
      "-sqrt(1/6) (u ubar + d dbar - 2 s sbar)",
    ]);
  });

  test("colours have their own letters", () => {
    expect(texts("3 3 3", "1", COLOURS)).toEqual(["-sqrt(1/6) (rgb - rbg - grb + gbr + brg - bgr)"]);
    expect(texts("3 3bar", "1", COLOURS)).toEqual(["-sqrt(1/3) (r rbar + g gbar + b bbar)"]);
  });
});
