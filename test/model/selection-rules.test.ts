import { expect, test } from "vitest";
import { Evaluation, evaluator } from "../../src/model/evaluate.js";
import { resolveStudy } from "../../src/model/resolve-study.js";
import { readStudy } from "../../src/study/read-study.js";

const modelOf = (lines: string) => {
  const text = `couplet: 1\ntitle: Selection rules\n${lines}`;
  return resolveStudy(readStudy(Buffer.from(text), "study.yaml"));
};
const couplingsOf = (from: string, spinParity: string, to: string, wave: string, parent = "X") =>
  modelOf(`multiplets:
  x: { irrep: 8, spinParity: ${spinParity}, members: [{ name: X, place: rho, mass: 1700 MeV, width: sum }, { name: Y, place: eta, mass: 1700 MeV, width: sum }] }
decays: [{ from: ${from}, to: ${to}, ${wave}, model: a }]
measurements: [{ total: ${parent}, value: 1 +- 1 MeV, source: test }]
`).parameters.map(({ name }) => name);
// Members of a study have the C parity of their multiplet; catalogue members their own.
const PP = "[pseudoscalar-octet, pseudoscalar-octet]";
const VP = "[vector-octet, pseudoscalar-octet]";

test("V -> PP is of F type, T -> PP and S -> PP of D type", () => {
  expect(couplingsOf("vector-octet", "1--", PP, "L: 1", "rho(770)")).toEqual(["g(8_2)"]);
  expect(couplingsOf("tensor-octet", "2++", PP, "L: 2", "a2(1320)")).toEqual(["g(8_1)"]);
  expect(couplingsOf("x", "0++", PP, "L: 0")).toEqual(["g(8_1)"]);
});

test("V -> VP and b1-like 1+- -> VP are of D type, a1-like 1++ -> VP of F type", () => {
  expect(couplingsOf("x", "1--", VP, "L: 1")).toEqual(["g(8_1)"]);
  expect(couplingsOf("x", "1+-", VP, "L: 0")).toEqual(["g(8_1)"]);
  expect(couplingsOf("x", "1++", VP, "L: 0")).toEqual(["g(8_2)"]);
});

test("two members of one multiplet cannot be in a wave that exchange forbids", () => {
  const text = `multiplets:
  s: { irrep: 1, spinParity: 1--, members: [{ name: S, place: eta, mass: 1500 MeV, width: sum }] }
decays: [{ from: s, to: ${PP}, L: 1, model: a }]
measurements: [{ width: S -> pi pi, value: 1 +- 1 MeV, source: test }]
`;
  expect(() => modelOf(text)).toThrow(
    "decays/0: L: expected a wave that two members of one multiplet can be in, got 1. Exchange of the two daughters forbids every coupling here.",
  );
});

test("the quark-line rule for the baryon octet is S = F - D: g_NNeta1 = sqrt2 g_NNeta8", () => {
  const model = modelOf(`multiplets:
  n: { irrep: 8, spinParity: 1/2+, members: [{ name: R, place: N, mass: 3000 MeV, width: sum }] }
mixing:
  - bare: [pseudoscalar-octet/eta, pseudoscalar-singlet/eta]
    states: [{ name: eta }, { name: eta'(958) }]
    angle: 0 deg
decays:
  - { name: o, from: n, to: [baryon-octet, pseudoscalar-octet], L: 1, model: a }
  - { name: s, from: n, to: [baryon-octet, pseudoscalar-singlet], L: 1, model: a }
quarkLine: [[o, s]]
measurements:
  - { width: R -> N pi, value: 100 +- 10 MeV, source: test }
  - { width: R -> Sigma K, value: 30 +- 10 MeV, source: test }
`);
  expect(model.parameters.map(({ name }) => name)).toEqual(["o.g(8_1)", "o.g(8_2)"]);
  // D = 0.6, F = 0.4: g_NNeta8 = (3F - D)/sqrt3 = 0.3464/sqrt2 = 0.244949, g_NNeta1 = 0.346410 (derived).
  const evaluation = new Evaluation(evaluator(model), [0.6 * Math.sqrt(20 / 3), 0.4 * Math.sqrt(12)]);
  const amplitude = (id: string) => {
    const index = model.channels.findIndex((channel) => channel.id === id);
    return evaluation.amplitude(index, 0).value;
  };
  const unit = Math.abs(amplitude("R+ -> p pi0"));
  expect(Math.abs(amplitude("R+ -> p eta")) / unit).toBeCloseTo(0.2449489742783179 * Math.SQRT2, 9);
  expect(Math.abs(amplitude("R+ -> p eta'(958)")) / unit).toBeCloseTo(0.34641016151377535 * Math.SQRT2, 9);
});

