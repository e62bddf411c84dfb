import { describe, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import type { Model } from "../../src/model/model.js";
import { resolveStudy } from "../../src/model/resolve-study.js";
import { readStudy } from "../../src/study/read-study.js";
import { studyText } from "../chain/run.js";

const OCTET = studyText("octet-5-2");

const resolve = (text: string): Model => resolveStudy(readStudy(Buffer.from(text), "s.yaml"));

/** What is said of a study, as lines. */
function refusal(text: string): string[] {
  try {
    resolve(text);
  } catch (error) {
    if (error instanceof InputError) return error.message.split("\n");
    throw error;
  }
  throw new Error("the study was not refused");
}

/** A study of one member, which decays to the ground states. */
const alone = (spinParity: string, member: string) => `couplet: 1
title: one member
multiplets:
  mine:
    irrep: 8
    spinParity: ${spinParity}
    members:
      - { ${member} }
decays:
  - { from: baryon-decuplet, to: [baryon-octet, pseudoscalar-octet], L: 1, model: a }
measurements:
  - { width: Delta(1232) -> N pi, value: 117 +- 3 MeV, source: invented }
`;

const AT = "s.yaml:8:9: multiplets/mine/members/0: ";

describe("the name of a particle of the catalogue is that particle's", () => {
  test("a resonance named like a ground state does not take its number", () => {
    expect(refusal(OCTET.replaceAll("Lambda(1830)", "Lambda"))[0]).toBe(
      's.yaml:11:9: multiplets/octet/members/2: Lambda: expected a name that is not taken, or spin-parity 1/2+ as the catalogue has for Lambda, got "5/2-". Give the resonance its mass in the name, e.g. Lambda(1825).',
    );
  });

  test("nor does the wrong spin go with a published number", () => {
    expect(
      refusal(alone("3/2-", "name: Lambda(1830), place: Lambda, mass: 1825 MeV, width: 90 MeV")),
    ).toEqual([
      `${AT}Lambda(1830): expected a name that is not taken, or spin-parity 5/2- as the catalogue has for Lambda(1830), got "3/2-". Correct it, or give the resonance another name.`,
    ]);
  });

  test.each([
    [
      "1/2+",
      "name: Lambda, place: Sigma, mass: 1116 MeV, width: 1 MeV",
      'Lambda: expected a name that is not taken, or the place Y=0 I=0 as the catalogue has for Lambda, got "Y=0 I=1". Give the resonance its mass in the name, e.g. Lambda(1116).',
    ],
    [
      "1/2+",
      "name: Sigma, place: Lambda, mass: 1193 MeV, width: 1 MeV",
      'Sigma: expected a name that is not taken, or the place Y=0 I=1 as the catalogue has for Sigma, got "Y=0 I=0". Give the resonance its mass in the name, e.g. Sigma(1193).',
    ],
    [
      "1/2+",
      "name: Lambda, place: Lambda, mass: 1600 MeV, width: 200 MeV",
      'Lambda: expected a name that is not taken, or a mass near 1116 MeV as the catalogue has for Lambda, got "1600 MeV". Give the resonance its mass in the name, e.g. Lambda(1600).',
    ],
    [
      "1--",
      "name: rho, place: pi, mass: 1465 MeV, width: 400 MeV",
      'rho: expected a name that is not taken, or a mass near 775 MeV as the catalogue has for rho, got "1465 MeV". Give the resonance its mass in the name, e.g. rho(1465).',
    ],
    [
      "1/2+",
      "name: Sigma+, place: Lambda, mass: 1189 MeV, width: 1 MeV",
      'Sigma+: expected a name that is not taken, got "Sigma+, one charge state of the catalogue". A member is a whole isospin multiplet; the names of its charge states follow from its own.',
    ],
    [
      "1/2+",
      "name: gamma, place: Lambda, mass: 1189 MeV, width: 1 MeV",
      'gamma: expected a name that is not taken, got "gamma, no hadron". Choose another name.',
    ],
    [
      "1/2-",
      "name: D_s, place: Lambda, mass: 1968 MeV, width: 1 MeV",
      'D_s: expected a name that is not taken, or baryon number 0 as the catalogue has for D_s, got "1". Give the resonance its mass in the name, e.g. D_s(1968).',
    ],
  ])("%s { %s } is refused", (spinParity, member, words) => {
    expect(refusal(alone(spinParity, member))).toEqual([`${AT}${words}`]);
  });

  test("a mixed state may not have it either", () => {
    const text = alone("3/2-", "name: N(1705), place: N, mass: 1705 MeV, width: sum").replace(
      "decays:",
      `  other: { irrep: 1, spinParity: 3/2-, members: [] }
mixing:
  - bare: [mine/Lambda, other/Lambda]
    states: [{ name: Lambda(1670), mass: 1670 MeV, width: sum }, { name: L2, mass: 1690 MeV, width: sum }]
    angle: free
decays:`,
    );
    expect(refusal(text)).toEqual([
      's.yaml:11:5: mixing/0: Lambda(1670): expected a name that is not taken, or spin-parity 1/2- as the catalogue has for Lambda(1670), got "3/2-". Correct it, or give the resonance another name.',
    ]);
  });

  test.each([
    ["3/2+", "name: Sigma(1385), place: Sigma, mass: 1390 MeV, width: 40 MeV"],
    ["1/2+", "name: Lambda, place: Lambda, mass: 1115 MeV, width: sum"],
    // The mass of a broad state depends on its definition; its pole is 80 MeV lower.
    ["1/2+", "name: N(1440), place: N, mass: 1360 MeV, width: 180 MeV"],
    // Spin and parity are not known.
    ["5/2-", "name: Xi(2030), place: Xi, mass: 2025 MeV, width: 20 MeV"],
    ["7/2-", "name: Lambda(1116), place: Lambda, mass: 1116 MeV, width: 20 MeV"],
  ])("%s { %s } may be listed", (spinParity, member) => {
    expect(() => resolve(alone(spinParity, member))).not.toThrow();
  });

  test("a ground state as a member of one's own keeps its number and has its own mass", () => {
    const text = alone("1/2+", "name: Lambda, place: Lambda, mass: 1110 MeV, width: sum")
      .replace("to: [baryon-octet", "to: [mine")
      .replaceAll("Delta(1232) -> N pi", "Sigma(1385) -> Lambda pi");
    const [lambda] = resolve(text).decays[0]!.to[0].members[0]!.hadrons;
    expect([lambda!.mcNumber, lambda!.massMeV]).toEqual([3122, 1110]);
  });
});

describe("two hadrons of one study", () => {
  const member = (name: string, place: string) =>
    `{ name: ${name}, place: ${place}, mass: 1900 MeV, width: sum }`;
  const two = (first: string, second: string) =>
    alone("3/2-", "name: X(1), place: Lambda, mass: 1900 MeV, width: sum").replace(
      "      - { name: X(1), place: Lambda, mass: 1900 MeV, width: sum }",
      `      - ${first}\n      - ${second}`,
    );

  test("have two names", () => {
    expect(refusal(two(member("X(2)", "N"), member("X(2)", "Xi")))).toEqual([
      "s.yaml:9:9: multiplets/mine/members/1: X(2): expected a name that no other hadron of this study has, got that of line 8. Give one of the two another.",
    ]);
  });

  test("have two places: the second says which is taken, where it stands", () => {
    expect(refusal(two(member("X(2)", "Lambda"), member("X(3)", "Y=0 I=0")))).toEqual([
      's.yaml:9:9: multiplets/mine/members/1: X(3): expected a place that X(2) has not taken, got "Y=0 I=0". An irrep has one isospin multiplet at each place.',
    ]);
  });
});

describe("masses and widths that cannot be", () => {
  test.each([
    [
      "mass: 1577 +- 6 GeV, width: 120 MeV",
      's.yaml:8:42: multiplets/mine/members/0/mass: expected a mass below 20 GeV, got "1577 +- 6 GeV". Check whether its unit is MeV.',
    ],
    [
      "mass: 1.577 MeV, width: 120 MeV",
      's.yaml:8:42: multiplets/mine/members/0/mass: expected a mass above 100 MeV, got "1.577 MeV". Check whether its unit is GeV.',
    ],
    [
      "mass: 1577 MeV, width: 120 GeV",
      's.yaml:8:59: multiplets/mine/members/0/width: expected a width below 20 GeV, got "120 GeV". Check whether its unit is MeV.',
    ],
    [
      "mass: 1577 MeV, width: 3.7 GeV",
      "s.yaml:8:59: multiplets/mine/members/0/width: expected a width below twice the mass of X(1577)+, 1577 MeV, got 3700 MeV. Check the units of both.",
    ],
    [
      "mass: 1577 MeV, width: sum, chargeStates: { X(1577)0: { width: 4 GeV } }",
      "s.yaml:8:99: multiplets/mine/members/0/chargeStates/X(1577)0/width: expected a width below twice the mass of X(1577)0, 1577 MeV, got 4000 MeV. Check the units of both.",
    ],
  ])("%s", (values, words) => {
    expect(refusal(alone("3/2-", `name: X(1577), place: N, ${values}`))).toEqual([words]);
  });

  test("a mass that the relation puts below 0 says so at its member", () => {
    const text = alone("3/2-", "name: X(1), place: N, mass: 1900 MeV, width: sum").replace(
      "decays:",
      `      - { name: X(2), place: Lambda, mass: 500 MeV, width: sum }
      - { name: X(3), place: Sigma, mass: 500 MeV, width: sum }
      - { name: X(4), place: Xi, mass: relation, width: sum }
decays:`,
    );
    expect(refusal(text)).toEqual([
      expect.stringMatching(
        /^s\.yaml:11:9: multiplets\/mine\/members\/3: mass of X\(4\) by the relation: expected a finite number > 0, got -(900|899\.9\d*)\. Check the masses of the other members\.$/,
      ),
    ]);
  });
});
