import { describe, expect, test } from "vitest";
import { catalogueParticles } from "../../src/hadrons/catalogue.js";
import { catalogueMultiplet, catalogueMultipletIds } from "../../src/hadrons/catalogue-multiplet.js";
import { lightParticleNames } from "../../src/hadrons/light-particles.js";
import { NAME_PATTERN, nameProblem } from "../../src/study/names.js";
import { draftStudy } from "../../src/study/read-study.js";

const WRONG: [string, string][] = [
  ["", 'expected a name, got ""'],
  ["Xi (1874)", 'expected a name without blanks, got "Xi (1874)". Write `Xi(1874)`'],
  ["Xi(1874) ", 'expected a name without blanks, got "Xi(1874) ". Write `Xi(1874)`'],
  [" ", 'expected a name without blanks, got " ". Give it one'],
  ["Xi\u00a0(1874)", 'expected a name without blanks, got "Xi\u00a0(1874)". Write `Xi(1874)`'],
  ["Xi\u0007", 'expected a name without control characters, got "Xi\\u0007". Write `Xi`'],
  ["Xi\u200b", 'expected a name without control characters, got "Xi\u200b". Write `Xi`'],
  [
    "N->pi",
    'expected a name without `->`, got "N->pi". Leave it out: channels and lists have it between names',
  ],
  ["N,pi", 'expected a name without `,`, got "N,pi". Leave it out: channels and lists have it between names'],
  ["L=1", 'expected a name without `=`, got "L=1". Leave it out: channels and lists have it between names'],
  ["*'", 'expected a name with a letter or a digit, got "*\'". Write one such as `Xi(1874)`'],
  ["__proto__", 'expected a name that JavaScript has not taken, got "__proto__". Choose another'],
  ["constructor", 'expected a name that JavaScript has not taken, got "constructor". Choose another'],
  [
    "\u039d(1675)",
    'expected a name of Latin letters, digits and signs, got "\u039d(1675)": "\u039d" (U+039D) is not Latin. Write it out, such as `Xi` or `N`',
  ],
  [
    "N(1675)\u2217",
    'expected a name of Latin letters, digits and signs, got "N(1675)\u2217": "\u2217" (U+2217) is not of ASCII. Write it out, such as `Xi` or `N`',
  ],
];

describe("the name of a hadron", () => {
  test.each(WRONG)("cannot be %j", (name, problem) => {
    expect(nameProblem(name)).toBe(problem);
  });

  test("can be any that the catalogue has", () => {
    const members = catalogueMultipletIds().flatMap((id) => catalogueMultiplet(id).members);
    const names = [...members, ...catalogueParticles()].map(({ name }) => name);
    for (const name of [...names, ...lightParticleNames()]) expect(nameProblem(name)).toBeUndefined();
    for (const id of catalogueMultipletIds()) expect(nameProblem(id)).toBeUndefined();
  });

  test("is to editors what it is to the checks, but for names of JavaScript", () => {
    const pattern = new RegExp(NAME_PATTERN, "u");
    for (const [name] of WRONG) expect(pattern.test(name), name).toBe(/^(__proto__|constructor)$/.test(name));
    for (const { name } of catalogueParticles()) expect(pattern.test(name), name).toBe(true);
    for (let code = 0; code < 0x2100; code++) {
      const name = `X${String.fromCodePoint(code)}1`;
      expect(pattern.test(name), JSON.stringify(name)).toBe(nameProblem(name) === undefined);
    }
  });
});

describe("a study with a name that cannot be says where", () => {
  const study = (id: string, name: string, particle = "X") => `couplet: 1
title: names
multiplets:
  ${id}:
    irrep: 8
    spinParity: 5/2-
    members: [{ name: ${name}, place: N, mass: 1700 MeV, width: 100 MeV }]
mixing:
  - bare: [a/N, b/N]
    states: [{ name: N(1), mass: 1700 MeV, width: sum }, { name: "${name}", mass: 1700 MeV, width: sum }]
    angle: free
decays:
  - { from: baryon-decuplet, to: [baryon-octet, pseudoscalar-octet], L: 1, model: a }
measurements:
  - { width: Delta(1232) -> N pi, value: 117 +- 3 MeV, source: invented }
particles:
  - { name: "${particle}", mass: 0 MeV, charge: 0, spinParity: 1- }
`;
  const said = (text: string) =>
    draftStudy(Buffer.from(text), "s.yaml").problems.map(
      ({ position: { line, column }, path, text: words }) => `${line}:${column} ${path}: ${words}`,
    );

  test("of a member and of a mixed state", () => {
    const words = 'expected a name without blanks, got "Xi (1874)". Write `Xi(1874)`.';
    expect(said(study("mine", "Xi (1874)"))).toEqual([
      `7:23 multiplets/mine/members/0/name: ${words}`,
      `10:66 mixing/0/states/1/name: ${words}`,
    ]);
  });

  test("of a particle", () => {
    expect(said(study("mine", "N(2)", "X,1"))).toEqual([
      '17:13 particles/0/name: expected a name without `,`, got "X,1". Leave it out: channels and lists have it between names.',
    ]);
  });

  test.each([
    ["__proto__", 'expected a name that JavaScript has not taken, got "__proto__". Choose another.'],
    ["constructor", 'expected a name that JavaScript has not taken, got "constructor". Choose another.'],
    ["my octet", 'expected a name without blanks, got "my octet". Write `myoctet`.'],
  ])("of the multiplet %s", (id, words) => {
    expect(said(study(id, "N(2)"))).toEqual([`4:3 multiplets/${id}: ${words}`]);
  });

  test("and `__proto__` is refused wherever it is a key", () => {
    const text = study("mine", "N(2)").replace(
      "particles:",
      "normalisations: { __proto__: 5 % }\nparticles:",
    );
    expect(said(text)).toEqual([
      '16:19 normalisations/__proto__: expected a name that JavaScript has not taken, got "__proto__". Choose another.',
    ]);
  });
});
