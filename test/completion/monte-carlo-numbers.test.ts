import { describe, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { decodeDecays } from "../../src/tables/decode-decays.js";
import { encodeDecays } from "../../src/tables/encode-decays.js";
import { octetStudy, tablesOf } from "./whole-study.js";

function octetWith(chargeState: string, more = ""): string {
  const plain = octetStudy(more);
  return plain.replace(
    "width: 120 +- 10 MeV }",
    `width: 120 +- 10 MeV, chargeStates: { Sigma(1775)+: ${chargeState} } }`,
  );
}

function hadrons(text: string) {
  const { parents, externals } = decodeDecays(encodeDecays(tablesOf(text)), "octet.decays.pb");
  return new Map(
    [...parents.map(({ hadron }) => hadron!), ...externals].map((hadron) => [hadron.name, hadron]),
  );
}

describe("Monte Carlo numbers of a table", () => {
  test("are the catalogue's, with the aliases a study gives beside them", () => {
    const found = hadrons(octetWith("{ mcAliases: [103226, 9900001] }")).get("Sigma(1775)+")!;
    expect(found).toMatchObject({ mcNumber: 3226, mcAliases: [103226, 9900001] });
  });

  test("an antiparticle has the opposite numbers and aliases", () => {
    const found = hadrons(octetWith("{ mcAliases: [103226] }", "tables: { antiparticles: rows }"));
    expect(found.get("Sigma(1775)+bar")).toMatchObject({ mcNumber: -3226, mcAliases: [-103226] });
  });

  test("the study's own number stands before the catalogue's, which is then an alias no more", () => {
    expect(hadrons(octetWith("{ mcNumber: 103226 }")).get("Sigma(1775)+")).toMatchObject({
      mcNumber: 103226,
      mcAliases: [],
    });
  });

  test.each([
    ["{ mcNumber: 2216 }", 2216],
    ["{ mcAliases: [2216] }", 2216],
  ])("%s, the number of N(1675)+, is refused", (chargeState, number) => {
    const attempt = () =>
      tablesOf(
        octetWith(
          chargeState,
          'modes:\n  - { mode: "N(1675)+ -> p gamma", fraction: 0.01, source: invented }\n',
        ),
      );
    expect(attempt).toThrow(InputError);
    expect(attempt).toThrow(
      `Sigma(1775)+: Monte Carlo number ${number}: expected a number of its own, got "the number of N(1675)+". Give one of the two another.`,
    );
  });
});