test.each([
  ["1--", "L: 1"],
  ["1+-", "L: 0"],
])(
  "the quark-line rule for a %s octet to V and P: no phi pi at ideal mixing, whoever else is declared",
  (jp, wave) => {
    const lines = (from: string, more: string, family: string) => `multiplets:
  x: { irrep: 8, spinParity: ${jp}, members: [{ name: X, place: rho, mass: 1700 MeV, width: sum }] }
  y: { irrep: 1, spinParity: ${jp}, members: [{ name: Y, place: eta, mass: 1700 MeV, width: sum }] }
mixing:
  - bare: [vector-octet/phi, vector-singlet/omega]
    states: [{ name: phi(1020) }, { name: omega(782) }]
    convention: meson
    angle: ${(Math.atan(Math.SQRT1_2) * 180) / Math.PI} deg
decays:
  - { name: vv, from: ${from}, to: ${VP}, ${wave}, model: a }
  - { name: vw, from: ${from}, to: [vector-singlet, pseudoscalar-octet], ${wave}, model: a }
${more}quarkLine: [[${family}]]
measurements: [{ width: X -> omega(782) pi, value: 60 +- 1 MeV, source: invented }]
`;
    const singlet = `  - { name: wv, from: y, to: ${VP}, ${wave}, model: a }\n`;
    for (const text of [lines("x", "", "vv, vw"), lines("x", singlet, "vv, vw, wv")]) {
      const model = modelOf(text);
      expect(model.couplingCount).toBe(1);
      const evaluation = new Evaluation(
        evaluator(model),
        model.parameters.map(({ start }) => start),
      );
      const widthOf = (name: string) =>
        evaluation.width(model.channels.findIndex(({ isospinChannel }) => isospinChannel === name)).value;
      expect(widthOf("X -> omega(782) pi")).toBeGreaterThan(1e-3);
      expect(widthOf("X -> phi(1020) pi")).toBeLessThan(1e-20);
    }
  },
);

test("a state does not decay into itself, for all that its width would allow; its coupling stays", () => {
  const model = modelOf(`multiplets:
  v: { irrep: 8, spinParity: 1--, members: [{ name: rho(770), place: rho }, { name: K*(892), place: K* }] }
decays:
  - { name: pp, from: v, to: ${PP}, L: 1, model: a }
  - { name: vp, from: v, to: ${VP}, L: 1, model: a }
measurements:
  - { width: rho(770) -> pi pi, value: 147 +- 1 MeV, source: invented }
  - { width: K*(892) -> rho(770) K, value: 0.01 +- 0.01 MeV, source: invented }
`);
  const rows = model.parents.flatMap(({ channels }) =>
    channels.map((k) => model.channels[k]!.isospinChannel),
  );
  expect(model.channels.map(({ isospinChannel }) => isospinChannel)).toContain("K*(892) -> K*(892) pi");
  expect(rows).not.toContain("K*(892) -> K*(892) pi");
  expect(rows).toContain("K*(892) -> K pi");
  expect(model.notes.join()).toContain("K*(892) -> K*(892) pi");
});

test.each([
  ["f2'(1525) -> K*(892) Kbar + c.c.", "give one of them half of their sum."],
  ["a2(1320) -> K_S0 K", "Measurements are of K0 and K0bar"],
])("a measurement of %s is refused with what to write", (channel, mend) => {
  const lines = `decays: [{ from: tensor-octet, to: ${VP}, L: 2, model: a }]
measurements: [{ width: "${channel}", value: 5 +- 1 MeV, source: invented }]
`;
  expect(() => modelOf(lines)).toThrow(mend);
});
